import { type ExitCode, RailproofError } from '../errors/railproof-error.js';
import type { Driver } from '../files/driver.js';
import type { FileRead } from '../files/read-text.js';
import { parseYaml } from '../files/yaml-document.js';
import { type DriverPart, pathOf } from '../instrument/driver-part.js';
import { recordedPath } from './shipped.js';

/** What an instrument would not take, or what was not understood of it, and the line of the driver that is behind it. */
export class AtDriverLineError extends RailproofError {
  readonly code: string;
  readonly exitCode: ExitCode;
  /** `drivers/load-input-scpi.yaml:18` */
  readonly place: string;

  constructor(error: RailproofError, place: string) {
    super(`${error.message}; see ${place}`, {
      cause: error,
      ...(error.advice === undefined ? {} : { advice: error.advice }),
    });
    this.code = error.code;
    this.exitCode = error.exitCode;
    this.place = place;
  }
}

/** The same error, and the line of the driver file, where it is known which part of which driver was at work. */
export function atDriverLine(error: unknown, drivers: readonly FileRead<Driver>[]): unknown {
  if (!(error instanceof RailproofError) || error instanceof AtDriverLineError) return error;
  const place = lineBehind(error, drivers);
  return place === undefined ? error : new AtDriverLineError(error, place);
}

/** The line behind an error, where it is known. */
export function lineBehind(error: unknown, drivers: readonly FileRead<Driver>[]): string | undefined {
  return driverLine(partIn(error), drivers);
}

/** `drivers/load-input-scpi.yaml:18`; of a driver that comes with the program, by its place in it. */
export function driverLine(
  part: DriverPart | undefined,
  drivers: readonly FileRead<Driver>[],
): string | undefined {
  const file = drivers.find(({ value }) => value.name === part?.driver);
  if (part === undefined || file === undefined) return undefined;
  const { line } = parseYaml(file.text, file.path).place({ path: pathOf(part), message: '' });
  return `${recordedPath(file.path)}:${line}`;
}

/** An error may stand for another one, which knows. */
function partIn(error: unknown): DriverPart | undefined {
  for (let each = error, depth = 0; each instanceof Error && depth < 8; each = each.cause, depth++) {
    if ('part' in each && each.part !== undefined) return each.part as DriverPart;
  }
  return undefined;
}
