import { distance } from 'fastest-levenshtein';

/**
 * The spelling closest to what was typed, or undefined when nothing is close, so that a guess is offered
 * only where a person would make the same one: one edit in a short word, two from five letters on, one
 * for each three letters in a long one, and never all of them. Two neighbouring letters exchanged count as one edit.
 */
export function nearest(typed: string, spellings: Iterable<string>): string | undefined {
  const word = typed.slice(0, longestGuessed).toLowerCase();
  let best: string | undefined;
  let fewest = (word.length < 5 ? 1 : Math.max(2, Math.floor(word.length / 3))) + 1;
  for (const spelling of spellings) {
    const edits = editsBetween(word, spelling.toLowerCase());
    if (edits < fewest && edits < spelling.length) {
      fewest = edits;
      best = spelling;
    }
  }
  return best;
}

/** Ready to follow a message: `; did you mean 'dropout-search'?`, or nothing. */
export function didYouMean(typed: string, spellings: Iterable<string>): string {
  const guess = nearest(typed, spellings);
  return guess === undefined ? '' : `; did you mean '${guess}'?`;
}

const longestGuessed = 64;

function editsBetween(one: string, other: string): number {
  let at = 0;
  while (at < one.length && one[at] === other[at]) at += 1;
  const exchanged = one.slice(0, at) + one.slice(at + 1, at + 2) + one.slice(at, at + 1) + one.slice(at + 2);
  return one !== other && exchanged === other ? 1 : distance(one, other);
}
