import type { Driver } from '../files/driver.js';
import { BadFileError } from '../files/file-error.js';
import type { FileRead } from '../files/read-text.js';
import { parseYaml } from '../files/yaml-document.js';
import { checkDialogue } from '../instrument/dialogue-check.js';

/**
 * Goes through the `dialogue` of a driver file, and says how many exchanges there are.
 * @throws BadFileError with the place of each that does not come out as the file says
 */
export function checkDialogueOf({ value, text, path }: FileRead<Driver>): number {
  const mistakes = checkDialogue(value);
  if (mistakes.length === 0) return value.dialogue?.length ?? 0;
  const document = parseYaml(text, path);
  throw new BadFileError(
    mistakes.map(({ index, key, message }) => document.place({ path: ['dialogue', index, key], message })),
    { advice: 'Mend the operation or the reading in the same file; or the exchange, where that is wrong.' },
  );
}
