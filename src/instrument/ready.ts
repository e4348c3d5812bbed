import type { Readiness } from '../files/driver.js';
import type { DriverPart } from './driver-part.js';
import { NotInDriverError, NotReadyError } from './instrument-errors.js';
import type { About } from './reading.js';
import { InstrumentSilentError } from './reply-errors.js';
import { readBits } from './status-bits.js';
import type { Talk } from './tell.js';
import { understood } from './understood.js';

/**
 * Asks an instrument that was told a message whether it has done it, until it says so. One answers at once and
 * is asked again after each pause; another answers only when it is done, so an answer may take all the time
 * that there is.
 * @throws NotReadyError when that is over; the signal's reason when it comes between two questions
 * @throws ReplyNotUnderstoodError, and the rest of what `Dialogue.ask` throws
 */
export async function untilReady(
  { dialogue, driver, clock, signal }: Talk,
  { told, part }: { readonly told: string; readonly part: DriverPart },
): Promise<void> {
  const { ready, wire, name } = driver;
  if (ready === undefined) throw new NotInDriverError({ driver: name, what: '"ready"' });
  const { ask, every, within } = ready;
  const { address } = dialogue;
  const about: About = { address, question: ask, part: { driver: name, section: 'ready' } };
  const end = clock.now() + within;
  for (;;) {
    const left = Math.max(end - clock.now(), wire.timeout);
    const answer = await dialogue.ask(ask, { within: left }).catch((error: unknown) => {
      if (!(error instanceof InstrumentSilentError)) throw error;
      throw new NotReadyError({
        address,
        told,
        question: ask,
        answer: undefined,
        within,
        part,
        cause: error,
      });
    });
    if (understood(dialogue, () => saysReady(answer, ready.when, about))) return;
    if (clock.now() + every >= end)
      throw new NotReadyError({ address, told, question: ask, answer, within, part });
    await clock.sleep(every, signal);
  }
}

/**
 * Whether an answer says that the instrument is ready.
 * @throws ReplyNotUnderstoodError when it should be a number and is none
 */
export function saysReady(answer: string, when: Readiness['when'], about: About): boolean {
  if (when.kind === 'answer') return when.like.finds(answer.trim());
  const set = readBits(answer, about) & when.bits;
  return when.are === 'set' ? set === when.bits : set === 0;
}
