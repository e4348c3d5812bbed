import type { Bench } from './bench.js';
import { benchSchema } from './bench-schema.js';
import { parseFile } from './parse-file.js';
import { readAndParse, type FileRead } from './read-text.js';

/** @throws BadFileError */
export function parseBench(text: string, fileName: string): Bench {
  return parseFile('bench', benchSchema, text, fileName);
}

/** @throws BadFileError, MissingFileError */
export function readBench(path: string): Promise<FileRead<Bench>> {
  return readAndParse(path, parseBench);
}
