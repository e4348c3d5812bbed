import { type Amount, type Bound, type Figure, reached } from './figure.js';

const heads = ['what', 'ours', 'held against', 'ratio', 'goal', ''] as const;

/** The figures in columns, for people; one row each. */
export function figuresAsTable(figures: readonly Figure[]): string {
  const rows = [heads, ...figures.map(rowOf)];
  const widths = heads.map((_, column) => Math.max(...rows.map((row) => (row[column] ?? '').length)));
  return rows
    .map(
      (row) =>
        `${row
          .map((cell, column) => cell.padEnd(widths[column] ?? 0))
          .join('  ')
          .trimEnd()}\n`,
    )
    .join('');
}

function rowOf(figure: Figure): readonly string[] {
  if (figure.kind === 'skipped') return [figure.what, '', '', '', '', `skipped: ${figure.why}`];
  const { what, ours, rival, ratio, bound } = figure;
  return [
    what,
    amountInWords(ours),
    `${amountInWords(rival)}: ${rival.what}`,
    threeDigits(ratio),
    boundInWords(bound),
    bound === 'none' ? '' : reached(figure) ? 'reached' : 'NOT REACHED',
  ];
}

function boundInWords(bound: Bound): string {
  if (bound === 'none') return 'none';
  return 'atMost' in bound ? `at most ${bound.atMost}` : `at least ${bound.atLeast}`;
}

function amountInWords({ value, unit }: Amount): string {
  return `${threeDigits(value)} ${unit}`;
}

function threeDigits(value: number): string {
  return Math.abs(value) >= 1000 ? String(Math.round(value)) : String(Number(value.toPrecision(3)));
}
