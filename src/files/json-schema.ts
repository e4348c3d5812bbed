import { z } from 'zod';
import { benchSchema } from './bench-schema.js';
import { criterionSchema } from './criterion.js';
import { driverSchema } from './driver-schema.js';
import type { FileKind } from './file-kind.js';
import { moduleSchema } from './module-schema.js';
import { procedureSchema } from './procedure-schema.js';
import type { Vocabulary } from './vocabulary.js';

export type JsonSchema = Readonly<Record<string, unknown>>;

/**
 * What a file of this kind may hold, as a JSON Schema (draft 2020-12) by which an editor completes and
 * checks it. With a vocabulary, a procedure's steps and findings are spelled out.
 */
export function jsonSchemaOf(kind: FileKind, vocabulary?: Vocabulary): JsonSchema {
  switch (kind) {
    case 'module':
      return asWritten(moduleSchema);
    case 'bench':
      return asWritten(benchSchema);
    case 'driver':
      return asWritten(driverSchema);
    case 'procedure': {
      const schema = asWritten(procedureSchema);
      return vocabulary === undefined ? schema : spelledOut(schema, vocabulary);
    }
  }
}

function asWritten(schema: z.ZodType): JsonSchema {
  return z.toJSONSchema(schema, { target: 'draft-2020-12', io: 'input' });
}

function spelledOut(schema: JsonSchema, vocabulary: Vocabulary): JsonSchema {
  const properties = schema['properties'] as Readonly<Record<string, JsonSchema>>;
  const steps = vocabulary.stepKinds.map(({ kind, parameters }) =>
    stepSchema(kind, withoutDialect(asWritten(parameters))),
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
  const schema = withoutDialect(asWritten(criterionSchema));
  const properties = schema['properties'] as Readonly<Record<string, JsonSchema>>;
  const names = findings.filter((finding) => !finding.endsWith('*'));
  const families = findings.filter((finding) => finding.endsWith('*'));
  const anyOf = [{ enum: names }, ...families.map((family) => ({ pattern: `^${family.slice(0, -1)}.` }))];
  return {
    ...schema,
    properties: { ...properties, finding: { ...properties['finding'], anyOf } },
    oneOf: [{ required: ['at-least'] }, { required: ['at-most'] }, { required: ['is'] }],
  };
}

function withoutDialect(schema: JsonSchema): JsonSchema {
  return Object.fromEntries(Object.entries(schema).filter(([key]) => key !== '$schema'));
}
