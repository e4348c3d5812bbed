import type { Compared } from '../judgement/compare.js';
import type { Comparable, Difference } from '../judgement/difference.js';
import type { Expected } from '../record/baseline.js';
import type { Dimension } from '../quantity/quantity.js';
import { toJsonUnit, ucumCode } from '../quantity/ucum.js';
import { type ComparedRecords, outcomeOf } from './comparison.js';
import { endedHow, type Result } from './result.js';
import type { ComparisonJson } from './schema/comparison-schema.js';

type ComparedJson = ComparisonJson['findings'][number];

/** The name and version of the format; the number changes when a reader would have to. */
export const comparisonFormat = 'railproof/compare 1';

/**
 * A comparison as one JSON object. Numbers are in the unit beside them, named by its UCUM code; a ratio is in
 * %, and so is the share of a difference in the earlier value.
 */
export function comparisonAsJson(records: ComparedRecords): ComparisonJson {
  const { before, after, tolerance, comparison } = records;
  return {
    format: comparisonFormat,
    before: sideAsJson(before),
    after: sideAsJson(after),
    sameModules: comparison.sameModules,
    tolerance: { name: tolerance.name, title: tolerance.title },
    outcome: outcomeOf(records),
    findings: comparison.findings.map(comparedAsJson),
    inNeither: comparison.inNeither.map(({ finding }) => finding),
  };
}

function sideAsJson(result: Result): ComparisonJson['before'] {
  const { run, header, integrity } = result;
  const { how, reason } = endedHow(result);
  return {
    run,
    modules: header.modules.map(({ name }) => name),
    procedure: header.procedure.name,
    began: header.began,
    ended: how === 'failed' ? 'stopped' : how,
    reason,
    integrity,
  };
}

function comparedAsJson(compared: Compared): ComparedJson {
  const { finding, before, after, difference, expected, tolerance, verdict, outcome, probability, note } =
    compared;
  return {
    name: finding,
    before: before === undefined ? null : findingAsJson(before),
    after: after === undefined ? null : findingAsJson(after),
    difference: difference === undefined ? null : differenceAsJson(difference),
    normalizedError: difference?.normalizedError ?? null,
    expected: expected === undefined ? null : expectedAsJson(expected),
    tolerance:
      tolerance === undefined || difference === undefined
        ? null
        : { value: toJsonUnit(tolerance, difference.dimension), unit: ucumCode(difference.dimension) },
    verdict,
    outcome,
    probability,
    note,
  };
}

function findingAsJson({
  value,
  dimension,
  standardUncertainty,
  interval,
  bound,
  note,
}: Comparable): NonNullable<ComparedJson['before']> {
  return {
    value: typeof value === 'number' && dimension !== null ? toJsonUnit(value, dimension) : value,
    unit: dimension === null ? null : ucumCode(dimension),
    standardUncertainty: inUnit(standardUncertainty, dimension),
    interval:
      interval === null ? null : [numberInUnit(interval[0], dimension), numberInUnit(interval[1], dimension)],
    bound: bound ?? null,
    note,
  };
}

function differenceAsJson(difference: Difference): NonNullable<ComparedJson['difference']> {
  const { value, dimension, standardUncertainty, expanded, share } = difference;
  return {
    value: toJsonUnit(value, dimension),
    unit: ucumCode(dimension),
    standardUncertainty: inUnit(standardUncertainty, dimension),
    expandedUncertainty: inUnit(expanded, dimension),
    coverage: expanded === null ? null : 0.95,
    share: share === null ? null : toJsonUnit(share, 'ratio'),
  };
}

/** How far `within` may be stands beside it, as the tolerance. */
function expectedAsJson(expected: Expected): NonNullable<ComparedJson['expected']> {
  return expected.kind === 'becomes' ? { kind: expected.kind, word: expected.word } : { kind: expected.kind };
}

function inUnit(value: number | null, dimension: Dimension | null): number | null {
  return value === null ? null : numberInUnit(value, dimension);
}

function numberInUnit(value: number, dimension: Dimension | null): number {
  return dimension === null ? value : toJsonUnit(value, dimension);
}
