import { shown } from '../quantity/shown-text.js';
import { checkValue } from './check-value.js';
import { readCriterion } from './criterion.js';
import { problemPlace } from './file-error.js';
import { didYouMean } from '../quantity/nearest.js';
import { badFile, openDocument } from './parse-file.js';
import { found } from './plain-words.js';
import type { Criterion, Procedure, ProcedureStep } from './procedure.js';
import { procedureSchema } from './procedure-schema.js';
import { readAndParse, type FileRead } from './read-text.js';
import { findShipped, type Shelves } from './shipped-file.js';
import type { Vocabulary } from './vocabulary.js';
import type { Complaint, YamlDocument } from './yaml-document.js';

/**
 * Reads a procedure in the words of the vocabulary; each step's parameters are what the schema of its
 * kind makes of them.
 * @throws BadFileError with all problems of the file, those inside steps and criteria among them.
 */
export function parseProcedure(text: string, fileName: string, vocabulary: Vocabulary): Procedure {
  return procedureIn(openDocument('procedure', text, fileName), vocabulary);
}

/** The same, of a document whose first line was looked at. */
export function procedureIn(document: YamlDocument, vocabulary: Vocabulary): Procedure {
  const checked = checkValue(procedureSchema, document.value);
  const complaints: Complaint[] = checked.kind === 'bad' ? [...checked.complaints] : [];

  const steps: ProcedureStep[] = [];
  for (const [index, value] of listAt(document.value, 'steps').entries()) {
    const step = readStep(value, ['steps', index], document, vocabulary);
    if ('kind' in step) steps.push(step);
    else complaints.push(...step);
  }
  const criteria: Criterion[] = [];
  for (const [index, value] of listAt(document.value, 'criteria').entries()) {
    const criterion = readCriterion(value, ['criteria', index], vocabulary);
    if ('finding' in criterion) criteria.push(criterion);
    else complaints.push(...criterion);
  }
  if (checked.kind === 'bad' || complaints.length > 0) throw badFile('procedure', document, complaints);
  const { name, title, purpose, circuit, wiring, cautions, limits, tolerance, derating } = checked.value;
  return {
    name,
    title,
    purpose,
    circuit,
    wiring,
    cautions,
    limits,
    steps,
    criteria,
    derating,
    ...(tolerance === undefined ? {} : { tolerance }),
  };
}

/**
 * Reads a procedure by the name of a shipped one, or by a path.
 * @throws BadFileError, MissingFileError, NotShippedError
 */
export async function readProcedure(
  nameOrPath: string,
  vocabulary: Vocabulary,
  shelves: Shelves,
): Promise<FileRead<Procedure>> {
  const path = await findShipped('procedure', nameOrPath, shelves);
  return readAndParse(path, (text, fileName) => parseProcedure(text, fileName, vocabulary));
}

function readStep(
  value: unknown,
  path: readonly PropertyKey[],
  document: YamlDocument,
  vocabulary: Vocabulary,
): ProcedureStep | readonly Complaint[] {
  const kinds = vocabulary.stepKinds.map(({ kind }) => kind);
  if (typeof value === 'string' && kinds.includes(value)) {
    return [{ path, message: `a step ends in a colon: '${value}:'` }];
  }
  if (typeof value !== 'object' || value === null || Array.isArray(value)) {
    return [
      { path, message: `${found(value)}; a step is needed: the name of its kind, a colon, its parameters` },
    ];
  }
  const [kind, ...more] = Object.keys(value);
  if (kind === undefined) return [{ path, message: 'this step is empty; it needs the name of its kind' }];
  if (more.length > 0) {
    return [
      { path, message: `a step has exactly one kind; found ${[kind, ...more].map(shown).join(' and ')}` },
    ];
  }
  const stepKind = vocabulary.stepKinds.find((each) => each.kind === kind);
  if (stepKind === undefined) {
    return [
      {
        path,
        message: `no step is called ${shown(kind)}${didYouMean(kind, kinds) || `; there are ${kinds.join(', ')}`}`,
      },
    ];
  }
  const body = (value as Record<string, unknown>)[kind] ?? {};
  const checked = checkValue(stepKind.parameters, body, [...path, kind]);
  if (checked.kind === 'bad') return checked.complaints;
  return { kind, parameters: checked.value, place: problemPlace(document.place({ path, message: '' })) };
}

function listAt(value: unknown, key: 'steps' | 'criteria'): readonly unknown[] {
  const list: unknown = (value as Readonly<Record<string, unknown>>)[key];
  return Array.isArray(list) ? (list as unknown[]) : [];
}
