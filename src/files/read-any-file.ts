import type { Bench } from './bench.js';
import type { Driver } from './driver.js';
import { fileKindOf } from './parse-file.js';
import type { Module } from './module.js';
import type { Procedure } from './procedure.js';
import { readAndParse, type FileRead } from './read-text.js';
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
 * Reads a file as what its first line says it is. Only what that kind needs is loaded, the words of steps and findings
 * too: whoever checks a module waits for no schema of a procedure.
 * @throws BadFileError, MissingFileError
 */
export function readAnyFile(path: string, vocabulary: () => Promise<Vocabulary>): Promise<FileRead<AnyFile>> {
  return readAndParse(path, async (text, fileName): Promise<AnyFile> => {
    const kind = fileKindOf(text, fileName);
    switch (kind) {
      case 'module': {
        const { parseModule } = await import('./read-module.js');
        return { kind, content: parseModule(text, fileName) };
      }
      case 'bench': {
        const { parseBench } = await import('./read-bench.js');
        return { kind, content: parseBench(text, fileName) };
      }
      case 'driver': {
        const { parseDriver } = await import('./read-driver.js');
        return { kind, content: parseDriver(text, fileName) };
      }
      case 'procedure': {
        const { parseProcedure } = await import('./read-procedure.js');
        return { kind, content: parseProcedure(text, fileName, await vocabulary()) };
      }
      case 'tolerance': {
        const { parseTolerance } = await import('./read-tolerance.js');
        return { kind, content: parseTolerance(text, fileName, await vocabulary()) };
      }
      case 'stages': {
        const { parseStages } = await import('./read-stages.js');
        return { kind, content: parseStages(text, fileName) };
      }
    }
  });
}
