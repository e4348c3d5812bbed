import { allowedInWords, changeInWords, valueInWords } from '../judgement/change-in-words.js';
import type { Compared } from '../judgement/compare.js';
import { alignTable } from './align.js';
import { answerInWords } from './changes.js';
import { comparisonWarnings } from './comparison-warnings.js';
import { type ComparedRecords, outcomeOf, titleOf, verdictWords } from './comparison.js';
import { printable, printableData } from './printable.js';
import { normalizedErrorInWords } from './normalized-error.js';
import { inMinutes } from './in-minutes.js';
import type { Result } from './result.js';
import type { Style } from './style.js';
import { warningInWords } from './warnings.js';

/**
 * What changed between two records, for a terminal of so many columns or for a text file, where each row is a line: the
 * answer first, then the table.
 */
export function comparisonAsText(records: ComparedRecords, style: Style, columns?: number): string {
  return [
    heading(records, style),
    ...comparisonWarnings(records).map((warning) => style.warn(printable(warningInWords(warning)))),
    answer(records, style),
    table(records, style, columns),
    absent(records),
  ]
    .filter((part) => part !== '')
    .join('\n\n')
    .concat('\n');
}

function heading(records: ComparedRecords, style: Style): string {
  const { before, after, tolerance } = records;
  return [
    style.strong(printable(titleOf(records))),
    ...alignTable([rowOf('before', before), rowOf('after', after)], ['left', 'left', 'left', 'left']),
    `tolerance ${printable(tolerance.name)}: ${printable(tolerance.title)}`,
  ].join('\n');
}

function rowOf(when: string, { run, header }: Result): readonly string[] {
  return [when, printable(run), printable(header.procedure.name), printable(inMinutes(header.began))];
}

const outcomes = {
  conforms: 'As it should be.',
  'does-not-conform': 'NOT AS IT SHOULD BE.',
  undecided: 'Not all can be told.',
} as const;

function answer(records: ComparedRecords, style: Style): string {
  return [style.strong(outcomes[outcomeOf(records)]), ...answerInWords(records).map(printable)].join('\n');
}

function table({ comparison }: ComparedRecords, style: Style, columns?: number): string {
  const { findings } = printableData(comparison);
  if (findings.length === 0) return 'No findings: the records hold too little.';
  const head = ['finding', 'before', 'after', 'difference ± U', 'E_n', 'allowed', 'verdict', ''];
  const sides = ['left', 'right', 'right', 'left', 'right', 'left', 'left', 'left'] as const;
  const wide = alignTable([head, ...findings.map(cellsOf)], sides).map((line) => `  ${line}`);
  const room = columns === undefined || columns === 0 ? Infinity : columns;
  const lines = wide.every(({ length }) => length <= room) ? wide : narrowTable(findings);
  return [style.strong('Findings') + '   U = √(U₁² + U₂²), 95 %; E_n = Δ/U', ...lines].join('\n');
}

/** Where a row would not fit: what became of each finding, and below it the numbers, each with its name. */
function narrowTable(findings: readonly Compared[]): readonly string[] {
  const rows = findings.map(cellsOf);
  const heads = alignTable(
    rows.map(([finding = '', , , , , , verdict = '']) => [finding, verdict]),
    ['left', 'left'],
  );
  return rows.flatMap(
    ([, before = '', after = '', difference = '', normalized = '', allowed = '', , note = ''], at) => {
      const numbers = [
        ['before', before],
        ['after', after],
        ['difference', difference],
        ['E_n', normalized],
        ['allowed', allowed],
      ].flatMap(([name, value]) => (value === '' ? [] : [`${name} ${value}`]));
      return [`  ${heads[at] ?? ''}`, `    ${[...numbers, ...(note === '' ? [] : [note])].join('; ')}`];
    },
  );
}

function cellsOf(compared: Compared): readonly string[] {
  const { finding, before, after, difference, expected, verdict, outcome, note } = compared;
  const normalizedError = difference?.normalizedError ?? null;
  const word = verdictWords[verdict];
  return [
    finding,
    before === undefined ? '' : valueInWords(before),
    after === undefined ? '' : valueInWords(after),
    difference === undefined ? '' : changeInWords(compared),
    normalizedError === null ? '' : normalizedErrorInWords(normalizedError),
    expected === undefined ? '' : allowedInWords(expected, compared),
    outcome === 'does-not-conform' ? word.toUpperCase() : word,
    note,
  ];
}

function absent({ comparison }: ComparedRecords): string {
  const names = comparison.inNeither.map(({ finding }) => printable(finding));
  return names.length === 0 ? '' : `In neither record: ${names.join(', ')}.`;
}
