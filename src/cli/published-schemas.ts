import type * as z from '../libraries/zod.js';
import { draftOf, type JsonSchema } from '../files/draft-schema.js';
import { fileKinds, type FileKind } from '../files/file-kind.js';
import { jsonSchemaOf } from '../files/json-schema.js';
import { dialogueLineSchema } from '../instrument/dialogue-schema.js';
import { journalLineSchema } from '../record/journal-schema.js';
import { watchmanReportSchema } from '../record/read-watchman-report.js';
import { headerSchema } from '../record/run-header-schema.js';
import { combinationSchema } from '../report/schema/combination-schema.js';
import { comparisonSchema } from '../report/schema/comparison-schema.js';
import { runSchema } from '../report/schema/run-schema.js';
import { selectionSchema } from '../report/schema/selection-schema.js';
import { stagedSupplySchema } from '../report/schema/staged-supply-schema.js';
import { answersLineSchema } from '../run/answers-schema.js';
import { driversSchema } from './schema/drivers-schema.js';
import { matchSchema } from './schema/match-schema.js';
import { planSchema } from './schema/plan-schema.js';
import { portsSchema } from './schema/ports-schema.js';
import { runsSchema } from './schema/runs-schema.js';
import { trialSchema } from './schema/trial-schema.js';
import { vocabulary } from './vocabulary.js';

/** What the program writes as JSON, by the word that stands in its `format`: `railproof/run 1` is `run`. */
const written = {
  run: runSchema,
  compare: comparisonSchema,
  combination: combinationSchema,
  'staged-supply': stagedSupplySchema,
  selection: selectionSchema,
  plan: planSchema,
  runs: runsSchema,
  drivers: driversSchema,
  match: matchSchema,
  trial: trialSchema,
  ports: portsSchema,
  record: headerSchema,
  journal: journalLineSchema,
  watchman: watchmanReportSchema,
  dialogue: dialogueLineSchema,
  answers: answersLineSchema,
} as const satisfies Record<string, z.ZodType>;

export type WrittenKind = keyof typeof written;
export type SchemaKind = FileKind | WrittenKind;

export const writtenKinds = Object.keys(written) as readonly WrittenKind[];
export const schemaKinds: readonly SchemaKind[] = [...fileKinds, ...writtenKinds];

/** Of the file that holds the schema of a kind, in the package and wherever somebody keeps it. */
export function schemaFileName(kind: SchemaKind): string {
  return `${kind}.schema.json`;
}

/**
 * The JSON Schema of a kind of file, or of what the program writes. It is called as its file is: a name that holds
 * wherever the file lies, and asks for nothing from a network.
 */
export function publishedSchema(kind: SchemaKind): JsonSchema {
  const { $schema, ...schema } = isWritten(kind) ? draftOf(written[kind]) : jsonSchemaOf(kind, vocabulary);
  return { $schema, $id: schemaFileName(kind), ...schema };
}

export function isSchemaKind(kind: string): kind is SchemaKind {
  return (schemaKinds as readonly string[]).includes(kind);
}

function isWritten(kind: SchemaKind): kind is WrittenKind {
  return Object.hasOwn(written, kind);
}
