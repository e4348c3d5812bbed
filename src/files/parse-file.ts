import type * as z from '../libraries/zod.js';
import { shown } from '../quantity/shown-text.js';
import { checkValue } from './check-value.js';
import { BadFileError } from './file-error.js';
import { fileKinds, headers, type FileKind } from './file-kind.js';
import { didYouMean } from '../quantity/nearest.js';
import { found } from './plain-words.js';
import { parseYaml, type Complaint, type YamlDocument } from './yaml-document.js';

/**
 * Reads a file that is wholly described by a schema.
 * @throws BadFileError with all its problems.
 */
export function parseFile<T>(kind: FileKind, schema: z.ZodType<T>, text: string, fileName: string): T {
  return contentOf(kind, schema, openDocument(kind, text, fileName));
}

/**
 * What a document holds that is wholly described by a schema, and whose first line was looked at.
 * @throws BadFileError with all its problems.
 */
export function contentOf<T>(kind: FileKind, schema: z.ZodType<T>, document: YamlDocument): T {
  const checked = checkValue(schema, document.value);
  if (checked.kind === 'bad') throw badFile(kind, document, checked.complaints);
  return checked.value;
}

/**
 * The YAML of a file whose first line says that it is of this kind and of a version we read. Nothing else
 * is looked at when it is not: what a bench lacks to be a module is of no interest.
 * @throws BadFileError
 */
export function openDocument(kind: FileKind, text: string, fileName: string): YamlDocument {
  const document = parseYaml(text, fileName);
  const itsKind = kindOf(document);
  if (itsKind !== kind) {
    const message = `this is a ${itsKind} file; a ${kind} file is needed`;
    throw new BadFileError([document.place({ path: ['railproof'], message })], {
      advice: `are two files exchanged? A ${kind} file begins with 'railproof: ${headers[kind]}'`,
    });
  }
  return document;
}

export function badFile(
  kind: FileKind,
  document: YamlDocument,
  complaints: readonly Complaint[],
): BadFileError {
  const advice = `'railproof schema ${kind}' prints what such a file may hold.`;
  return new BadFileError(
    complaints.map((complaint) => document.place(complaint)),
    { advice },
  );
}

/**
 * What kind of file a document says it is, in its first line.
 * @throws BadFileError when it does not say, or names a kind or version that we do not know.
 */
export function kindOf(document: YamlDocument): FileKind {
  const refuse = (message: string, path: readonly string[] = []): never => {
    throw new BadFileError([document.place({ path, message })], {
      advice:
        'is it the file that was meant? `railproof new bench`, and likewise module and procedure, writes one to begin with',
    });
  };
  const { value, topKeys } = document;
  const firstLine = `the first line names the kind of file, as in 'railproof: ${headers.module}'`;
  if (value === null || value === undefined) return refuse(`the file is empty; ${firstLine}`);
  if (typeof value !== 'object' || !('railproof' in value)) return refuse(firstLine);
  if (topKeys[0] !== 'railproof') return refuse(`the line with 'railproof' must come first`, ['railproof']);

  const header = value.railproof;
  if (typeof header !== 'string') return refuse(`${found(header)}; ${firstLine}`, ['railproof']);
  const [, word = header, version] = /^(\S+) (\d+)$/.exec(header) ?? [];
  const kind = fileKinds.find((known) => known === word);
  if (kind === undefined) {
    const hint = didYouMean(word, fileKinds) || `; one of ${fileKinds.join(', ')} is needed`;
    return refuse(`no kind of file is called ${shown(word)}${hint}`, ['railproof']);
  }
  const reads = `this railproof reads '${headers[kind]}'`;
  if (version === undefined) return refuse(`the version is missing; ${reads}`, ['railproof']);
  if (header !== headers[kind]) {
    return refuse(`version ${version} of the ${kind} format is not known; ${reads}`, ['railproof']);
  }
  return kind;
}
