import type { Command } from 'commander';
import { schemaKinds } from '../published-schemas.js';
import { newKinds } from '../new.js';
import { shippedNames } from '../../files/shipped-file.js';
import { shipped } from '../shipped.js';
import type { Completed } from './completed.js';
import { commandWords, type ValuesOf } from './program-words.js';
import { shells } from './shells.js';

/** What the values of our commands are: by what the value is called, where nothing nearer is said. */
export async function valuesOf(program: Command): Promise<ValuesOf> {
  const [procedures = [], drivers = [], tolerances = []] = await Promise.all(
    [shipped.procedures, shipped.drivers, shipped.tolerances].map(shippedNames),
  );
  const byName: Readonly<Record<string, Completed>> = {
    file: files(),
    run: folders,
    earlier: folders,
    later: folders,
    folder: folders,
    bench: files(),
    procedure: files(procedures),
    driver: files(drivers),
    shell: words(shells),
    command: { words: commandWords(program), paths: 'none' },
    ...Object.fromEntries(
      ['address', 'channel', 'current', 'name', 'number', 'resistance', 'share'].map((name) => [
        name,
        nothing,
      ]),
    ),
  };
  const nearer: Readonly<Record<string, Completed>> = {
    'new kind': words(newKinds),
    'schema kind': words(schemaKinds),
    '--tolerance': files(tolerances),
  };
  return (command, flag, value) => nearer[`${command} ${value}`] ?? nearer[flag ?? ''] ?? byName[value];
}

const nothing: Completed = { words: [], paths: 'none' };
const folders: Completed = { words: [], paths: 'folders' };

function words(list: readonly string[]): Completed {
  return { words: list.map((word) => ({ word, about: '' })), paths: 'none' };
}

function files(names: readonly string[] = []): Completed {
  return { ...words(names), paths: 'files' };
}
