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
import { allowanceInWords, hasMoved, movedInWords, valuePlusMinus } from './compared-words.js';
import { bothSides, type BothSides, type PageSide } from './sides.js';

/**
 * A chart for each quantity that moved, or of which can't be told whether it did: its value with its interval in
 * each record, and what was allowed. Words that changed stand in a table.
 */
export function changesSection(records: ComparedRecords): Markup | undefined {
  const sides = bothSides(records);
  const shown = records.comparison.findings.filter(
    (compared) => hasMoved(compared) || compared.verdict === 'cannot-tell',
  );
  const charts = shown.flatMap((compared, index) => {
    const both = measuredOf(compared);
    return both === undefined ? [] : [chartOf(compared, both, sides, `change-${index + 1}`)];
  });
  const words = shown.filter((compared) => measuredOf(compared) === undefined);
  if (shown.length === 0) return undefined;
  return section(
    'One by one',
    table(
      'Words that are others than before, or could not be told.',
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
  [earlier, later]: BothSides,
  id: string,
): readonly Markup[] {
  const { finding, tolerance, expected } = compared;
  const isMoved = hasMoved(compared);
  const band =
    tolerance === undefined || expected === undefined
      ? undefined
      : {
          from: then.value - tolerance,
          to: then.value + tolerance,
          says: `allowed: ${allowedInWords(expected, compared)}`,
        };
  const change = changeInWords(compared);
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
        shifts: isMoved
          ? [
              {
                from: { row: 0, value: then.value },
                to: { row: 1, value: now.value },
                says: `${finding} moved ${movedInWords(compared)}`,
              },
            ]
          : [],
      }),
      `${isMoved ? 'It moved' : 'Not seen to move'}${change === '' ? '' : ` by ${change}`}; ${allowanceInWords(compared)}.`,
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
