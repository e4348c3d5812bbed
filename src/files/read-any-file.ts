import type { Bench } from './bench.js';
import type { Driver } from './driver.js';
import { fileKindOf } from './parse-file.js';
import type { Module } from './module.js';
import type { Procedure } from './procedure.js';
import { parseBench } from './read-bench.js';
import { parseDriver } from './read-driver.js';
import { parseModule } from './read-module.js';
import { parseProcedure } from './read-procedure.js';
import { parseStages } from './read-stages.js';
import { readAndParse, type FileRead } from './read-text.js';
import { parseTolerance } from './read-tolerance.js';
import type { Stages } from './stages.js';
import type { Tolerance } from './tolerance.js';
import type { Vocabulary } from './vocabulary.js';

/** A user's file of whatever kind. */
export type AnyFile =
  | { readonly kind: 'module'; readonly content: Module }
  | { readonly kind: 'bench'; readonly content: Bench }
  | { readonly kind: 'driver'; readonly content: Driver }
  | { readonly kind: 'procedure'; readonly content: Procedure }
  | { readonly kind: 'tolerance'; readonly content: Tolerance }
  | { readonly kind: 'stages'; readonly content: Stages };

/**
 * Reads a file as what its first line says it is.
 * @throws BadFileError, MissingFileError
 */
export function readAnyFile(path: string, vocabulary: Vocabulary): Promise<FileRead<AnyFile>> {
  return readAndParse(path, (text, fileName): AnyFile => {
    const kind = fileKindOf(text, fileName);
    switch (kind) {
      case 'module':
        return { kind, content: parseModule(text, fileName) };
      case 'bench':
        return { kind, content: parseBench(text, fileName) };
      case 'driver':
        return { kind, content: parseDriver(text, fileName) };
      case 'procedure':
        return { kind, content: parseProcedure(text, fileName, vocabulary) };
      case 'tolerance':
        return { kind, content: parseTolerance(text, fileName, vocabulary) };
      case 'stages':
        return { kind, content: parseStages(text, fileName) };
    }
  });
}
