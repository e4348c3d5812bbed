import { Ajv2020, type ValidateFunction } from 'ajv/dist/2020.js';

type Schema = Readonly<Record<string, unknown>>;

/** By draft 2020-12 and nothing that it leaves open. What `format` says our schemas say by a pattern too. */
export function validatorOf(schema: Schema): ValidateFunction {
  return new Ajv2020({ strict: true, allowUnionTypes: true, validateFormats: false }).compile(schema);
}

/** What a value has against a schema; empty where nothing. */
export function mismatches(validate: ValidateFunction, value: unknown): readonly string[] {
  validate(value);
  return (validate.errors ?? []).map(({ instancePath, message = '' }) => `${instancePath}: ${message}`);
}

/** The keys that a schema describes, and no words for them. */
export function undescribed(schema: Schema): readonly string[] {
  const shared = (schema['$defs'] ?? {}) as Readonly<Record<string, Schema>>;
  const wordless = (key: Schema): boolean => {
    const { description, $ref } = key;
    const target = typeof $ref === 'string' ? shared[$ref.replace('#/$defs/', '')] : undefined;
    return (description ?? target?.['description'] ?? '') === '';
  };
  return everySchemaIn(schema, '').flatMap(({ at, schema: { properties, required } }) =>
    Object.entries((properties ?? {}) as Readonly<Record<string, Schema>>)
      // What only tells alternatives apart is described beside them.
      .filter(
        ([key, each]) =>
          Object.keys(each).length > 0 || !((required as string[] | undefined) ?? []).includes(key),
      )
      .filter(([, each]) => wordless(each))
      .map(([key]) => `${at}/${key}`),
  );
}

/** A schema and all those inside it, each with its place. */
export function everySchemaIn(schema: Schema, at: string): readonly { at: string; schema: Schema }[] {
  const listed = ['oneOf', 'anyOf', 'allOf', 'prefixItems'].flatMap((key) =>
    ((schema[key] ?? []) as readonly Schema[]).map((each, index) => [`(${index})`, each] as const),
  );
  const named = ['properties', '$defs'].flatMap((key) =>
    Object.entries((schema[key] ?? {}) as Readonly<Record<string, Schema>>).map(
      ([name, each]) => [`/${name}`, each] as const,
    ),
  );
  const others = ['items', 'additionalProperties']
    .filter((key) => typeof schema[key] === 'object')
    .map((key) => [`[]`, schema[key] as Schema] as const);
  return [
    { at, schema },
    ...[...listed, ...named, ...others].flatMap(([place, each]) => everySchemaIn(each, at + place)),
  ];
}
