import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { publishedSchema, type WrittenKind } from '../../src/cli/published-schemas.js';
import { mismatches, validatorOf } from '../json-schema-check.js';
import { realClock } from '../../src/clock/real-clock.js';
import { formatAddress } from '../../src/files/connection-address.js';
import { quirkyInstrument } from '../instrument/quirks/quirky-instrument.js';
import { quirkyLoad } from '../instrument/quirks/quirky-load.js';
import { serveQuirkyTcp } from '../instrument/quirks/serve-quirky.js';
import { railproof as atSocket } from './at-a-socket.js';
import { railproof } from './in-process.js';
import { drawer, keptOf } from './kept-drawer.js';

const [k1 = '', k2 = ''] = ['K1', 'K2'].map((module) => keptOf(module, 'real-limit')[0]);
const dialogue = 'fixtures/dialogues/load-input-scpi.jsonl';
const single = ['--bench', 'fixtures/benches/nursery.yaml', '--module', 'fixtures/modules/K1.yaml'];

/** What each command prints, by the word in its `format`. */
const commands: readonly (readonly [WrittenKind, readonly string[]])[] = [
  ['run', ['analyse', k1]],
  ['run', ['analyse', keptOf('K1', 'isolation')[0] ?? '']],
  ['compare', ['compare', k1, k2]],
  ['combination', ['combine', '--parallel', k1, k2]],
  ['combination', ['combine', '--parallel', k1, k2, '--ballast', '51 mΩ', '--load', '20 A']],
  ['combination', ['combine', '--series', k1, k2]],
  ['staged-supply', ['stages', 'fixtures/stages/valve-bench.yaml']],
  ['selection', ['select', drawer, '--group', '2']],
  ['plan', ['run', 'real-limit', ...single, '--dry-run']],
  ['runs', ['runs', drawer]],
  ['drivers', ['drivers']],
  ['trial', ['drivers', '--try', 'load-input-scpi', '--connection', `replay:${dialogue}`]],
  ['ports', ['ports']],
];

it.each(commands)('%s: what is printed is to its schema: %j', async (kind, args) => {
  const { stdout } = await railproof(...args, '--json');
  const printed = JSON.parse(stdout) as { format: string };
  expect(printed.format).toBe(`railproof/${kind} 1`);
  const check = validatorOf(publishedSchema(kind));
  expect(mismatches(check, printed)).toEqual([]);
  for (const key of Object.keys(printed)) {
    expect(mismatches(check, { ...printed, [`${key}s-of-old`]: 1 })).not.toEqual([]);
    expect(mismatches(check, { ...printed, [key]: { odd: 1 } })).not.toEqual([]);
  }
});

it('match: what is printed is to its schema, of an instrument that answers and of one that does not', async () => {
  const check = validatorOf(publishedSchema('match'));
  const answering = formatAddress(await serveQuirkyTcp(quirkyInstrument({}, quirkyLoad().knows, realClock)));
  const deaf = formatAddress(await serveQuirkyTcp(quirkyInstrument({}, () => undefined, realClock)));
  for (const [address, answered] of [[answering, true] as const, [deaf, false] as const]) {
    const { stdout } = await atSocket('drivers', '--match', address, '--json');
    const printed = JSON.parse(stdout) as object;
    expect(printed).toMatchObject({ format: 'railproof/match 1', answered });
    expect(mismatches(check, printed)).toEqual([]);
    expect(mismatches(check, { ...printed, 'families-of-old': 1 })).not.toEqual([]);
  }
}, 120_000);

describe('a run that keeps its trace', () => {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-'));
  let printed = '';
  let record = '';

  beforeAll(async () => {
    const args = ['run', 'quick-look', ...single, '--yes', '--trace', '--runs', folder, '--json'];
    ({ stdout: printed } = await railproof(...args));
    record = join(folder, readdirSync(folder)[0] ?? '');
  }, 120_000);
  afterAll(() => {
    rmSync(folder, { recursive: true });
  });

  it('prints what its findings.json holds, both to the schema', () => {
    const check = validatorOf(publishedSchema('run'));
    expect(mismatches(check, JSON.parse(printed))).toEqual([]);
    expect(mismatches(check, parsed(join(record, 'findings.json')))).toEqual([]);
  });

  it('has a run.json to the schema', () => {
    expect(mismatches(validatorOf(publishedSchema('record')), parsed(join(record, 'run.json')))).toEqual([]);
  });

  it('has a journal each of whose lines is to the schema', () => {
    expectLines('journal', join(record, 'journal.jsonl'));
  });

  it('has a trace each of whose lines is to the schema', () => {
    const trace = join(record, 'trace');
    const lines = readdirSync(trace).filter((name) => name.endsWith('.jsonl'));
    expect(lines.length).toBeGreaterThan(1);
    for (const name of lines)
      expectLines(name.includes('operator') ? 'answers' : 'dialogue', join(trace, name));
  });
});

it('the kept records are to the schemas, whenever they were made', () => {
  for (const name of readdirSync(drawer).filter((each) => each.endsWith('-real-limit'))) {
    expectLines('journal', join(drawer, name, 'journal.jsonl'));
    const check = validatorOf(publishedSchema('record'));
    expect(mismatches(check, parsed(join(drawer, name, 'run.json')))).toEqual([]);
  }
});

it('a line of a journal that lacks its seal, or has a key too many, is not', () => {
  const check = validatorOf(publishedSchema('journal'));
  const [first = '{}'] = readFileSync(join(k1, 'journal.jsonl'), 'utf8').split('\n');
  const { seal, ...unsealed } = JSON.parse(first) as Record<string, unknown>;
  expect(mismatches(check, { ...unsealed, seal })).toEqual([]);
  expect(mismatches(check, unsealed)).not.toEqual([]);
  expect(mismatches(check, { ...unsealed, seal, more: 1 })).not.toEqual([]);
});

function expectLines(kind: WrittenKind, path: string): void {
  const check = validatorOf(publishedSchema(kind));
  const lines = readFileSync(path, 'utf8').split('\n').slice(0, -1);
  expect(lines.length).toBeGreaterThan(0);
  for (const line of lines) expect(mismatches(check, JSON.parse(line))).toEqual([]);
}

function parsed(path: string): unknown {
  return JSON.parse(readFileSync(path, 'utf8'));
}
