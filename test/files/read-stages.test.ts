import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { Form } from '../../src/arrangement/build.js';
import type { StagesWish } from '../../src/arrangement/stages-wish.js';
import { parseStages, readStages } from '../../src/files/read-stages.js';
import { readAnyFile } from '../../src/files/read-any-file.js';
import { stagesExample, vocabulary } from './design-examples.js';
import { problemsOf } from './problems-of.js';

const parse = (text: string) => parseStages(text, 'mine.yaml');
const changed = (from: string, to: string): string => {
  expect(stagesExample).toContain(from);
  return stagesExample.replace(from, to);
};

it('a stages file is read as what can be worked out', () => {
  const { modules, wish } = parse(stagesExample);
  expect(modules).toEqual([
    { name: 'W1', records: ['runs/W1-real-limit', 'runs/W1-isolation'] },
    { name: 'W2', records: ['runs/W2-real-limit'] },
    { name: 'W3', records: ['runs/W3-real-limit'] },
  ]);
  const taken: StagesWish = wish;
  expect(taken).toEqual({
    name: 'potting-bench',
    title: '0 to 32 V for the valve bench',
    ballast: { resistance: 0.051, tolerance: 0.05, rating: 3 },
    wires: [
      ['W1-', 'in-'],
      ['W2+', 'W3-'],
    ],
    contacts: [
      { kind: 'make', name: 'S1', joins: ['W1+', 'W2+'] },
      { kind: 'break', name: 'S2', joins: ['W2-', 'in-'] },
      { kind: 'change-over', name: 'S3', common: 'in+', rest: 'W2+', driven: 'W3+', bridges: false },
      { kind: 'make', name: 'S4', joins: ['W1+', 'W2-'] },
    ],
    diodes: [{ name: 'D1', from: 'W1+', to: 'in+', forwardVoltage: 0.5 }],
    arrangements: [
      { name: 'low', form: group(alone('W1'), alone('W2')), driven: ['S1'] },
      { name: 'high', form: stack(alone('W1'), alone('W2'), alone('W3')), driven: ['S2', 'S3', 'S4'] },
    ],
    sequence: 'break-before-make',
    linearStage: {
      dropOut: 2,
      current: 5,
      dissipation: { kind: 'by-case', full: 60, fullTo: 25, noneAt: 150, case: 85 },
    },
    output: { from: 0, to: 32 },
    hysteresis: 1,
  } satisfies StagesWish);
});

it('a form may hold others, and what is left out is the cautious thing', () => {
  const nested = changed('stack: [W1, W2, W3]', 'stack: [{ group: [W1, W2] }, W3]')
    .replace('sequence: break-before-make\n', '')
    .replace('ballast: { resistance: 51 mΩ, rating: 3 W }', 'ballast: { resistance: 51 mΩ }')
    .replace(
      'dissipation: { full: 60 W, full-to: 25 °C, none-at: 150 °C, case: 85 °C }',
      'dissipation: 25 W',
    );
  const { wish } = parse(nested);
  expect(wish.arrangements[1]?.form).toEqual(stack(group(alone('W1'), alone('W2')), alone('W3')));
  expect(wish.sequence).toBe('any-order');
  expect(wish.ballast).toEqual({ resistance: 0.051, tolerance: 0.05, rating: undefined });
  expect(wish.linearStage.dissipation).toEqual({ kind: 'fixed', most: 25 });
});

describe('the example for users', () => {
  const path = 'fixtures/stages/valve-bench.yaml';
  const words = {
    vocabulary: () => Promise.resolve(vocabulary),
    findings: () => Promise.resolve(vocabulary),
  };

  it('is read, its records from its own folder on', async () => {
    const { value } = await readStages(path);
    expect(value.wish.name).toBe('valve-bench');
    for (const { name, records } of value.modules) {
      for (const record of records) expect(record).toMatch(new RegExp(`^fixtures/runs/.*-${name}-`));
    }
    expect((await readAnyFile(path, words)).value.kind).toBe('stages');
  });

  it('takes absolute paths as they are', () => {
    const text = readFileSync(path, 'utf8').replaceAll('../runs', '/tmp/runs');
    expect(parse(text).modules[0]?.records[0]).toMatch(/^\/tmp\/runs\//);
  });
});

describe('one mistake is one line, at its place', () => {
  it.each([
    [
      'makes: [W1+, W2+]',
      'makes: [W1+, W4+]',
      "13:22: contacts.S1.makes.1: no module of this file has an output 'W4+'; did you mean 'W1+'?",
    ],
    [
      'makes: [W1+, W2+]',
      'makes: [W1+, top]',
      "13:22: contacts.S1.makes.1: the node 'top' stands here only; a node of your own joins at least two things",
    ],
    [
      'makes: [W1+, W2+]',
      'makes: [W1+, W1+]',
      '13:16: contacts.S1.makes: this is one and the same node; two are needed',
    ],
    [
      'makes: [W1+, W2+]',
      'makes: [W1+, W2 +]',
      "13:22: contacts.S1.makes.1: found 'W2 +'; a node is needed: W1+ and W1- of a module W1, in+, in-, or a name of your own",
    ],
    ['makes: [W1+, W2+]', 'makes: [W1+]', '13:16: contacts.S1.makes: found 1 of them; at least 2 are needed'],
    [
      '{ makes: [W1+, W2+] }',
      '{ makes: [W1+, W2+], breaks: [W1+, W2+] }',
      "13:7: contacts.S1: a contact is one of 'makes', 'breaks' and 'common' (with 'rest' and 'driven')",
    ],
    [
      '{ makes: [W1+, W2+] }',
      '{}',
      "13:7: contacts.S1: a contact is one of 'makes', 'breaks' and 'common' (with 'rest' and 'driven')",
    ],
    [
      'common: in+, rest: W2+,',
      'common: in+,',
      "15:7: contacts.S3: a change-over contact has 'common', 'rest' and 'driven'; one that touches a single side is written as 'makes' or 'breaks', with two nodes",
    ],
    [
      'makes: [W1+, W2+]',
      'mades: [W1+, W2+]',
      "13:9: contacts.S1: unknown key 'mades'; did you mean 'makes'?",
    ],
    [
      'driven: [S1]',
      'driven: [S11]',
      "20:36: arrangements.low.driven.0: no contact is called 'S11'; did you mean 'S1'?",
    ],
    ['driven: [S1]', 'driven: [S1, S1]', '20:40: arrangements.low.driven.1: S1 stands here twice'],
    [
      'stack: [W1, W2, W3]',
      'stack: [W1, W2, W2, W3]',
      '21:9: arrangements.high: W2 stands in it twice; a module can be in one place only',
    ],
    [
      'stack: [W1, W2, W3]',
      'stack: [W1, W2, W5, W3]',
      "21:9: arrangements.high: no module is called 'W5'; did you mean 'W1'?",
    ],
    [
      'stack: [W1, W2, W3]',
      'stack: [W1, W2]',
      '7:3: modules: W3 is in no arrangement; use it or leave it out',
    ],
    [
      'group: [W1, W2]',
      'group: [W1, W2], module: W1',
      '20:8: arrangements.low: an arrangement is exactly one of module, group and stack',
    ],
    [
      'group: [W1, W2]',
      'group: [W1]',
      '20:17: arrangements.low.group: found 1 of them; at least 2 are needed',
    ],
    [
      'group: [W1, W2]',
      'group: [W1, { group: [W2, W3], stack: [W2, W3] }]',
      "20:22: arrangements.low.group.1: one of 'group' and 'stack' is needed",
    ],
    [
      'low: { group: [W1, W2]',
      'low: { grup: [W1, W2]',
      "20:10: arrangements.low: unknown key 'grup'; did you mean 'group'?",
    ],
    ['  D1: {', '  W1: {', "18:3: diodes: 'W1' is the name of one of the modules already"],
    [
      'break-before-make',
      'brake-before-make',
      "22:11: sequence: found 'brake-before-make'; did you mean 'break-before-make'?",
    ],
    ['drop-out: 2 V', 'drop-out: 0 V', "23:27: linear-stage.drop-out: found '0 V'; more than 0 V is needed"],
    [
      'drop-out: 2 V',
      'drop-out: -2 V',
      "23:27: linear-stage.drop-out: found '-2 V'; more than 0 V is needed",
    ],
    [
      'dissipation: { full: 60 W, full-to: 25 °C, none-at: 150 °C, case: 85 °C }',
      'dissipation: 0 W',
      "23:59: linear-stage.dissipation: found '0 W'; more than 0 W is needed",
    ],
    [
      'dissipation: { full: 60 W, full-to: 25 °C, none-at: 150 °C, case: 85 °C }',
      'dissipation: 25',
      '23:59: linear-stage.dissipation: found the number 25; a power is needed, 25 W, or a map of full, full-to, none-at and case',
    ],
    [
      'case: 85 °C',
      'case: 150 °C',
      "23:112: linear-stage.dissipation.case: a case as warm as 'none-at' leaves nothing that may be turned into heat",
    ],
    [
      'none-at: 150 °C',
      'none-at: 25 °C',
      "23:98: linear-stage.dissipation.none-at: the line falls from 'full-to' to here, so this must be higher",
    ],
    ['from: 0 V, to: 32 V', 'from: 32 V, to: 5 V', "24:27: output.to: this must be above 'from'"],
    ['hysteresis: 1 V', 'hysteresis: 0 V', "25:13: hysteresis: found '0 V'; more than 0 V is needed"],
    [
      'resistance: 51 mΩ',
      'resistance: 0 Ω',
      "8:24: ballast.resistance: found '0 Ω'; more than 0 Ω is needed",
    ],
  ])('%s → %s', (from, to, problem) => {
    expect(problemsOf(() => parse(changed(from, to)))).toEqual([`mine.yaml:${problem}`]);
  });

  it('and no arrangement, no module, too much of anything are told', () => {
    const at = stagesExample.indexOf('arrangements:');
    const none = `${stagesExample.slice(0, at)}arrangements: {}\n${stagesExample.slice(stagesExample.indexOf('sequence:'))}`;
    expect(problemsOf(() => parse(none))).toEqual([
      'mine.yaml:19:15: arrangements: found none; at least one is needed',
    ]);
    const more = Array.from({ length: 33 }, (_, index) => `  T${index}: { makes: [W1+, W2+] }\n`).join('');
    expect(problemsOf(() => parse(changed('contacts:\n', `contacts:\n${more}`)))).toEqual([
      'mine.yaml:13:3: contacts: found 37 of them; at most 32 are allowed',
    ]);
  });

  it('and an input of the linear stage that nothing is joined to', () => {
    const lost = stagesExample.replaceAll('in-', 'in_');
    expect(problemsOf(() => parse(lost))).toEqual([
      'mine.yaml:13:3: contacts: nothing is joined to in-, the input of the linear stage',
    ]);
  });
});

function alone(name: string) {
  return { kind: 'module', name } as const;
}
function group(...of: Form[]): Form {
  return { kind: 'group', of };
}
function stack(...of: Form[]): Form {
  return { kind: 'stack', of };
}
