import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import type { FileRead } from '../files/read-text.js';
import { readTolerance } from '../files/read-tolerance.js';
import type { Tolerance } from '../files/tolerance.js';
import type { Baseline } from '../record/baseline.js';
import type { Result } from '../report/result.js';
import { understand } from '../report/understand.js';
import { shipped } from './shipped.js';
import { vocabulary } from './vocabulary.js';

/** An earlier record, understood, and what its findings are compared by. */
export interface LoadedBaseline {
  readonly baseline: Baseline;
  readonly tolerance: FileRead<Tolerance>;
}

/** By what two records are compared where nobody says otherwise. */
export const defaultTolerance = 'unchanged';

/** A record that nothing can be judged against. */
export class BadBaselineError extends RailproofError {
  readonly code = 'BAD_BASELINE';
  readonly exitCode = exitCodes.badFile;
  readonly run: string;

  constructor(run: string, problem: string) {
    super(`${run} can't be a baseline: ${problem}`, {
      advice: 'give a record that ended and is whole; `railproof analyse <run>` shows what one holds',
    });
    this.run = run;
  }
}

/** A tolerance, and nothing that it could be a tolerance to. */
export class NoBaselineError extends RailproofError {
  readonly code = 'NO_BASELINE';
  readonly exitCode = exitCodes.usage;

  constructor(tolerance: string) {
    super(`there is a --tolerance (${tolerance}) and no --baseline that it could hold for`, {
      advice: 'name the earlier record: --baseline <run>',
    });
  }
}

/**
 * Reads the record that a run is to be judged against, and the tolerance to judge by; `relativeTo` is where
 * the path of a tolerance starts.
 * @throws NoRecordError, BadRecordError, BadBaselineError, BadFileError, MissingFileError, NotShippedError
 */
export async function loadBaseline(wanted: {
  readonly run: string;
  readonly tolerance: string;
  readonly relativeTo: string;
}): Promise<LoadedBaseline> {
  const tolerance = await findTolerance(wanted.tolerance, wanted.relativeTo);
  return { baseline: baselineOf(understand(wanted.run), tolerance.value), tolerance };
}

/** @throws BadFileError, MissingFileError, NotShippedError */
export function findTolerance(nameOrPath: string, relativeTo = '.'): Promise<FileRead<Tolerance>> {
  return readTolerance(nameOrPath, vocabulary, { relativeTo, shipped: shipped.tolerances });
}

/** What a later record keeps of this one. @throws BadBaselineError */
export function baselineOf({ run, header, integrity, findings }: Result, tolerance: Tolerance): Baseline {
  if (integrity.kind === 'damaged')
    throw new BadBaselineError(run, `line ${integrity.line} of its journal: ${integrity.problem}`);
  if (integrity.kind === 'cut-off') throw new BadBaselineError(run, 'it was cut off');
  if (findings.length === 0) throw new BadBaselineError(run, 'it shows no findings');
  return {
    run,
    began: header.began,
    procedure: header.procedure.name,
    modules: header.modules.map(({ name }) => name),
    findings: findings
      // JSON has no infinity: of what nothing can be said nothing can be compared.
      .filter(({ interval }) => interval === null || interval.every(Number.isFinite))
      .map(({ name, value, dimension, standardUncertainty, interval, bound, note }) => ({
        name,
        value,
        dimension,
        standardUncertainty,
        interval: interval === null ? null : [interval[0], interval[1]],
        ...(bound === undefined ? {} : { bound }),
        note,
      })),
    tolerance: {
      name: tolerance.name,
      title: tolerance.title,
      findings: tolerance.findings.map(({ finding, expected }) => ({ finding, expected })),
    },
  };
}
