import * as z from '../libraries/zod.js';

export type JsonSchema = Readonly<Record<string, unknown>>;

/**
 * A schema of ours as a JSON Schema, draft 2020-12: of what goes in, as it stands in a file. Every map is closed: what
 * is not described is not there.
 */
export function draftOf(schema: z.ZodType): JsonSchema {
  return z.toJSONSchema(schema, {
    target: 'draft-2020-12',
    io: 'input',
    override: ({ jsonSchema }) => {
      // So large that it says nothing but that the number is a whole one.
      if (jsonSchema.maximum === Number.MAX_SAFE_INTEGER) delete jsonSchema.maximum;
      if (jsonSchema.minimum === Number.MIN_SAFE_INTEGER) delete jsonSchema.minimum;
      if (jsonSchema.properties !== undefined) jsonSchema.additionalProperties ??= false;
    },
  });
}
