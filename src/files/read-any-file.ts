import type { Bench } from './bench.js';
import type { Driver } from './driver.js';
import { fileKindOf } from './parse-file.js';
import type { Module } from './module.js';
import type { Procedure } from './procedure.js';
import { parseBench } from './read-bench.js';
import { parseDriver } from './read-driver.js';
import { parseModule } from './read-module.js';
import { parseProcedure } from './read-procedure.js';
import { readAndParse, type FileRead } from './read-text.js';
import type { Vocabulary } from './vocabulary.js';

export type AnyFile =
  | { readonly kind: 'module'; readonly read: FileRead<Module> }
  | { readonly kind: 'bench'; readonly read: FileRead<Bench> }
  | { readonly kind: 'driver'; readonly read: FileRead<Driver> }
  | { readonly kind: 'procedure'; readonly read: FileRead<Procedure> };

/**
 * Reads a file as what its first line says it is.
 * @throws BadFileError, MissingFileError
 */
export async function readAnyFile(path: string, vocabulary: Vocabulary): Promise<AnyFile> {
  const { value: kind } = await readAndParse(path, fileKindOf);
  switch (kind) {
    case 'module':
      return { kind, read: await readAndParse(path, parseModule) };
    case 'bench':
      return { kind, read: await readAndParse(path, parseBench) };
    case 'driver':
      return { kind, read: await readAndParse(path, parseDriver) };
    case 'procedure':
      return { kind, read: await readAndParse(path, (text, name) => parseProcedure(text, name, vocabulary)) };
  }
}
