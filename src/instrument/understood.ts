import type { Dialogue } from './dialogue.js';

/** What an answer says. After one that makes no sense nobody knows whose it was: the dialogue is in doubt. */
export function understood<Result>(dialogue: Dialogue, understand: () => Result): Result {
  try {
    return understand();
  } catch (error) {
    dialogue.doubt();
    throw error;
  }
}
