import { dirname, isAbsolute, join } from 'node:path';
import type { Bench, InstrumentPlace, ReplayAddress } from './bench.js';
import { benchSchema } from './bench-schema.js';
import { contentOf, openDocument } from './parse-file.js';
import { readAndParse, type FileRead } from './read-text.js';
import type { YamlDocument } from './yaml-document.js';

/** @throws BadFileError */
export function parseBench(text: string, fileName: string): Bench {
  return benchIn(openDocument('bench', text, fileName));
}

/** @throws BadFileError */
export function benchIn(document: YamlDocument): Bench {
  return contentOf('bench', benchSchema, document);
}

/**
 * Reads a bench; the file of a replayed dialogue is looked for beside it, as its drivers are.
 * @throws BadFileError, MissingFileError
 */
export function readBench(path: string): Promise<FileRead<Bench>> {
  return readAndParse(path, (text, fileName) => besideBench(parseBench(text, fileName), dirname(path)));
}

/** The same bench, its recordings looked for in that folder. */
export function besideBench(bench: Bench, folder: string): Bench {
  const instruments = Object.entries(bench.instruments).map(([role, place]) => [
    role,
    inFolder(place, folder),
  ]);
  const places = bench.group?.places.map((place) =>
    place.meter === undefined ? place : { ...place, meter: inFolder(place.meter, folder) },
  );
  return {
    ...bench,
    instruments: Object.fromEntries(instruments) as Bench['instruments'],
    ...(bench.operator === undefined ? {} : { operator: fileIn(bench.operator, folder) }),
    ...(bench.group === undefined || places === undefined ? {} : { group: { ...bench.group, places } }),
  };
}

function inFolder(place: InstrumentPlace, folder: string): InstrumentPlace {
  const { connection } = place;
  return connection.kind === 'replay' ? { ...place, connection: fileIn(connection, folder) } : place;
}

function fileIn({ kind, file }: ReplayAddress, folder: string): ReplayAddress {
  return { kind, file: isAbsolute(file) ? file : join(folder, file) };
}
