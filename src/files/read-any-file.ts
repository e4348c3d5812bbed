import type { Bench } from './bench.js';
import type { Driver } from './driver.js';
import type { Module } from './module.js';
import { kindOf } from './parse-file.js';
import type { Procedure } from './procedure.js';
import { readAndParse, type FileRead } from './read-text.js';
import type { Stages } from './stages.js';
import type { Tolerance } from './tolerance.js';
import type { FindingWords, Vocabulary } from './vocabulary.js';
import { parseYaml } from './yaml-document.js';

/** A user's file of whatever kind. */
export type AnyFile =
  | { readonly kind: 'module'; readonly content: Module }
  | { readonly kind: 'bench'; readonly content: Bench }
  | { readonly kind: 'driver'; readonly content: Driver }
  | { readonly kind: 'procedure'; readonly content: Procedure }
  | { readonly kind: 'tolerance'; readonly content: Tolerance }
  | { readonly kind: 'stages'; readonly content: Stages };

/** Where the words of procedures and tolerances are had from, when they are needed. */
export interface WordsLoaded {
  readonly vocabulary: () => Promise<Vocabulary>;
  readonly findings: () => Promise<FindingWords>;
}

/**
 * Reads a file as what its first line says it is. Only what that kind needs is loaded, the words of steps and findings
 * too: whoever checks a module waits for no schema of a procedure.
 * @throws BadFileError, MissingFileError
 */
export function readAnyFile(path: string, words: WordsLoaded): Promise<FileRead<AnyFile>> {
  return readAndParse(path, async (text, fileName): Promise<AnyFile> => {
    const document = parseYaml(text, fileName);
    const kind = kindOf(document);
    switch (kind) {
      case 'module': {
        const { moduleIn } = await import('./read-module.js');
        return { kind, content: moduleIn(document) };
      }
      case 'bench': {
        const { benchIn } = await import('./read-bench.js');
        return { kind, content: benchIn(document) };
      }
      case 'driver': {
        const { driverIn } = await import('./read-driver.js');
        return { kind, content: driverIn(document) };
      }
      case 'procedure': {
        const [{ procedureIn }, vocabulary] = await Promise.all([
          import('./read-procedure.js'),
          words.vocabulary(),
        ]);
        return { kind, content: procedureIn(document, vocabulary) };
      }
      case 'tolerance': {
        const [{ toleranceIn }, findings] = await Promise.all([
          import('./read-tolerance.js'),
          words.findings(),
        ]);
        return { kind, content: toleranceIn(document, findings) };
      }
      case 'stages': {
        const { stagesIn } = await import('./read-stages.js');
        return { kind, content: stagesIn(document) };
      }
    }
  });
}
