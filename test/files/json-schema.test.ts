import { describe, expect, it } from 'vitest';
import { fileKinds, type FileKind } from '../../src/files/file-kind.js';
import { jsonSchemaOf, type JsonSchema } from '../../src/files/json-schema.js';
import { parseYaml } from '../../src/files/yaml-document.js';
import {
  benchExample,
  driverExample,
  moduleExample,
  procedureExample,
  simulationExample,
  stagesExample,
  toleranceExample,
  vocabulary,
} from './design-examples.js';

const examples: Record<FileKind, string> = {
  module: moduleExample,
  bench: benchExample + simulationExample,
  driver: driverExample,
  procedure: procedureExample,
  tolerance: toleranceExample,
  stages: stagesExample,
};

/** A part of a file with a bare number in it, and where that stands. */
const bareNumbers: Record<FileKind, readonly [object, string]> = {
  module: [{ rated: { voltage: 4 } }, '/rated/voltage'],
  bench: [{ limits: { voltage: 4 } }, '/limits/voltage'],
  driver: [{ ratings: { voltage: 4 } }, '/ratings/voltage'],
  procedure: [{ derating: { margin: 4 } }, '/derating/margin'],
  tolerance: [{ findings: [{ finding: 'usable-current', within: 4 }] }, '/findings/0/within'],
  stages: [{ output: { from: 4 } }, '/output/from'],
};

describe.each([...fileKinds])('the schema of a %s', (kind) => {
  const schema = jsonSchemaOf(kind, vocabulary);

  it('is of draft 2020-12, and has a title', () => {
    expect(schema['$schema']).toBe('https://json-schema.org/draft/2020-12/schema');
    expect(schema['title']).toBe(`railproof ${kind}`);
    expect(schema['required']).toContain('railproof');
  });

  it('takes the example of the design', () => {
    expect(mismatches(schema, parseYaml(examples[kind], 'example.yaml').value, '')).toEqual([]);
  });

  it('does not take an unknown key, or a bare number for a quantity', () => {
    const value = parseYaml(examples[kind], 'example.yaml').value as object;
    expect(mismatches(schema, { ...value, nonsense: 1 }, '')).toEqual(['/nonsense: not described']);
    const [part, place] = bareNumbers[kind];
    expect(mismatches(schema, { ...value, ...part }, '')).toContain(`${place}: not a string`);
  });

  it('describes every key', () => {
    expect(undescribed(schema, '')).toEqual([]);
  });
});

it('without a vocabulary a procedure is described but for its steps', () => {
  const properties = jsonSchemaOf('procedure')['properties'] as Record<string, JsonSchema>;
  expect(properties['steps']).toMatchObject({ type: 'array', minItems: 1, maxItems: 200 });
});

it('a step without parameters that must be given may stand alone', () => {
  const schema = jsonSchemaOf('procedure', vocabulary);
  const file = { railproof: 'procedure 1', name: 'x', title: 'X' };
  expect(mismatches(schema, { ...file, steps: [{ 'open-circuit': null }] }, '')).toEqual([]);
  expect(mismatches(schema, { ...file, steps: [{ wait: null }] }, '')).not.toEqual([]);
  expect(mismatches(schema, { ...file, steps: [{ soak: {} }] }, '')).not.toEqual([]);
});

/** A light check of a value by the keywords that our schemas use; every mismatch with its place. */
function mismatches(schema: JsonSchema, value: unknown, at: string): string[] {
  const alternatives = (schema['oneOf'] ?? schema['anyOf']) as JsonSchema[] | undefined;
  if (alternatives !== undefined && !alternatives.some((each) => mismatches(each, value, at).length === 0)) {
    return [`${at}: none of the alternatives`];
  }
  const type = schema['type'];
  if (type === 'null') return value === null ? [] : [`${at}: not null`];
  if (type === 'string') return stringMismatches(schema, value, at);
  if (type === 'integer') return Number.isInteger(value) ? [] : [`${at}: not a whole number`];
  if (type === 'boolean') return typeof value === 'boolean' ? [] : [`${at}: not true or false`];
  if (type === 'array') {
    if (!Array.isArray(value)) return [`${at}: not a list`];
    return value.flatMap((each, index) => mismatches(schema['items'] as JsonSchema, each, `${at}/${index}`));
  }
  if (typeof value !== 'object' || value === null) return type === 'object' ? [`${at}: not a map`] : [];
  const properties = (schema['properties'] ?? {}) as Record<string, JsonSchema>;
  const required = (schema['required'] ?? []) as string[];
  return [
    ...required.filter((key) => !Object.hasOwn(value, key)).map((key) => `${at}/${key}: missing`),
    ...Object.entries(value).flatMap(([key, each]) => {
      const described = properties[key];
      if (described !== undefined) return mismatches(described, each, `${at}/${key}`);
      return schema['additionalProperties'] === false ? [`${at}/${key}: not described`] : [];
    }),
  ];
}

function stringMismatches(schema: JsonSchema, value: unknown, at: string): string[] {
  if (typeof value !== 'string') return [`${at}: not a string`];
  const {
    pattern,
    enum: allowed,
    const: only,
  } = schema as { pattern?: string; enum?: string[]; const?: string };
  if (pattern !== undefined && !new RegExp(pattern, 'u').test(value)) return [`${at}: not of the pattern`];
  if (allowed?.includes(value) === false) return [`${at}: not among the words`];
  return only === undefined || only === value ? [] : [`${at}: not the word`];
}

function undescribed(schema: JsonSchema, at: string): string[] {
  const properties = Object.entries((schema['properties'] ?? {}) as Record<string, JsonSchema>);
  const inner = [schema['items'], ...((schema['oneOf'] ?? schema['anyOf'] ?? []) as unknown[])];
  return [
    ...properties.flatMap(([key, each]) => [
      ...(each['description'] === undefined && !('const' in each) && !at.endsWith('(steps)')
        ? [`${at}/${key}`]
        : []),
      ...undescribed(each, `${at}/${key}${key === 'steps' ? '(steps)' : ''}`),
    ]),
    ...inner.filter((each) => each !== undefined).flatMap((each) => undescribed(each as JsonSchema, at)),
  ];
}
