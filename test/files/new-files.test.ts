import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { parse } from 'yaml';
import { vocabulary } from '../../src/cli/vocabulary.js';
import type { ConnectionAddress } from '../../src/files/bench.js';
import { benchText, type NewBench } from '../../src/files/new-bench.js';
import { moduleText } from '../../src/files/new-module.js';
import { adaptedProcedure, emptyProcedure } from '../../src/files/new-procedure.js';
import type { Module } from '../../src/files/module.js';
import type { Criterion, ProcedureStep } from '../../src/files/procedure.js';
import { parseBench } from '../../src/files/read-bench.js';
import { parseModule } from '../../src/files/read-module.js';
import { parseProcedure } from '../../src/files/read-procedure.js';
import { comment, written } from '../../src/files/written-yaml.js';
import fc from '../property.js';

/** What a line of a file may hold, and what YAML makes the most of. */
const hostile = fc.constantFrom(
  '',
  ...[
    'null',
    'Yes',
    '~',
    '-',
    '- a',
    '15',
    '1e3',
    '0x1F',
    '.inf',
    '2026-11-14',
    'a: b',
    'a #b',
    '#',
    '{a: 1}',
  ],
  ...[
    '[x]',
    '"',
    "'",
    '\\',
    '\\n',
    '*a',
    '&a',
    '!tag',
    '%TAG',
    '|',
    '>',
    '? a',
    '@',
    '`',
    '---',
    '...',
    'railproof:',
  ],
  ...[
    '\ufeff',
    '\ufffe',
    '\u00ad',
    '\u{e0001}',
    'Ω',
    'é',
    '\u0301',
    '中',
    '🔧',
    'a\u00a0b',
    'x, y: { z }',
    '${x}',
    '<<',
  ],
);
const words = fc
  .array(fc.oneof(hostile, fc.string({ unit: 'grapheme', maxLength: 12 })), { maxLength: 6 })
  .map((parts) => parts.join(' '))
  .filter((text) => /^[^\p{Cc}\p{Cs}\u2028-\u202e\u2066-\u2069]*$/u.test(text))
  .map((text) => Array.from(text).slice(0, 60).join('').trim());
const somewords = words.filter((text) => text !== '');
const names = fc.stringMatching(/^[A-Za-z0-9_-][A-Za-z0-9._-]{0,20}$/);
const some = fc.double({ min: 1e-3, max: 1e3, noNaN: true });
// A file has one zero.
const degrees = fc.double({ min: -40, max: 150, noNaN: true }).map((value) => value + 0);
const dates = fc
  .date({ min: new Date('2001-01-01'), max: new Date('2099-12-31'), noInvalidDate: true })
  .map((date) => date.toISOString().slice(0, 10));

const modules: fc.Arbitrary<Module> = fc.record({
  name: names,
  description: words,
  rated: fc.record(
    { voltage: some, current: some, ambient: degrees },
    { requiredKeys: ['voltage', 'current'] },
  ),
  protectionClass: fc.constantFrom('I', 'II'),
  input: fc.constantFrom('mains', 'dc'),
  outputIsolation: fc.oneof(fc.constant('unknown' as const), some),
  changes: fc
    .array(fc.record({ date: dates, what: somewords }), { maxLength: 4 })
    .map((changes) => changes.toSorted((one, other) => one.date.localeCompare(other.date))),
});

const addresses: fc.Arbitrary<ConnectionAddress> = fc.oneof(
  fc.record({
    kind: fc.constant('tcp' as const),
    host: fc.constantFrom('192.0.2.17', 'bench.example', '2001:db8::1'),
    port: fc.integer({ min: 1, max: 65535 }),
  }),
  fc.record({
    kind: fc.constant('serial' as const),
    path: fc.constantFrom('/dev/ttyUSB0', 'COM3', '/dev/serial/by-id/a: #b'),
    baud: fc.constantFrom(9600, 115200),
  }),
);
const place = fc.record(
  { driver: somewords, connection: addresses, channel: fc.integer({ min: 0, max: 9999 }) },
  { requiredKeys: ['driver', 'connection'] },
);
const sourcePlace = fc.record(
  { driver: somewords, connection: addresses, voltage: some, current: some },
  { requiredKeys: ['driver', 'connection', 'voltage', 'current'] },
);
const leads = fc.record({ resistance: some, uncertainty: some });
const benches: fc.Arbitrary<NewBench> = fc.record(
  {
    name: somewords,
    instruments: fc.record(
      { load: place, meter: place, thermometer: place, source: sourcePlace },
      { requiredKeys: ['load', 'meter'] },
    ),
    voltageFrom: fc.constant('meter-at-module' as const),
    limits: fc.record(
      { voltage: some, current: some, power: some, temperature: degrees },
      { requiredKeys: ['voltage', 'current', 'power'] },
    ),
    leads,
    ambient: fc.record({ temperature: degrees, uncertainty: some }),
  },
  { requiredKeys: ['name', 'instruments', 'voltageFrom', 'limits'] },
);

const criteria: fc.Arbitrary<readonly Criterion[]> = fc.array(
  fc.oneof(
    fc.record({
      finding: fc.constantFrom('usable-current', 'recommended-current'),
      requirement: fc.record({
        kind: fc.constantFrom('at-least' as const, 'at-most' as const),
        value: fc.oneof(
          fc.record({ kind: fc.constant('absolute' as const), value: some }),
          fc.record({
            kind: fc.constant('share' as const),
            ratio: some,
            of: fc.constantFrom('rated-current' as const, 'baseline' as const),
          }),
        ),
      }),
    }),
    fc.record({
      finding: fc.constant('limit-style'),
      requirement: fc.record({
        kind: fc.constant('is' as const),
        word: fc.constantFrom('hiccup', 'foldback'),
      }),
    }),
  ),
  { maxLength: 3 },
);
const wanted = fc.record({ name: names, title: somewords, criteria });
const shippedProcedures = readdirSync('procedures')
  .filter((file) => file.endsWith('.yaml'))
  .map((file) => readFileSync(`procedures/${file}`, 'utf8'));

describe('a text in a file that is written for somebody', () => {
  it('reads back to itself, alone and in a map on one line, whatever it holds', () => {
    fc.assert(
      fc.property(words, (text) => {
        expect(parse(`a: ${written(text)}\n`)).toEqual({ a: text });
        expect(parse(`{ a: ${written(text)}, b: 1 }`)).toEqual({ a: text, b: 1 });
      }),
      { numRuns: 500 },
    );
  });

  it('as a comment never becomes a line of the file, nor steers a terminal', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (text) => {
        const lines = comment(`${text}\u001b[2J\nname: gone\r\u0085x`, '  ').split('\n');
        expect(lines.pop()).toBe('');
        for (const line of lines) expect(line).toMatch(/^ {2}# [^\p{Cc}\p{Cf}\u2028\u2029]*$/u);
      }),
    );
  });
});

describe('a file that is written from answers reads back to them', () => {
  it('a module', () => {
    fc.assert(
      fc.property(modules, (module) => {
        expect(parseModule(moduleText(module), 'K1.yaml')).toEqual(module);
      }),
      { numRuns: 300 },
    );
  });

  it('a bench', () => {
    fc.assert(
      fc.property(benches, words, (bench, remark) => {
        const { instruments, leads = { resistance: 0, uncertainty: 0 }, ...rest } = bench;
        const { source } = instruments;
        const text = benchText({
          ...bench,
          instruments: { ...instruments, load: { ...instruments.load, remark } },
        });
        expect(parseBench(text, 'bench.yaml')).toEqual({
          ...{ ...rest, leads },
          instruments: {
            ...instruments,
            ...(source === undefined ? {} : { source: { ...source, offFor: 5 } }),
          },
        });
      }),
      { numRuns: 300 },
    );
  });

  it('a simulated bench, whatever the label of the module on it', () => {
    const simulated = { kind: 'simulated' } as const;
    const tried = fc.record({
      name: names,
      voltage: fc.double({ min: 0.1, max: 45, noNaN: true }),
      current: fc.double({ min: 0.01, max: 15, noNaN: true }),
      style: fc.constantFrom('constant-current', 'foldback', 'constant-power', 'hiccup', 'latch-off'),
    });
    fc.assert(
      fc.property(tried, (tries) => {
        const text = benchText({
          name: 'tried',
          instruments: { load: { driver: 'load-input-scpi', connection: simulated } },
          leads: { resistance: 0.035, uncertainty: 0.005 },
          voltageFrom: 'load-terminals',
          limits: { voltage: 60, current: 40, power: 200 },
          tries,
        });
        const { modules: [module] = [] } = parseBench(text, 'bench.yaml').simulation ?? {};
        expect(module).toMatchObject({
          name: tries.name,
          limit: { style: tries.style },
          ratedCurrent: tries.current,
        });
        expect(module?.limit.current).toBeGreaterThan(tries.current);
      }),
    );
  });

  it('a procedure made from a shipped one, with all else as it stands there', () => {
    fc.assert(
      fc.property(wanted, fc.constantFrom(...shippedProcedures), (answers, text) => {
        const before = parseProcedure(text, 'p.yaml', vocabulary);
        const after = parseProcedure(adaptedProcedure(text, answers, vocabulary), 'p.yaml', vocabulary);
        const stripped = ({ kind, parameters }: ProcedureStep): object => ({ kind, parameters });
        expect({ ...after, steps: after.steps.map(stripped) }).toEqual({
          ...before,
          steps: before.steps.map(stripped),
          ...answers,
        });
      }),
      { numRuns: 200 },
    );
  });

  it('an empty procedure', () => {
    fc.assert(
      fc.property(wanted, words, (answers, purpose) => {
        const text = emptyProcedure({ ...answers, purpose }, vocabulary);
        expect(parseProcedure(text, 'p.yaml', vocabulary)).toMatchObject({ ...answers, purpose });
      }),
    );
  });
});

describe('an empty procedure', () => {
  const text = emptyProcedure({ name: 'mine', title: 'Mine', purpose: '', criteria: [] }, vocabulary);

  it.each(vocabulary.stepKinds.map(({ kind }) => kind))(
    'has a step of the kind %s to take the # from',
    (kind) => {
      const example = new RegExp(`^  # (- ${kind}: .*)$`, 'm').exec(text);
      expect(example).not.toBeNull();
      const live = text.replace(example?.[0] ?? '', `  ${example?.[1] ?? ''}`);
      expect(parseProcedure(live, 'p.yaml', vocabulary).steps.map((step) => step.kind)).toEqual([
        'open-circuit',
        kind,
      ]);
    },
  );

  it('explains each parameter of each kind', () => {
    for (const { kind, parameters } of vocabulary.stepKinds) {
      const part = text.split(`  # ${kind}: `)[1]?.split('\n  #\n')[0] ?? '';
      const schema = parameters as unknown as {
        readonly shape?: object;
        readonly in?: { readonly shape: object };
      };
      const keys = Object.keys(schema.shape ?? schema.in?.shape ?? {});
      expect(keys.length).toBeGreaterThan(0);
      for (const key of keys) expect(part).toMatch(new RegExp(`^ {2}# {5}${key}: \\S`, 'm'));
    }
    expect(text).toContain('#     ceiling: the search goes no higher (must be given)');
    expect(text).toContain('# - wait: { for: 1 min }');
  });
});

it('each key of a file that is written has a comment above it', () => {
  const module = moduleText({
    name: 'K1',
    description: '',
    rated: { voltage: 15, current: 4 },
    protectionClass: 'I',
    input: 'mains',
    outputIsolation: 'unknown',
    changes: [],
  });
  for (const text of [module, ...shippedProcedures.map((each) => adapted(each))]) {
    const lines = text.split('\n');
    const keys = lines.flatMap((line, index) => (/^[a-z-]+:/.test(line) && index > 0 ? [index] : []));
    expect(keys.length).toBeGreaterThan(4);
    for (const index of keys) expect(lines[index - 1]).toMatch(/^ *# \S/);
    // Nothing runs into what is above it.
    if (keys.some((index) => lines[index]?.startsWith('steps:') === true))
      expect(text).toMatch(
        /\n\n# How the bench is wired[^]*\n\n# What this procedure never[^]*\n\n# What is to be done/,
      );
  }
});

function adapted(text: string): string {
  return adaptedProcedure(text, { name: 'mine', title: 'Mine', criteria: [] }, vocabulary);
}
