import { describe, expect, it } from 'vitest';
import { fileKinds, type FileKind } from '../../src/files/file-kind.js';
import { jsonSchemaOf, type JsonSchema } from '../../src/files/json-schema.js';
import { parseYaml } from '../../src/files/yaml-document.js';
import { mismatches, undescribed, validatorOf } from '../json-schema-check.js';
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
  module: [{ rated: { voltage: 4, current: '4 A' } }, '/rated/voltage'],
  bench: [{ limits: { voltage: 4, current: '8 A', power: '120 W' } }, '/limits/voltage'],
  driver: [{ ratings: { voltage: 4 } }, '/ratings/voltage'],
  procedure: [{ derating: { margin: 4 } }, '/derating/margin'],
  tolerance: [{ findings: [{ finding: 'usable-current', within: 4 }] }, '/findings/0/within'],
  stages: [{ output: { from: 4, to: '32 V' } }, '/output/from'],
};

describe.each([...fileKinds])('the schema of a %s', (kind) => {
  const schema = jsonSchemaOf(kind, vocabulary);
  const check = validatorOf(schema);
  const example = parseYaml(examples[kind], 'example.yaml').value as object;

  it('is of draft 2020-12, and has a title', () => {
    expect(schema['$schema']).toBe('https://json-schema.org/draft/2020-12/schema');
    expect(schema['title']).toBe(`railproof ${kind}`);
    expect(schema['required']).toContain('railproof');
  });

  it('takes the example of the design', () => {
    expect(mismatches(check, example)).toEqual([]);
  });

  it('does not take an unknown key, another kind of file, or a bare number for a quantity', () => {
    expect(mismatches(check, { ...example, nonsense: 1 })).toEqual([': must NOT have additional properties']);
    expect(mismatches(check, { ...example, railproof: 'sonata 1' })).toEqual([
      '/railproof: must be equal to constant',
    ]);
    const [part, place] = bareNumbers[kind];
    expect(mismatches(check, { ...example, ...part })).toContain(`${place}: must be string`);
  });

  it('describes every key', () => {
    expect(undescribed(schema)).toEqual([]);
  });
});

it('without a vocabulary a procedure is described but for its steps', () => {
  const properties = jsonSchemaOf('procedure')['properties'] as Record<string, JsonSchema>;
  expect(properties['steps']).toMatchObject({ type: 'array', minItems: 1, maxItems: 200 });
});

it('a step without parameters that must be given may stand alone', () => {
  const check = validatorOf(jsonSchemaOf('procedure', vocabulary));
  const file = { railproof: 'procedure 1', name: 'x', title: 'X' };
  expect(mismatches(check, { ...file, steps: [{ 'open-circuit': null }] })).toEqual([]);
  expect(mismatches(check, { ...file, steps: [{ wait: null }] })).not.toEqual([]);
  expect(mismatches(check, { ...file, steps: [{ soak: {} }] })).not.toEqual([]);
});

it('what may be asked of a finding goes by what it measures', () => {
  const check = validatorOf(jsonSchemaOf('procedure', vocabulary));
  const asks = (criterion: object): readonly string[] =>
    mismatches(check, {
      ...{ railproof: 'procedure 1', name: 'x', title: 'X', steps: [{ 'open-circuit': null }] },
      criteria: [criterion],
    });
  expect(asks({ finding: 'usable-current', 'at-least': '4 A' })).toEqual([]);
  expect(asks({ finding: 'usable-current', 'at-least': '120 % of baseline' })).toEqual([]);
  expect(asks({ finding: 'usable-current', 'at-least': '4 V' })).not.toEqual([]);
  expect(asks({ finding: 'usable-current', is: 'plenty' })).not.toEqual([]);
  expect(asks({ finding: 'usable-current', 'at-least': '4 A', 'at-most': '5 A' })).not.toEqual([]);
  expect(asks({ finding: 'usable-currant', 'at-least': '4 A' })).not.toEqual([]);
});
