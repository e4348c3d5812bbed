import { valueInWords } from '../../judgement/change-in-words.js';
import type { Compared } from '../../judgement/compare.js';
import type { Comparable } from '../../judgement/difference.js';
import type { TurnPlace, TurnRow } from '../chart/turn-rows.js';
import { foundInWords } from '../run-charts/in-words.js';
import { arrowInWords } from './movement-words.js';
import type { BothSides, PageSide } from './sides.js';

/** Below the plot: where it turned in each record, and by an arrow that it moved. */
export function turnRow(
  words: string,
  compared: Compared,
  { sides: [earlier, later], sameModules }: { readonly sides: BothSides; readonly sameModules: boolean },
): TurnRow {
  const { before, after } = compared;
  const places = [...placeOf(before, earlier, words), ...placeOf(after, later, words)];
  const which = before === undefined ? ', later only' : after === undefined ? ', earlier only' : '';
  const values = [
    ...new Set([before, after].flatMap((each) => (each === undefined ? [] : [valueInWords(each)]))),
  ];
  return {
    name: `${words} ${values.join(' → ')}${which}`,
    places,
    moved: arrowInWords(compared, sameModules),
  };
}

function placeOf(finding: Comparable | undefined, side: PageSide, words: string): readonly TurnPlace[] {
  if (finding === undefined || typeof finding.value !== 'number') return [];
  const { value, interval } = finding;
  const { name, shape, look } = side;
  const between = interval?.every(Number.isFinite) === true ? interval : undefined;
  return [{ at: value, between, shape, look, says: `${words}, ${name}: ${foundInWords(finding)}` }];
}
