import { basename } from 'node:path';
import { exitCodeOf, exitCodes, type ExitCode, type RailproofError } from '../errors/railproof-error.js';
import type { Driver } from '../files/driver.js';
import type { FileRead } from '../files/read-text.js';
import { printable, printableLines } from '../quantity/printable.js';
import { atDriverLine } from './driver-line.js';
import { errorText } from './error-text.js';
import { statusOfOutcome } from './exit-status.js';
import { type PlanPerformed, reportOf } from './perform-plan.js';
import { resumeHint } from './resume-hint.js';
import { safetyWords } from './safety-words.js';
import { say } from './say.js';
import { shown } from './shown.js';
import type { Streams } from './streams.js';

/** The result first, where there is one; then, whatever happened, whether the load is off, as the last words. */
export function tell(
  performed: PlanPerformed,
  drivers: readonly FileRead<Driver>[],
  { json, junitUnkept }: { readonly json: boolean; readonly junitUnkept: RailproofError | undefined },
  streams: Streams,
): ExitCode {
  const { understood, ending, folder, status } = performed;
  if (understood.kind === 'result') streams.stdout.write(shown(understood.result, json, streams));
  streams.stderr.write(`record: ${printable(folder.path)}\n`);
  const report = reportOf(performed);
  if (report !== undefined) streams.stderr.write(`report: ${basename(report)}, in that folder\n`);
  if (ending.how !== 'completed') say(streams.stderr, errorText(atDriverLine(ending.error, drivers)));
  if (understood.kind === 'error') say(streams.stderr, errorText(understood.error));
  if (understood.kind === 'result' && understood.unkept !== undefined) {
    const missing = printable(understood.unkept.message);
    say(streams.stderr, `${missing}; the journal holds it all, and \`railproof analyse\` shows it.`);
  }
  if (understood.kind === 'result') streams.stderr.write(resumeHint(folder.path, understood.result));
  if (junitUnkept !== undefined) say(streams.stderr, errorText(junitUnkept));
  tellSafety(performed, streams);
  if (status !== exitCodes.conforms) return status;
  if (understood.kind === 'error') return exitCodeOf(understood.error);
  const judged = statusOfOutcome(understood.result.outcome);
  return judged === exitCodes.conforms && junitUnkept !== undefined ? junitUnkept.exitCode : judged;
}

/** Last of all what a person must see to. */
function tellSafety(performed: PlanPerformed, { stderr }: Streams): void {
  for (const { confirmed, text } of safetyWords(performed)) {
    if (confirmed) stderr.write(`${text}\n`);
    else say(stderr, `\n${printableLines(text)}`);
  }
}
