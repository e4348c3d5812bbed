import type { Driver, Message } from '../files/driver.js';
import type { Dialogue } from './dialogue.js';

/**
 * Tells an instrument what makes it safe, and asks it nothing: telling needs no step, so it can be done
 * before it is known who is there, and to one that does not answer.
 * @throws ConnectionLostError
 */
export function tellMakeSafe(dialogue: Dialogue, driver: Driver): Promise<void> {
  return tellUnasked(dialogue, driver.operations['make-safe'] ?? []);
}

/**
 * The same over a line of which nothing is known, with what puts the instrument in remote before it.
 * @throws ConnectionLostError
 */
export async function tellMakeSafeAfresh(dialogue: Dialogue, driver: Driver): Promise<void> {
  await tellAfresh(dialogue, driver.remote);
  await tellMakeSafe(dialogue, driver);
}

/**
 * Tells messages at once, where their driver waits between them; whether it does. An instrument that does not say
 * that it is ready must not keep what switches it off from being told.
 * @throws ConnectionLostError
 */
export async function tellBeforeWaiting(dialogue: Dialogue, messages: readonly Message[]): Promise<boolean> {
  const waits = messages.slice(0, -1).some(({ untilReady }) => untilReady === true);
  if (waits) await tellUnasked(dialogue, messages);
  return waits;
}

/**
 * Puts an instrument in remote, over a line of which nothing is known: what is told before that it may not
 * hear, nor answer.
 * @throws ConnectionLostError
 */
export async function tellRemote(dialogue: Dialogue, { remote }: Driver): Promise<void> {
  if (remote.length > 0) await tellAfresh(dialogue, remote);
}

/**
 * Hands an instrument back to its front panel. Nothing is asked after it: many are in remote again when they
 * are spoken to.
 * @throws ConnectionLostError
 */
export function tellLocal(dialogue: Dialogue, { local }: Driver): Promise<void> {
  return tellUnasked(dialogue, local);
}

/**
 * An empty message goes first: whoever spoke before may have died in the middle of one, and what is joined to
 * half of another is neither.
 */
async function tellAfresh(dialogue: Dialogue, messages: readonly Message[]): Promise<void> {
  await dialogue.tell('');
  await tellUnasked(dialogue, messages);
}

async function tellUnasked(dialogue: Dialogue, messages: readonly Message[]): Promise<void> {
  for (const { text, rest } of messages) await dialogue.tell(text, rest);
}
