import type { Driver } from './driver.js';
import { driverSchema } from './driver-schema.js';
import { contentOf, openDocument } from './parse-file.js';
import { readAndParse, type FileRead } from './read-text.js';
import { findShipped, type Shelves } from './shipped-file.js';
import type { YamlDocument } from './yaml-document.js';

/** @throws BadFileError */
export function parseDriver(text: string, fileName: string): Driver {
  return driverIn(openDocument('driver', text, fileName));
}

/** @throws BadFileError */
export function driverIn(document: YamlDocument): Driver {
  return contentOf('driver', driverSchema, document);
}

/**
 * Reads a driver by the name of a shipped one, or by a path.
 * @throws BadFileError, MissingFileError, NotShippedError
 */
export async function readDriver(nameOrPath: string, shelves: Shelves): Promise<FileRead<Driver>> {
  return readAndParse(await findShipped('driver', nameOrPath, shelves), parseDriver);
}
