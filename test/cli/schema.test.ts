import { readdirSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  publishedSchema,
  schemaFileName,
  schemaKinds,
  writtenKinds,
  type SchemaKind,
} from '../../src/cli/published-schemas.js';
import { vocabulary } from '../../src/cli/vocabulary.js';
import { RailproofError } from '../../src/errors/railproof-error.js';
import { kindOf, parseFile } from '../../src/files/parse-file.js';
import { fileKinds, type FileKind } from '../../src/files/file-kind.js';
import { benchSchema } from '../../src/files/bench-schema.js';
import { driverSchema } from '../../src/files/driver-schema.js';
import { moduleSchema } from '../../src/files/module-schema.js';
import { parseProcedure } from '../../src/files/read-procedure.js';
import { parseStages } from '../../src/files/read-stages.js';
import { parseTolerance } from '../../src/files/read-tolerance.js';
import { parseYaml } from '../../src/files/yaml-document.js';
import { everySchemaIn, mismatches, undescribed, validatorOf } from '../json-schema-check.js';
import fc from '../property.js';
import { railproof } from './in-process.js';

describe.each([...schemaKinds])('the schema called %s', (kind) => {
  const schema = publishedSchema(kind);

  it('is a schema to the letter, called as the file that it is kept in', () => {
    expect(() => validatorOf(schema)).not.toThrow();
    expect(schema['$id']).toBe(`${kind}.schema.json`);
    expect(schema['title']).toBe(`railproof ${kind}`);
  });

  it('says what every key is', () => {
    expect(undescribed(schema)).toEqual([]);
  });

  it('leaves no map open', () => {
    const open = everySchemaIn(schema, '').filter(
      ({ schema: each }) => each['type'] === 'object' && each['additionalProperties'] === undefined,
    );
    expect(open.map(({ at }) => at)).toEqual([]);
  });

  it('is printed by the command', async () => {
    const { status, stdout } = await railproof('schema', kind);
    expect(status).toBe(0);
    expect(JSON.parse(stdout)).toEqual(schema);
    // Renewed with `-u`, by hand: where CI runs nothing is written.
    await expect(stdout).toMatchFileSnapshot(`../../schemas/${schemaFileName(kind)}`);
  });
});

it('the package has a file of each, and of nothing else', () => {
  expect(readdirSync('schemas').sort()).toEqual(['README.md', ...schemaKinds.map(schemaFileName)].sort());
  const names = schemaKinds.map((kind) => `railproof/schemas/${schemaFileName(kind)}`);
  for (const name of names) expect(() => createRequire(import.meta.url).resolve(name)).not.toThrow();
  const { files } = JSON.parse(readFileSync('package.json', 'utf8')) as { files: readonly string[] };
  expect(files).toContain('schemas');
});

it('without a kind all of them are listed, each with what it is', async () => {
  const { status, stdout } = await railproof('schema');
  expect(status).toBe(0);
  for (const kind of schemaKinds) expect(stdout).toMatch(new RegExp(`^ +${kind} +\\S`, 'm'));
  expect(schemaKinds).toEqual([...fileKinds, ...writtenKinds]);
});

it('a kind that is misspelt is told with the one that was meant', async () => {
  const { status, stderr } = await railproof('schema', 'bensh');
  expect(status).toBe(64);
  expect(stderr).toContain("did you mean 'bench'?");
});

const folders = [
  ...['fixtures/benches', 'fixtures/modules', 'fixtures/procedures', 'fixtures/stages'],
  ...['procedures', 'procedures/tolerances', 'drivers'],
];
const shipped = folders.flatMap((folder) =>
  readdirSync(folder)
    .filter((name) => name.endsWith('.yaml'))
    .map((name) => join(folder, name)),
);
const texts = shipped.map((path) => readFileSync(path, 'utf8'));
const checks = Object.fromEntries(
  fileKinds.map((kind) => [kind, validatorOf(publishedSchema(kind))]),
) as Record<FileKind, ReturnType<typeof validatorOf>>;

it.each(shipped)('%s is to its schema as it is to the program', (path) => {
  const text = readFileSync(path, 'utf8');
  const kind: SchemaKind = kindOf(parseYaml(text, path));
  expect(mismatches(checks[kind], parseYaml(text, path).value)).toEqual([]);
});

it('the program accepts nothing that the schema of its kind refuses', () => {
  let accepted = 0;
  let bothRefuse = 0;
  let refused = 0;
  fc.assert(
    fc.property(
      fc.constantFrom(...texts.filter((text) => text.length < 6000)),
      fc.nat(),
      fc.constantFrom(...changes),
      (text, place, change) => {
        const kind = kindOf(parseYaml(text, 'file.yaml'));
        const value = parseYaml(text, 'file.yaml').value;
        const changed = changedAt(value, place, change);
        const fits = mismatches(checks[kind], changed);
        if (isAccepted(kind, JSON.stringify(changed))) {
          accepted += 1;
          expect(fits).toEqual([]);
        } else {
          refused += 1;
          if (fits.length > 0) bothRefuse += 1;
        }
      },
    ),
    { numRuns: 300 },
  );
  // Both must have been met, or nothing was shown; what the program refuses the editor mostly sees as well.
  expect(accepted).toBeGreaterThan(20);
  expect(bothRefuse).toBeGreaterThan(refused / 2);
});

type Change = (parent: Record<string, unknown>, key: string) => void;

/** What becomes of one key, or one place of a list. */
const changes: readonly Change[] = [
  (parent, key) =>
    Array.isArray(parent) ? parent.splice(Number(key), 1) : Reflect.deleteProperty(parent, key),
  (parent, key) => (parent[`${key}s`] = parent[key]),
  ...[4, '4 A', '4 V', '50 % of rated-current', '2 s', '-1 mΩ', 'no such word', true, null, [], {}, ''].map(
    (other): Change =>
      (parent, key) =>
        (parent[key] = other),
  ),
];

function changedAt(value: unknown, place: number, change: Change): unknown {
  const changed: unknown = structuredClone(value);
  const places = placesIn(changed).filter(({ key }) => key !== 'railproof');
  const found = places[place % places.length];
  if (found !== undefined) change(found.parent, found.key);
  return changed;
}

function placesIn(value: unknown): readonly { parent: Record<string, unknown>; key: string }[] {
  if (typeof value !== 'object' || value === null) return [];
  const parent = value as Record<string, unknown>;
  return Object.keys(parent).flatMap((key) => [{ parent, key }, ...placesIn(parent[key])]);
}

function isAccepted(kind: FileKind, text: string): boolean {
  try {
    read(kind, text);
    return true;
  } catch (error) {
    if (error instanceof RailproofError) return false;
    throw error;
  }
}

function read(kind: FileKind, text: string): unknown {
  switch (kind) {
    case 'bench':
      return parseFile(kind, benchSchema, text, 'file.yaml');
    case 'module':
      return parseFile(kind, moduleSchema, text, 'file.yaml');
    case 'driver':
      return parseFile(kind, driverSchema, text, 'file.yaml');
    case 'procedure':
      return parseProcedure(text, 'file.yaml', vocabulary);
    case 'tolerance':
      return parseTolerance(text, 'file.yaml', vocabulary);
    case 'stages':
      return parseStages(text, 'file.yaml');
  }
}
