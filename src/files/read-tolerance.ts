import { checkValue } from './check-value.js';
import { badFile, openDocument } from './parse-file.js';
import { readAndParse, type FileRead } from './read-text.js';
import { shown } from '../quantity/shown-text.js';
import { findShipped, type Shelves } from './shipped-file.js';
import type { Tolerance, ToleranceEntry } from './tolerance.js';
import { readToleranceEntry } from './tolerance-entry.js';
import { toleranceSchema } from './tolerance-schema.js';
import type { FindingWords } from './vocabulary.js';
import type { Complaint, YamlDocument } from './yaml-document.js';

/** @throws BadFileError with all problems of the file, those inside its findings among them. */
export function parseTolerance(text: string, fileName: string, words: FindingWords): Tolerance {
  return toleranceIn(openDocument('tolerance', text, fileName), words);
}

/** The same, of a document whose first line was looked at. */
export function toleranceIn(document: YamlDocument, words: FindingWords): Tolerance {
  const checked = checkValue(toleranceSchema, document.value);
  const complaints: Complaint[] = checked.kind === 'bad' ? [...checked.complaints] : [];
  const findings: ToleranceEntry[] = [];
  const { findings: list } = document.value as Readonly<Record<string, unknown>>;
  for (const [index, value] of (Array.isArray(list) ? (list as unknown[]) : []).entries()) {
    const path = ['findings', index];
    const entry = readToleranceEntry(value, path, words);
    if (!('finding' in entry)) complaints.push(...entry);
    else if (findings.some(({ finding }) => finding === entry.finding))
      complaints.push({ path: [...path, 'finding'], message: `${shown(entry.finding)} stands here twice` });
    else findings.push(entry);
  }
  if (checked.kind === 'bad' || complaints.length > 0) throw badFile('tolerance', document, complaints);
  const { name, title } = checked.value;
  return { name, title, findings };
}

/**
 * Reads a tolerance by the name of a shipped one, or by a path.
 * @throws BadFileError, MissingFileError, NotShippedError
 */
export async function readTolerance(
  nameOrPath: string,
  words: FindingWords,
  shelves: Shelves,
): Promise<FileRead<Tolerance>> {
  const path = await findShipped('tolerance', nameOrPath, shelves);
  return readAndParse(path, (text, fileName) => parseTolerance(text, fileName, words));
}
