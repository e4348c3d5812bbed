import { allowedInWords, changeInWords } from '../../judgement/change-in-words.js';
import type { Compared } from '../../judgement/compare.js';
import type { Difference } from '../../judgement/difference.js';
import type { KeyEntry, Shape } from '../chart/shapes.js';
import { type SpanRow, spanRows } from '../chart/span-rows.js';
import { verdictWords, type ComparedRecords } from '../comparison.js';
import type { Markup } from '../page/markup.js';
import { figure } from '../page/figure.js';
import { hasMoved } from './compared-words.js';
import { oneInTwenty, verbsOf } from './movement-words.js';

/** A quantity of which the tolerance says how far it may move, and by how much of that it did. */
interface Allowed {
  readonly compared: Compared;
  readonly share: number;
  readonly between: readonly [low: number, high: number] | undefined;
}

/** So many times what is allowed are drawn; what moved further stands at the edge. */
const furthest = 4;
const least = 1.3;

const looks = {
  changed: { shape: 'square', look: 1 },
  'cannot-tell': { shape: 'triangle-down', look: 4 },
  unchanged: { shape: 'circle', look: 0 },
} as const satisfies Record<string, { readonly shape: Shape; readonly look: number }>;

const briefly = { changed: 'changed', 'cannot-tell': 'cannot tell', unchanged: 'within' };

/**
 * All quantities with a tolerance on one axis: between −100 % and 100 % is what is allowed. Undefined where there is
 * none in both records.
 */
export function allowanceFigure({
  comparison: { findings, sameModules },
}: ComparedRecords): Markup | undefined {
  const allowed = findings.flatMap(allowedOf);
  if (allowed.length === 0) return undefined;
  const edge = Math.min(furthest, Math.max(least, ...allowed.map(reach)) * 1.05);
  const rows = allowed.map(rowOf);
  const { moved, move } = verbsOf(sameModules);
  const title = `How far each ${moved}, of what is allowed`;
  return figure(
    title,
    spanRows({
      id: 'allowance',
      title,
      description: `${rows.map(({ more }) => more).join('. ')}.`,
      x: { label: 'Difference, of what is allowed', dimension: 'ratio', from: -edge, to: edge },
      rows,
      band: { from: -1, to: 1, says: 'allowed' },
      line: 0,
      shifts: allowed.flatMap(({ compared, share }, row) =>
        hasMoved(compared)
          ? [
              {
                from: { row, value: 0 },
                to: { row, value: share },
                says: `${compared.finding} ${moved} by ${changeInWords(compared)}`,
              },
            ]
          : [],
      ),
      key: keyOf(allowed),
    }),
    'Shaded: allowed. The bars hold each difference with 95 %. An arrow from the middle marks what ' +
      `${moved} beyond its uncertainty; what has none was not seen to ${move}, or nobody can tell. ` +
      `${oneInTwenty(sameModules)} Words, least values and what nothing is asked of are in the tables only.`,
  );
}

function allowedOf(compared: Compared): readonly Allowed[] {
  const { difference, tolerance, before, after } = compared;
  if (difference === undefined || tolerance === undefined || !(tolerance > 0)) return [];
  if (before?.bound !== undefined || after?.bound !== undefined) return [];
  const share = difference.value / tolerance;
  return [{ compared, share, between: betweenOf(difference, tolerance) }];
}

function betweenOf({ value, expanded }: Difference, tolerance: number): Allowed['between'] {
  if (expanded === null) return undefined;
  return [(value - expanded) / tolerance, (value + expanded) / tolerance];
}

function reach({ share, between }: Allowed): number {
  return Math.max(Math.abs(share), ...(between ?? []).map(Math.abs));
}

function rowOf({ compared, share, between }: Allowed): SpanRow {
  const { finding, expected, verdict } = compared;
  const allowed = expected === undefined ? '' : `; allowed ${allowedInWords(expected, compared)}`;
  return {
    name: finding,
    says: briefly[lookOf(compared)],
    more: `${finding}: ${changeInWords(compared)}${allowed}; ${verdictWords[verdict]}`,
    value: share,
    between,
    ...looks[lookOf(compared)],
  };
}

function lookOf({ verdict }: Compared): keyof typeof looks {
  return verdict === 'changed' || verdict === 'cannot-tell' ? verdict : 'unchanged';
}

function keyOf(allowed: readonly Allowed[]): readonly KeyEntry[] {
  const there = new Set(allowed.map(({ compared }) => lookOf(compared)));
  return (Object.keys(looks) as (keyof typeof looks)[])
    .filter((each) => there.has(each))
    .map((each) => ({
      ...looks[each],
      says: each === 'unchanged' ? 'within what is allowed' : briefly[each],
    }));
}
