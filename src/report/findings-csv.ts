import type { Finding } from '../analysis/finding.js';
import { plainDecimal } from '../quantity/decimal-text.js';
import type { Dimension } from '../quantity/quantity.js';
import { toJsonUnit, ucumCode } from '../quantity/ucum.js';
import { csvText, textCell } from '../record/csv.js';
import { printable } from './printable.js';
import { modulesInWords } from './record-heading.js';
import { endedHow, type Result } from './result.js';

/** The columns of the table; more may be added at its end. */
export const findingsColumns = [
  'record',
  'began',
  'module',
  'circuit',
  'procedure',
  'simulated',
  'ended',
  'integrity',
  'outcome',
  'finding',
  'value',
  'unit',
  'standard uncertainty',
  'low 95 %',
  'high 95 %',
  'bound',
  'step',
  'required',
  'decision',
  'note',
] as const;

type Row = Partial<Readonly<Record<(typeof findingsColumns)[number], string>>>;

/** A record as it was understood, or why it could not be. */
export type RecordListed =
  | { readonly kind: 'result'; readonly result: Result }
  | { readonly kind: 'unreadable'; readonly run: string; readonly why: string };

/**
 * The findings of records as CSV (RFC 4180, UTF-8): a row for each finding, and for each requirement on what was not
 * found, so that a spreadsheet may be narrowed to one finding of all modules, or to one module. A record with
 * neither has a row all the same. Numbers are plain decimals in the unit beside them, which is that of the JSON (UCUM;
 * a ratio is in %); a word has no unit. Where there is no interval with two ends its cells are empty.
 */
export function findingsAsCsv(records: readonly RecordListed[]): string {
  return csvText(findingsColumns, records.flatMap(rowsOf));
}

function rowsOf(record: RecordListed): readonly Row[] {
  if (record.kind === 'unreadable')
    return [{ record: text(record.run), ended: 'unreadable', note: text(record.why) }];
  const { result } = record;
  const common = aboutRecord(result);
  const { findings, decisions } = result;
  const notFound = new Set(
    decisions.map(({ finding }) => finding).filter((name) => !findings.some((found) => found.name === name)),
  );
  const rows = [
    ...findings.map((finding) => ({ ...aboutFinding(finding), ...decidedOn(finding.name, result) })),
    ...[...notFound].map((name) => ({
      finding: text(name),
      ...decidedOn(name, result),
      note: 'was not measured',
    })),
  ];
  return rows.length === 0 ? [common] : rows.map((row) => ({ ...common, ...row }));
}

function aboutRecord(result: Result): Row {
  const { run, header, integrity, outcome } = result;
  return {
    record: text(run),
    began: text(header.began),
    module: text(modulesInWords(header)),
    circuit: header.circuit,
    procedure: text(header.procedure.name),
    simulated: header.bench.simulated ? 'yes' : 'no',
    ended: endedHow(result).how,
    integrity: integrity.kind,
    outcome,
  };
}

function aboutFinding({
  name,
  value,
  dimension,
  standardUncertainty,
  interval,
  bound,
  step,
  note,
}: Finding): Row {
  const ends = interval?.every(Number.isFinite) === true ? interval : [null, null];
  return {
    finding: text(name),
    value: typeof value === 'string' ? text(value) : number(value, dimension),
    unit: dimension === null ? '' : ucumCode(dimension),
    'standard uncertainty': number(standardUncertainty, dimension),
    'low 95 %': number(ends[0], dimension),
    'high 95 %': number(ends[1], dimension),
    bound: bound ?? '',
    step: step === null ? '' : String(step),
    note: text(note),
  };
}

/** All that was required of it; where more than one thing was, in the same order. */
function decidedOn(name: string, { decisions }: Result): Row {
  const of = decisions.filter(({ finding }) => finding === name);
  return {
    required: text(of.map(({ requirement }) => requirement).join('; ')),
    decision: of.map(({ outcome }) => outcome).join('; '),
  };
}

/** Foreign texts stay in one line, and none is taken for a formula. */
function text(words: string): string {
  return textCell(printable(words));
}

/** Far more than any instrument gives, and without what adding in binary leaves behind; the JSON holds every digit. */
const significant = 10;

function number(value: number | null | undefined, dimension: Dimension | null): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return '';
  const inUnit = dimension === null ? value : toJsonUnit(value, dimension);
  return plainDecimal(Number(inUnit.toPrecision(significant)));
}
