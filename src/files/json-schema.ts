import { benchSchema } from './bench-schema.js';
import { criterionSchema } from './criterion.js';
import { draftOf, type JsonSchema } from './draft-schema.js';
import { driverSchema } from './driver-schema.js';
import type { FileKind } from './file-kind.js';
import { moduleSchema } from './module-schema.js';
import { procedureSchema } from './procedure-schema.js';
import { stagesSchema } from './stages-schema.js';
import { toleranceEntrySchema, toleranceSchema } from './tolerance-schema.js';
import type { Vocabulary } from './vocabulary.js';

export type { JsonSchema };

/**
 * What a file of this kind may hold, as a JSON Schema (draft 2020-12) by which an editor completes and
 * checks it. With a vocabulary, the steps and findings are spelled out.
 */
export function jsonSchemaOf(kind: FileKind, vocabulary?: Vocabulary): JsonSchema {
  switch (kind) {
    case 'module':
      return draftOf(moduleSchema);
    case 'bench':
      return draftOf(benchSchema);
    case 'driver':
      return draftOf(driverSchema);
    case 'procedure': {
      const schema = draftOf(procedureSchema);
      return vocabulary === undefined ? schema : spelledOut(schema, vocabulary);
    }
    case 'tolerance': {
      const schema = draftOf(toleranceSchema);
      return vocabulary === undefined ? schema : withEntries(schema, vocabulary);
    }
    case 'stages':
      return draftOf(stagesSchema);
  }
}

function spelledOut(schema: JsonSchema, vocabulary: Vocabulary): JsonSchema {
  const properties = schema['properties'] as Readonly<Record<string, JsonSchema>>;
  const steps = vocabulary.stepKinds.map(({ kind, parameters }) =>
    stepSchema(kind, withoutDialect(draftOf(parameters))),
  );
  return {
    ...schema,
    properties: {
      ...properties,
      steps: { ...properties['steps'], items: { oneOf: steps } },
      criteria: { ...properties['criteria'], items: criterionOf(Object.keys(vocabulary.findings)) },
    },
  };
}

/** A step none of whose parameters must be given may stand without any: `open-circuit:`. */
function stepSchema(kind: string, parameters: JsonSchema): JsonSchema {
  const { required } = parameters;
  const mayBeEmpty = !Array.isArray(required) || required.length === 0;
  return {
    type: 'object',
    properties: { [kind]: mayBeEmpty ? { anyOf: [parameters, { type: 'null' }] } : parameters },
    required: [kind],
    additionalProperties: false,
  };
}

function criterionOf(findings: readonly string[]): JsonSchema {
  return ofOneFinding(withoutDialect(draftOf(criterionSchema)), nameOf(findings), [
    'at-least',
    'at-most',
    'is',
  ]);
}

function withEntries(schema: JsonSchema, vocabulary: Vocabulary): JsonSchema {
  const properties = schema['properties'] as Readonly<Record<string, JsonSchema>>;
  const items = ofOneFinding(
    withoutDialect(draftOf(toleranceEntrySchema)),
    nameOf(Object.keys(vocabulary.findings)),
    ['within', 'same', 'becomes'],
  );
  return { ...schema, properties: { ...properties, findings: { ...properties['findings'], items } } };
}

/** A map that names a finding and says exactly one thing of it. */
function ofOneFinding(
  schema: JsonSchema,
  anyOf: readonly JsonSchema[],
  forms: readonly string[],
): JsonSchema {
  const properties = schema['properties'] as Readonly<Record<string, JsonSchema>>;
  return {
    ...schema,
    properties: { ...properties, finding: { ...properties['finding'], anyOf } },
    oneOf: forms.map((form) => ({ required: [form] })),
  };
}

function nameOf(findings: readonly string[]): readonly JsonSchema[] {
  const names = findings.filter((finding) => !finding.endsWith('*'));
  const families = findings.filter((finding) => finding.endsWith('*'));
  return [{ enum: names }, ...families.map((each) => ({ pattern: `^${each.slice(0, -1)}.` }))];
}

function withoutDialect(schema: JsonSchema): JsonSchema {
  return Object.fromEntries(Object.entries(schema).filter(([key]) => key !== '$schema'));
}
