import { dirname, isAbsolute, join } from 'node:path';
import { checkValue } from './check-value.js';
import { badFile, openDocument } from './parse-file.js';
import { readAndParse, type FileRead } from './read-text.js';
import { stagesProblems } from './stages-checks.js';
import { stagesSchema } from './stages-schema.js';
import type { Stages } from './stages.js';
import type { YamlDocument } from './yaml-document.js';

/** @throws BadFileError with all problems that can be told. */
export function parseStages(text: string, fileName: string): Stages {
  return stagesIn(openDocument('stages', text, fileName));
}

/** @throws BadFileError with all problems that can be told. */
export function stagesIn(document: YamlDocument): Stages {
  const checked = checkValue(stagesSchema, document.value);
  if (checked.kind === 'bad') throw badFile('stages', document, checked.complaints);
  const complaints = [...stagesProblems(checked.value)];
  if (complaints.length > 0) throw badFile('stages', document, complaints);
  return checked.value;
}

/**
 * Reads a stages file; the records that it names are looked for from its folder on.
 * @throws BadFileError, MissingFileError
 */
export function readStages(path: string): Promise<FileRead<Stages>> {
  return readAndParse(path, (text, fileName) => besideStages(parseStages(text, fileName), dirname(path)));
}

/** The same stages, their records looked for from that folder on. */
export function besideStages(stages: Stages, folder: string): Stages {
  return {
    ...stages,
    modules: stages.modules.map(({ name, records }) => ({
      name,
      records: records.map((record) => (isAbsolute(record) ? record : join(folder, record))),
    })),
  };
}
