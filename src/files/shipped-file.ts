import { readdir } from 'node:fs/promises';
import { isAbsolute, join } from 'node:path';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { shown } from '../quantity/shown-text.js';
import { namePattern } from './name-pattern.js';
import { didYouMean } from '../quantity/nearest.js';

/** Where names and paths lead. */
export interface Shelves {
  /** The folder that relative paths start from: that of the bench file, or the current one. */
  readonly relativeTo: string;
  /** The folder of the files that come with the program. */
  readonly shipped: string;
}

/** A bare name that none of the shipped files has. */
export class NotShippedError extends RailproofError {
  readonly code = 'NOT_SHIPPED';
  readonly exitCode = exitCodes.missingFile;
  readonly wanted: string;

  constructor(kind: string, wanted: string, shipped: readonly string[]) {
    const hint =
      didYouMean(wanted, shipped) || (shipped.length === 0 ? '' : `; there are ${shipped.join(', ')}`);
    const advice = `A ${kind} of your own is given as a path: ./${wanted}.yaml.`;
    super(`no ${kind} is called ${shown(wanted)}${hint}`, { advice });
    this.wanted = wanted;
  }
}

/**
 * The path of the file that is meant. A bare name is a shipped file's; whatever holds a slash or ends in
 * `.yaml` or `.yml` is a path.
 * @throws NotShippedError
 */
export async function findShipped(kind: string, nameOrPath: string, shelves: Shelves): Promise<string> {
  if (!namePattern.test(nameOrPath) || /\.ya?ml$/i.test(nameOrPath)) {
    return isAbsolute(nameOrPath) ? nameOrPath : join(shelves.relativeTo, nameOrPath);
  }
  const names = await shippedNames(shelves.shipped);
  if (!names.includes(nameOrPath)) throw new NotShippedError(kind, nameOrPath, names);
  return join(shelves.shipped, `${nameOrPath}.yaml`);
}

/** The names of the files in a folder that comes with the program, in order. */
export async function shippedNames(folder: string): Promise<string[]> {
  const files = await readdir(folder);
  return files
    .filter((file) => file.endsWith('.yaml'))
    .map((file) => file.slice(0, -'.yaml'.length))
    .sort();
}
