import type { Driver, ErrorReport } from '../files/driver.js';
import type { Dialogue } from './dialogue.js';
import { eventsIn } from './event-register.js';
import type { About } from './reading.js';
import { parseScpiError, type ScpiError } from './scpi-error.js';
import { readBits } from './status-bits.js';
import { understood } from './understood.js';

/** An error, and in what words the instrument told of it: an entry of its queue, the number of its register. */
export interface ReportedError extends ScpiError {
  readonly said: string;
}

/** What is to be done with an error: nothing; what was told is told once more; what was told has failed. */
export type Fate = 'harmless' | 'again' | 'error';

/** Longer than any queue; one that goes on is not being emptied by reading. */
const mostEntries = 64;

/**
 * Asks an instrument for its errors as its driver says: its queue, until that is clear or until it is plain
 * that it will not be; or its register, which reading clears. `clear` says whether there are no more. Nothing
 * is asked where the driver has no way to.
 * @throws what `Dialogue.ask` throws, and ReplyNotUnderstoodError
 */
export async function readErrors(
  dialogue: Dialogue,
  { errors, name }: Pick<Driver, 'name' | 'errors'>,
): Promise<{ readonly entries: readonly ReportedError[]; readonly clear: boolean }> {
  if (errors === 'none') return { entries: [], clear: true };
  const { ask, kind } = errors;
  const about: About = {
    address: dialogue.address,
    question: ask,
    part: { driver: name, section: 'errors' },
  };
  const entries: ReportedError[] = [];
  while (entries.length < mostEntries) {
    const answer = await dialogue.ask(ask);
    const found = understood(dialogue, () => errorsIn(answer, errors, about));
    entries.push(...found);
    if (kind === 'register' || found.length === 0) return { entries, clear: true };
  }
  return { entries, clear: false };
}

/**
 * What an answer about errors comes to.
 * @throws ReplyNotUnderstoodError
 */
export function judgedAnswer(answer: string, errors: ErrorReport, about: About): 'clear' | Fate {
  const [first] = errorsIn(answer, errors, about);
  return first === undefined ? 'clear' : fateOf(first, errors);
}

/** What the driver says is to be done with an error. */
export function fateOf({ said }: ReportedError, { harmless, again }: ErrorReport): Fate {
  if (harmless?.finds(said) === true) return 'harmless';
  return again?.finds(said) === true ? 'again' : 'error';
}

/** @throws ReplyNotUnderstoodError */
function errorsIn(answer: string, errors: ErrorReport, about: About): readonly ReportedError[] {
  if (errors.kind === 'queue') {
    const said = answer.trim();
    return errors.clear.finds(said) ? [] : [{ ...parseScpiError(said, about), said }];
  }
  const register = readBits(answer, about) & errors.bits;
  const which = /^\*ESR\?$/i.test(errors.ask.trim()) ? 'standard' : 'other';
  return eventsIn(register, which).map((event) => ({ ...event, said: String(register) }));
}
