import type { Driver } from '../files/driver.js';
import type { Dialogue } from './dialogue.js';

/**
 * Tells an instrument what makes it safe, and asks it nothing: telling needs no step, so it can be done
 * before it is known who is there, and to one that does not answer.
 * @throws ConnectionLostError
 */
export async function tellMakeSafe(dialogue: Dialogue, driver: Driver): Promise<void> {
  for (const { text } of driver.operations['make-safe'] ?? []) await dialogue.tell(text);
}

/**
 * The same over a line of which nothing is known. An empty message goes first: whoever spoke before may have
 * died in the middle of one, and what is joined to half of another is neither.
 * @throws ConnectionLostError
 */
export async function tellMakeSafeAfresh(dialogue: Dialogue, driver: Driver): Promise<void> {
  await dialogue.tell('');
  await tellMakeSafe(dialogue, driver);
}
