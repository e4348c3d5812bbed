import { dirname, isAbsolute, join } from 'node:path';
import type { Bench, InstrumentPlace } from './bench.js';
import { benchSchema } from './bench-schema.js';
import { parseFile } from './parse-file.js';
import { readAndParse, type FileRead } from './read-text.js';

/** @throws BadFileError */
export function parseBench(text: string, fileName: string): Bench {
  return parseFile('bench', benchSchema, text, fileName);
}

/**
 * Reads a bench; the file of a replayed dialogue is looked for beside it, as its drivers are.
 * @throws BadFileError, MissingFileError
 */
export function readBench(path: string): Promise<FileRead<Bench>> {
  return readAndParse(path, (text, fileName) => besideBench(parseBench(text, fileName), dirname(path)));
}

/** The same bench, its replayed dialogues looked for in that folder. */
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
    ...(bench.group === undefined || places === undefined ? {} : { group: { ...bench.group, places } }),
  };
}

function inFolder(place: InstrumentPlace, folder: string): InstrumentPlace {
  const { connection } = place;
  if (connection.kind !== 'replay' || isAbsolute(connection.file)) return place;
  return { ...place, connection: { kind: 'replay', file: join(folder, connection.file) } };
}
