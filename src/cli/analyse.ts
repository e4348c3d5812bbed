import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { runSuite } from '../report/junit/run-suite.js';
import type { Result } from '../report/result.js';
import { understand } from '../report/understand.js';
import { statusOfRecord } from './exit-status.js';
import { placeForJunit } from './junit-written.js';
import { resumeHint } from './resume-hint.js';
import { shown } from './shown.js';
import type { Streams } from './streams.js';

/** A record that is not whole was to be refused. */
export class NotWholeError extends RailproofError {
  readonly code = 'NOT_WHOLE';
  readonly exitCode = exitCodes.badFile;

  constructor({ run, integrity }: Result) {
    const what =
      integrity.kind === 'damaged'
        ? `line ${integrity.line} of its journal: ${integrity.problem}`
        : 'its journal ends without an end';
    super(`${run}: ${what}`, {
      advice:
        '`railproof analyse` without --strict shows what is whole; `railproof run --resume` goes on with a run that was broken off',
    });
  }
}

/** `railproof analyse`: what a record shows, worked out again; it ends with the status that the run ended with. */
export async function analyseRecord(
  wanted: {
    readonly run: string;
    readonly strict?: boolean;
    readonly json?: boolean;
    readonly junit?: string;
  },
  streams: Streams,
): Promise<ExitCode> {
  const keepJunit = await placeForJunit(wanted.junit);
  const result = understand(wanted.run);
  await keepJunit(() => runSuite(result));
  if (wanted.strict === true && result.integrity.kind !== 'whole') throw new NotWholeError(result);
  streams.stdout.write(shown(result, wanted.json === true, streams));
  streams.stderr.write(resumeHint(wanted.run, result));
  return statusOfRecord(result);
}
