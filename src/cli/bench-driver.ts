import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import { type Bench, placeOf, type Post, roleOf } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import { MissingFileError, problemPlace } from '../files/file-error.js';
import { readDriver } from '../files/read-driver.js';
import type { FileRead } from '../files/read-text.js';
import { NotShippedError, type Shelves } from '../files/shipped-file.js';
import { parseYaml } from '../files/yaml-document.js';

/** A bench gives an instrument a part that its driver is not for. */
export class WrongRoleError extends RailproofError {
  readonly code = 'WRONG_ROLE';
  readonly exitCode = exitCodes.badFile;

  /** `named` is where the bench names it. */
  constructor(named: string, post: Post, driver: Driver) {
    super(`${named}: ${driver.name} is a driver for a ${driver.role}, not for a ${roleOf(post)}`, {
      advice: '`railproof drivers` lists the shipped ones with their roles',
    });
  }
}

/** A bench names a driver that is not there, or may not be read. */
export class NoDriverError extends RailproofError {
  readonly code = 'NO_DRIVER';
  readonly exitCode: ExitCode;

  constructor(named: string, cause: NotShippedError | MissingFileError) {
    super(`${named}: ${cause.message}`, {
      cause,
      advice:
        'a shipped driver is named as `railproof drivers` lists it, one of your own by its path from the folder of the bench file: ./my-load.yaml',
    });
    this.exitCode = cause.exitCode;
  }
}

/**
 * The driver of one post of a bench, which must be for its role.
 * @throws BadFileError, NoDriverError, WrongRoleError
 */
export async function readDriverAt(
  bench: FileRead<Bench>,
  post: Post,
  named: string,
  shelves: Shelves,
): Promise<FileRead<Driver>> {
  const file = await readDriver(named, shelves).catch((error: unknown) => {
    if (error instanceof NotShippedError || error instanceof MissingFileError)
      throw new NoDriverError(whereNamed(bench, post), error);
    throw error;
  });
  if (file.value.role !== roleOf(post)) throw new WrongRoleError(whereNamed(bench, post), post, file.value);
  return file;
}

/** `bench.yaml:7:19: instruments.load.driver` */
function whereNamed({ text, path }: FileRead<Bench>, post: Post): string {
  const key = [...placeOf(post), 'driver'];
  return `${problemPlace(parseYaml(text, path).place({ path: key, message: '' }))}: ${key.join('.')}`;
}
