import type { Finding } from '../analysis/finding.js';
import { toJsonUnit, ucumCode } from '../quantity/ucum.js';
import { modulesInWords } from './record-heading.js';
import { endedHow, type Result } from './result.js';
import type { RunJson } from './schema/run-schema.js';
import { takenOver } from './taken-over.js';

/** The name and version of the format; the number changes when a reader would have to. */
export const resultFormat = 'railproof/run 1';

/**
 * The result as one JSON object, for `--json` and for findings.json. Numbers are in the unit beside them,
 * named by its UCUM code (a ratio is in %); a finding that is a word has the unit null.
 */
export function resultAsJson(result: Result): RunJson {
  const { how, reason } = endedHow(result);
  return {
    format: resultFormat,
    run: result.run,
    module: modulesInWords(result.header),
    ...circuitAsJson(result),
    procedure: result.header.procedure.name,
    ...baselineAsJson(result),
    ...takenOverAsJson(result),
    ended: how === 'failed' ? 'stopped' : how,
    reason,
    outcome: result.outcome,
    integrity: result.integrity,
    ...watchmanAsJson(result),
    readings: result.evidence.readings,
    findings: result.findings.map(findingAsJson),
    decisions: result.decisions.map(({ finding, requirement, outcome, probability, note }) => ({
      finding,
      requirement,
      outcome,
      probability,
      note,
    })),
  };
}

/** Only where there are several modules. */
function circuitAsJson({ header: { circuit, modules } }: Result): Pick<RunJson, 'circuit' | 'modules'> {
  return circuit === 'single' ? {} : { circuit, modules: modules.map(({ name }) => name) };
}

/** Only where there was one. */
function baselineAsJson({ header: { baseline } }: Result): Pick<RunJson, 'baseline'> {
  if (baseline === undefined) return {};
  const { run, modules, tolerance } = baseline;
  return { baseline: { run, modules, tolerance: tolerance.name } };
}

/** Only where there was one. */
function takenOverAsJson({ evidence }: Result): Pick<RunJson, 'takenOver'> {
  const parts = takenOver(evidence);
  if (parts.length === 0) return {};
  return {
    takenOver: parts.map(({ run, began, first, last }) => ({ run, began, firstStep: first, lastStep: last })),
  };
}

/** Only where it had to act. */
function watchmanAsJson({ watchman }: Result): Pick<RunJson, 'watchman'> {
  if (watchman === undefined) return {};
  const { noticed, why, address, attempts, outcome, reason, took } = watchman;
  return { watchman: { noticed, why, address, attempts, outcome, reason, took } };
}

function findingAsJson(finding: Finding): RunJson['findings'][number] {
  const { dimension } = finding;
  // JSON knows no infinity, and an interval without an end says nothing: there is none then.
  const interval = finding.interval?.every(Number.isFinite) === true ? finding.interval : null;
  const standardUncertainty = Number.isFinite(finding.standardUncertainty)
    ? finding.standardUncertainty
    : null;
  const inUnit = (value: number): number => (dimension === null ? value : toJsonUnit(value, dimension));
  return {
    name: finding.name,
    value: typeof finding.value === 'number' ? inUnit(finding.value) : finding.value,
    unit: dimension === null ? null : ucumCode(dimension),
    standardUncertainty: standardUncertainty === null ? null : inUnit(standardUncertainty),
    bound: finding.bound ?? null,
    interval: interval === null ? null : [inUnit(interval[0]), inUnit(interval[1])],
    coverage: interval === null ? null : 0.95,
    step: finding.step,
    note: finding.note,
    budget: finding.budget.map(({ name, kind, uncertainty, degreesOfFreedom }) => ({
      name,
      type: kind,
      uncertainty: inUnit(uncertainty),
      // JSON knows no infinity; null says that the value is taken as known.
      degreesOfFreedom: Number.isFinite(degreesOfFreedom) ? degreesOfFreedom : null,
    })),
    factors: finding.factors,
  };
}
