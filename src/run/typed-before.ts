import { setTimeout as wait } from 'node:timers/promises';
import type { Readable } from 'node:stream';

/** A terminal, which can give each key as it is pressed. */
interface Keys extends Readable {
  setRawMode(raw: boolean): unknown;
}

/** Whether keys come from there; nobody presses anything in a pipe, of which all is wanted. */
export function givesKeys(input: Readable): input is Keys {
  return 'setRawMode' in input;
}

/** Longer than it takes to hand over what lies there already, and shorter than anybody reads; in milliseconds. */
const handedOver = 40;

/**
 * Throws away what was typed before a question: an Enter that somebody pressed while there was nothing to answer must
 * not tell that a plug is out of which they have not read yet. Never rejects; a terminal that is gone is found out by
 * whoever reads it next.
 * @param interrupted told of Ctrl-C, which is a key meanwhile and counts whenever it is pressed.
 */
export async function forgetTyped(input: Keys, interrupted: () => void): Promise<void> {
  const typed = (keys: Buffer | string): void => {
    if (keys.includes('\u0003')) interrupted();
  };
  const gone = (): void => undefined;
  // Once it was paused nothing comes for listening alone.
  input.on('error', gone).on('data', typed).resume();
  // As lines the last one would stay behind until its Enter, and stand before the answer.
  input.setRawMode(true);
  await wait(handedOver);
  input.off('data', typed).pause();
  input.setRawMode(false);
  input.off('error', gone);
}
