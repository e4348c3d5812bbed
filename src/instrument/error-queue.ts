import type { Driver } from '../files/driver.js';
import type { Dialogue } from './dialogue.js';
import { parseScpiError, type ScpiError } from './scpi-error.js';

/** Longer than any queue; one that goes on is not being emptied by reading. */
const mostEntries = 64;

/**
 * Reads the error queue until it is clear, or until it is plain that it will not be; nothing when the
 * driver has none. `clear` says which.
 * @throws what `Dialogue.ask` throws, and ReplyNotUnderstoodError
 */
export async function readErrorQueue(
  dialogue: Dialogue,
  errors: Driver['errors'],
): Promise<{ readonly entries: readonly ScpiError[]; readonly clear: boolean }> {
  const entries: ScpiError[] = [];
  if (errors === 'none' || errors.kind !== 'queue') return { entries, clear: true };
  while (entries.length < mostEntries) {
    const reply = (await dialogue.ask(errors.ask)).trim();
    if (errors.clear.finds(reply)) return { entries, clear: true };
    try {
      entries.push(parseScpiError(reply, { address: dialogue.address, question: errors.ask }));
    } catch (error) {
      dialogue.doubt();
      throw error;
    }
  }
  return { entries, clear: false };
}
