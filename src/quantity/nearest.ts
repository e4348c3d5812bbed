import { distance } from 'fastest-levenshtein';

/**
 * The spelling closest to what was typed, or undefined when nothing is close: at most one edit for each
 * three letters (and always one), so that a guess is offered only where a person would make the same one.
 */
export function nearest(typed: string, spellings: Iterable<string>): string | undefined {
  const word = typed.slice(0, longestGuessed).toLowerCase();
  const farthest = Math.max(1, Math.floor(word.length / 3));
  let best: string | undefined;
  let fewest = farthest + 1;
  for (const spelling of spellings) {
    const edits = distance(word, spelling.toLowerCase());
    if (edits < fewest) {
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
