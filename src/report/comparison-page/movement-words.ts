import { changeInWords, valueInWords } from '../../judgement/change-in-words.js';
import type { Compared } from '../../judgement/compare.js';
import { type Movement, movementOf } from '../../judgement/movement.js';
import { capitalised } from '../../quantity/capitalised.js';

/** What is said of findings that are others: those of one module moved, those of two modules differ. */
export interface MovementVerbs {
  readonly moved: string;
  readonly move: string;
  /** Before what it was and what it is: `moved from`, `differs: `. */
  readonly each: string;
}

export function verbsOf(sameModules: boolean): MovementVerbs {
  return sameModules
    ? { moved: 'moved', move: 'move', each: 'moved ' }
    : { moved: 'differs', move: 'differ', each: 'differs: ' };
}

/** `It moved`, `The droop was not seen to differ`, `Whether it moved can not be told`. */
export function seenInWords(subject: string, compared: Compared, sameModules: boolean): string {
  const { moved, move } = verbsOf(sameModules);
  const words: Readonly<Record<Movement, string>> = {
    moved: `${subject} ${moved}`,
    'as-it-was': `${subject} was not seen to ${move}`,
    'as-it-stands': `whether ${subject} ${moved} can not be told without an uncertainty of both`,
    'not-told': `whether ${subject} ${moved} can not be told`,
  };
  return capitalised(words[movementOf(compared)]);
}

/**
 * `from 5.281 A to 4.581 A, by -0.700 ± 0.019 A (-13 %)`; of different modules, which came from nowhere, `5.281 A
 * earlier and 4.581 A later, by …`; what only one record has is said so.
 */
export function bothInWords(compared: Compared, sameModules: boolean): string {
  const { before, after, difference } = compared;
  if (before === undefined || after === undefined) return onlyInWords(compared);
  const [was, is] = [valueInWords(before), valueInWords(after)];
  const both = sameModules ? `from ${was} to ${is}` : `${was} earlier and ${is} later`;
  const change = difference === undefined ? '' : changeInWords(compared);
  return change === '' ? both : `${both}, by ${change}`;
}

/** `usable-current moved from … to …`, what an arrow says; undefined of what did not move, and has none. */
export function arrowInWords(compared: Compared, sameModules: boolean): string | undefined {
  if (movementOf(compared) !== 'moved') return undefined;
  return `${compared.finding} ${verbsOf(sameModules).each}${bothInWords(compared, sameModules)}`;
}

/** How far what moved can be believed: it is told with 95 %, by a factor that covers so much. */
export function oneInTwenty(sameModules: boolean): string {
  const did = sameModules ? 'did not move' : 'do not differ';
  return `That is told with 95 %: of twenty findings that ${did} one may seem to.`;
}

function onlyInWords({ before, after }: Compared): string {
  if (after !== undefined) return `${valueInWords(after)} in the later record only`;
  return before === undefined ? '' : `${valueInWords(before)} in the earlier record only`;
}
