import { printable } from '../quantity/printable.js';
import { endedHow, type Result } from '../report/result.js';
import { quoted } from './quoted.js';

/** How to go on with a run that was broken off, a line; nothing where there is nothing to go on with. */
export function resumeHint(path: string, result: Result): string {
  const { evidence, header, integrity } = result;
  const { stepsDone } = evidence;
  // Nobody could copy such a name off the screen.
  if (printable(path) !== path) return '';
  if (integrity.kind === 'damaged' || endedHow(result).how === 'completed' || stepsDone === 0) return '';
  const where = stepsDone === header.steps.length ? 'sees to its end' : `goes on with step ${stepsDone + 1}`;
  return `\`railproof run --resume ${quoted(path)}\` ${where}.\n`;
}
