import type { Acknowledgement } from '../record/journal-event.js';
import type { Seconds } from '../quantity/quantity.js';

/**
 * What the person at the bench did when asked: a caution acknowledged or refused, a question answered, or the
 * run stopped at it. `t` is when, by the clock of the run.
 */
export type RecordedAnswer =
  | { readonly t: Seconds; readonly acknowledged: string; readonly by: Acknowledgement | 'refused' }
  | { readonly t: Seconds; readonly asked: string; readonly answered: string }
  | { readonly t: Seconds; readonly asked: string; readonly stopped: string };

export const answersFormat = 'railproof/answers 1';

/** The file format is JSON Lines: a first line that names it, then an answer a line, in the order given. */
export const answersHeader = `${JSON.stringify({ format: answersFormat })}\n`;

export function answerLine(answer: RecordedAnswer): string {
  return `${JSON.stringify(answer)}\n`;
}

/** The answers of a file, or the number of the first line that is not in the format. */
export function readAnswers(text: string): readonly RecordedAnswer[] | { readonly badLine: number } {
  const [first, ...lines] = text.split('\n').map(parsed);
  if (!isObject(first) || first['format'] !== answersFormat) return { badLine: 1 };
  // What stands behind the last end of line is nothing, or an answer that was cut off.
  const answers = lines.slice(0, -1);
  const bad = answers.findIndex((answer) => !isAnswer(answer));
  return bad === -1 ? (answers as readonly RecordedAnswer[]) : { badLine: bad + 2 };
}

function isAnswer(value: unknown): value is RecordedAnswer {
  if (!isObject(value) || typeof value['t'] !== 'number') return false;
  const { acknowledged, by, asked, answered, stopped } = value;
  return typeof acknowledged === 'string'
    ? ['operator', '--yes', 'simulated-operator', 'refused'].includes(by as string)
    : typeof asked === 'string' && (typeof answered === 'string' || typeof stopped === 'string');
}

function isObject(value: unknown): value is Readonly<Record<string, unknown>> {
  return typeof value === 'object' && value !== null;
}

function parsed(line: string): unknown {
  try {
    return JSON.parse(line);
  } catch {
    return undefined;
  }
}
