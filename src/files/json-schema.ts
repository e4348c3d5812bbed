import { capitalised } from '../quantity/capitalised.js';
import { benchSchema } from './bench-schema.js';
import { criterionSchema } from './criterion.js';
import { draftOf, type JsonSchema } from './draft-schema.js';
import { driverSchema } from './driver-schema.js';
import type { FileKind } from './file-kind.js';
import { criterionAlternatives, toleranceAlternatives } from './finding-alternatives.js';
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
  const steps = vocabulary.stepKinds.map(({ kind, summary, parameters }) =>
    stepSchema(kind, summary, withoutDialect(draftOf(parameters))),
  );
  const criteria = criterionAlternatives(vocabulary, draftOf(criterionSchema));
  return withItems(schema, { steps: { oneOf: steps }, criteria: { anyOf: criteria } });
}

/** A step none of whose parameters must be given may stand without any: `open-circuit:`. */
function stepSchema(kind: string, summary: string, parameters: JsonSchema): JsonSchema {
  const { required } = parameters;
  const mayBeEmpty = !Array.isArray(required) || required.length === 0;
  const described = { description: asSentence(summary), ...parameters };
  return {
    type: 'object',
    properties: {
      [kind]: mayBeEmpty
        ? { description: described.description, anyOf: [parameters, { type: 'null' }] }
        : described,
    },
    required: [kind],
    additionalProperties: false,
  };
}

function withEntries(schema: JsonSchema, vocabulary: Vocabulary): JsonSchema {
  const anyOf = toleranceAlternatives(vocabulary, draftOf(toleranceEntrySchema));
  return withItems(schema, { findings: { anyOf } });
}

function withItems(schema: JsonSchema, items: Readonly<Record<string, JsonSchema>>): JsonSchema {
  const properties = schema['properties'] as Readonly<Record<string, JsonSchema>>;
  const lists = Object.entries(items).map(
    ([key, each]) => [key, { ...properties[key], items: each }] as const,
  );
  return { ...schema, properties: { ...properties, ...Object.fromEntries(lists) } };
}

function asSentence(words: string): string {
  return `${capitalised(words)}.`;
}

function withoutDialect(schema: JsonSchema): JsonSchema {
  return Object.fromEntries(Object.entries(schema).filter(([key]) => key !== '$schema'));
}
