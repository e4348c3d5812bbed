import type { Driver } from './driver.js';
import { driverSchema } from './driver-schema.js';
import { parseFile } from './parse-file.js';
import { readAndParse, type FileRead } from './read-text.js';
import { findShipped, type Shelves } from './shipped-file.js';

/** @throws BadFileError */
export function parseDriver(text: string, fileName: string): Driver {
  return parseFile('driver', driverSchema, text, fileName);
}

/**
 * Reads a driver by the name of a shipped one, or by a path.
 * @throws BadFileError, MissingFileError, NotShippedError
 */
export async function readDriver(nameOrPath: string, shelves: Shelves): Promise<FileRead<Driver>> {
  return readAndParse(await findShipped('driver', nameOrPath, shelves), parseDriver);
}
