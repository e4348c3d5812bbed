import type { Shape } from '../chart/shapes.js';
import type { ComparedRecords } from '../comparison.js';
import { modulesInWords } from '../record-heading.js';
import type { Result } from '../result.js';

/** One of the two records, and how it is told from the other in every chart: by words, shape, dashes and colour. */
export interface PageSide {
  /** `earlier`; of different modules also which: `earlier, K1`. */
  readonly name: string;
  readonly shape: Shape;
  readonly look: number;
  readonly result: Result;
}

export type BothSides = readonly [earlier: PageSide, later: PageSide];

export const earlierShape: Shape = 'circle';
export const laterShape: Shape = 'diamond';

/** Of which of the two a chart shows something: `both records`, `the earlier record only`. */
export function recordsShown(shown: readonly PageSide[]): string {
  const [only] = shown;
  return shown.length === 1 && only !== undefined
    ? `the ${only.look === 0 ? 'earlier' : 'later'} record only`
    : 'both records';
}

export function bothSides({ before, after, comparison }: ComparedRecords): BothSides {
  const named = (word: string, { header }: Result): string =>
    comparison.sameModules ? word : `${word}, ${modulesInWords(header)}`;
  return [
    { name: named('earlier', before), shape: earlierShape, look: 0, result: before },
    { name: named('later', after), shape: laterShape, look: 1, result: after },
  ];
}
