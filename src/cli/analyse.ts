import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { jsonText } from '../report/json-text.js';
import { resultAsJson } from '../report/json.js';
import { endedHow, type Result } from '../report/result.js';
import { styleFor } from '../report/style.js';
import { resultAsText } from '../report/text.js';
import { understand } from '../report/understand.js';
import { statusOfOutcome } from './exit-status.js';
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
    super(`${run}: ${what}`, { advice: 'without --strict, what is whole is shown' });
  }
}

/** `railproof analyse`: what a record shows, worked out again. */
export function analyseRecord(
  wanted: { readonly run: string; readonly strict?: boolean; readonly json?: boolean },
  streams: Streams,
): ExitCode {
  const result = understand(wanted.run);
  if (wanted.strict === true && result.integrity.kind !== 'whole') throw new NotWholeError(result);
  streams.stdout.write(
    wanted.json === true
      ? jsonText(resultAsJson(result))
      : resultAsText(result, styleFor(streams.stdout, streams.environment)),
  );
  const { how } = endedHow(result);
  return how === 'stopped' ? exitCodes.stopped : statusOfOutcome(result.outcome);
}
