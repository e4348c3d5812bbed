import { allowedInWords, changeInWords, valueInWords } from '../../judgement/change-in-words.js';
import type { Compared } from '../../judgement/compare.js';
import { bothMeasured, type Measured } from '../../judgement/difference.js';
import { foundInWords } from '../run-charts/in-words.js';
import { type SpanRow, spanRows } from '../chart/span-rows.js';
import type { ComparedRecords } from '../comparison.js';
import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import { figure } from '../page/figure.js';
import { allowanceInWords, hasMoved, valuePlusMinus } from './compared-words.js';
import { arrowInWords, seenInWords } from './movement-words.js';
import { bothSides, type BothSides, type PageSide } from './sides.js';

/**
 * A chart for each quantity that moved, or of which can't be told whether it did: its value with its interval in
 * each record, and what was allowed. Words that changed stand in a table.
 */
export function changesSection(records: ComparedRecords): Markup | undefined {
  const sides = bothSides(records);
  const { sameModules } = records.comparison;
  const shown = records.comparison.findings.filter(
    (compared) => hasMoved(compared) || compared.verdict === 'cannot-tell',
  );
  const charts = shown.flatMap((compared, index) => {
    const both = measuredOf(compared);
    return both === undefined
      ? []
      : [chartOf(compared, both, { sides, sameModules, id: `change-${index + 1}` })];
  });
  const words = shown.filter((compared) => measuredOf(compared) === undefined);
  if (shown.length === 0) return undefined;
  return section(
    'One by one',
    table(
      `Words that ${sameModules ? 'are others than before' : 'differ'}, or could not be told.`,
      [
        { heading: 'Finding', as: 'name' },
        { heading: 'Earlier' },
        { heading: 'Later' },
        { heading: 'What became of it', as: 'long' },
      ],
      words.map((compared) => [
        compared.finding,
        compared.before === undefined ? '' : valueInWords(compared.before),
        compared.after === undefined ? '' : valueInWords(compared.after),
        hasMoved(compared)
          ? element('strong', { 'data-of': 'moved' }, allowanceInWords(compared))
          : allowanceInWords(compared),
      ]),
    ),
    charts,
  );
}

function measuredOf({ before, after }: Compared): readonly [Measured, Measured] | undefined {
  return before === undefined || after === undefined ? undefined : bothMeasured(before, after);
}

function chartOf(
  compared: Compared,
  [then, now]: readonly [Measured, Measured],
  {
    sides: [earlier, later],
    sameModules,
    id,
  }: { readonly sides: BothSides; readonly sameModules: boolean; readonly id: string },
): readonly Markup[] {
  const { finding, tolerance, expected } = compared;
  const moved = arrowInWords(compared, sameModules);
  // What is allowed is so much of the earlier value, and nobody knows that where it is at least so much.
  const band =
    tolerance === undefined || expected === undefined || then.bound !== undefined
      ? undefined
      : {
          from: then.value - tolerance,
          to: then.value + tolerance,
          says: `allowed: ${allowedInWords(expected, compared)}`,
        };
  const change = changeInWords(compared);
  const by = change === '' ? '' : `${moved === undefined ? ':' : ' by'} ${change}`;
  return [
    element('h3', {}, finding),
    figure(
      finding,
      spanRows({
        id,
        title: `${finding}, ${earlier.name} and ${later.name}`,
        description: `${earlier.name}: ${foundInWords(then)}. ${later.name}: ${foundInWords(now)}. ${allowanceInWords(compared)}.`,
        x: { label: finding, dimension: then.dimension },
        rows: [rowOf(then, earlier), rowOf(now, later)],
        roomForWords: 150,
        ...(band === undefined ? {} : { band }),
        shifts:
          moved === undefined
            ? []
            : [{ from: { row: 0, value: then.value }, to: { row: 1, value: now.value }, says: moved }],
      }),
      `${seenInWords('it', compared, sameModules)}${by}; ${allowanceInWords(compared)}.`,
    ),
  ];
}

function rowOf(finding: Measured, { name, shape, look }: PageSide): SpanRow {
  return {
    name,
    says: valuePlusMinus(finding),
    more: `${finding.name}, ${name}: ${foundInWords(finding)}`,
    value: finding.value,
    between: finding.bound === undefined ? (finding.interval ?? undefined) : undefined,
    isLeast: finding.bound !== undefined,
    shape,
    look,
  };
}
