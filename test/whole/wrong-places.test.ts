import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { FaultName } from '../../src/files/simulation-section.js';
import { trueCircuit } from '../../src/simulation/true-circuit.js';
import { benchOf, brick, type CircuitCase, runCircuit } from './circuit-bench.js';

let runs: string;
beforeAll(() => {
  runs = mkdtempSync(join(tmpdir(), 'railproof-wrong-places-'));
});
afterAll(() => {
  rmSync(runs, { recursive: true, force: true });
});

const modules = [
  brick('K1', { openCircuitVoltage: 15.25 }),
  brick('K2'),
  brick('K3', { openCircuitVoltage: 15.2 }),
];
const group: CircuitCase = {
  circuit: 'parallel',
  measuredBy: 'scanner',
  modules,
  rated: { voltage: 15, current: 2.5 },
};
const stack: CircuitCase = {
  ...group,
  circuit: 'series',
  modules: modules.map((module) => ({ ...module, reverseDiode: true })),
};
const fault = (what: FaultName, at: number, of?: string) => [
  { at, what, ...(of === undefined ? {} : { of }) },
];

/** Nothing that rests on a module's current or voltage. */
function resting(names: readonly string[]): readonly string[] {
  return names.filter((name) => /^(share-of|imbalance|recommended-ballast|float-voltage)/.test(name));
}

describe('what is wrong at a place of a group is noticed and named, and not averaged in', () => {
  it.each<[string, Partial<CircuitCase>, RegExp]>([
    [
      'a channel of the scanner is stuck, and it says so',
      { faults: fault('scanner-stuck', 0) },
      /told to close channel 101 and says that channel 100 is/,
    ],
    [
      'a channel is stuck, and the scanner says that all is well',
      { faults: fault('scanner-stuck-unnoticed', 0) },
      /K1 was unplugged, and what is read at its place stayed/,
    ],
    [
      'two modules are swapped',
      { wired: ['K2', 'K1', 'K3'] },
      /K1 was unplugged, and it was the place of K2 that went dead: K1 stands in place 2/,
    ],
    [
      'the meter was left in the wrong mode',
      { faults: fault('meter-wrong-mode', 12) },
      /says that it does not measure dc voltage/,
    ],
    [
      'a place’s own meter was left in the wrong mode',
      { measuredBy: 'meters', faults: fault('meter-wrong-mode', 12, 'K2') },
      /K2 was unplugged, and what is read at its place stayed|does not measure dc voltage/,
    ],
    [
      'the probes at a ballast are reversed',
      { faults: fault('probes-reversed', 0, 'K2') },
      /the probes across the ballast of K2 are reversed: it reads below zero/,
    ],
    [
      'the probes are reversed where the operator holds them',
      { measuredBy: 'operator', faults: fault('probes-reversed', 7) },
      /reversed|below zero|polarity/,
    ],
  ])('%s', async (_, change, words) => {
    const { error, result } = await runCircuit('sharing', { ...group, ...change }, runs);
    expect(error?.message).toMatch(words);
    expect(resting(result.findings.map(({ name }) => name))).toEqual([]);
  });

  it('a channel is stuck in the middle: what was read before it is all that is believed', async () => {
    const late = { ...group, faults: fault('scanner-stuck-unnoticed', 35) };
    const { error, result } = await runCircuit('sharing', late, runs);
    expect(error?.message).toMatch(/^the meter reads .* where the load has .* at its terminals/);
    const share = result.findings.find(({ name }) => name === 'share-of-K1');
    const total = Number(/ of ([\d.]+) A/.exec(share?.note ?? '')?.[1]);
    const { simulation } = benchOf(late);
    if (simulation === undefined) throw new Error('the bench is not simulated');
    const [truth = NaN] = trueCircuit(simulation).currentsAt(total);
    const [low = NaN, high = NaN] = share?.interval ?? [];
    expect(total).toBeGreaterThan(0.5);
    expect(truth / total).toBeGreaterThan(low);
    expect(truth / total).toBeLessThan(high);
  });

  it.each(['scanner', 'meters'] as const)(
    'a ballast of the wrong value, by %s: it is named, and found',
    async (measuredBy) => {
      const right = { resistance: 0.05, uncertainty: 0.0005 };
      const said = [right, { resistance: 0.04, uncertainty: 0.0004 }, right];
      const { error, result } = await runCircuit('sharing', { ...group, measuredBy, said }, runs);
      expect(error).toBeUndefined();
      const ballasts = result.findings.filter(({ name }) => name.startsWith('ballast-of'));
      expect(ballasts.map(({ name }) => name)).toEqual(['ballast-of-K2']);
      const [low = NaN, high = NaN] = ballasts[0]?.interval ?? [];
      expect(low).toBeLessThan(0.05);
      expect(high).toBeGreaterThan(0.05);
      expect(resting(result.findings.map(({ name }) => name))).toEqual([]);
    },
  );

  it('a ballast of the wrong value, the meter moved by hand: it is said that they do not add up', async () => {
    const right = { resistance: 0.05, uncertainty: 0.0005 };
    const said = [right, { resistance: 0.04, uncertainty: 0.0004 }, right];
    const { result } = await runCircuit('sharing', { ...group, measuredBy: 'operator', said }, runs);
    const hogging = result.findings.find(({ name }) => name === 'hogging-module');
    expect(hogging).toMatchObject({ value: 'undetermined' });
    expect(hogging?.note).toMatch(/^the modules' currents add up to 7\.9\d A where the load takes 7\.\d+ A/);
    expect(resting(result.findings.map(({ name }) => name))).toEqual([]);
  });
});

describe('what is wrong at a place of a stack is noticed and named', () => {
  it.each<[string, Partial<CircuitCase>, RegExp]>([
    [
      'two modules are swapped',
      { wired: ['K1', 'K3', 'K2'] },
      /K2 was unplugged, and it was the place of K3 that went dead: K2 stands in place 3/,
    ],
    [
      'a module is tied to earth',
      {
        modules: stack.modules.map((module) =>
          module.name === 'K2' ? { ...module, earth: 'bonded' } : module,
        ),
      },
      /^K2 may not be stacked: its output is tied to earth, which in a stack would short the modules below it$/,
    ],
  ])('%s', async (_, change, words) => {
    const { error, result } = await runCircuit('stacking', { ...stack, ...change }, runs);
    expect(error?.message).toMatch(words);
    expect(resting(result.findings.map(({ name }) => name))).toEqual([]);
  });

  it('the weakest is found though the meter is moved by hand and shows one place at a time', async () => {
    const weak = stack.modules.map((module) =>
      module.name === 'K2'
        ? { ...module, limit: { style: 'constant-current', current: 2.2 } as const }
        : module,
    );
    const { error, result } = await runCircuit(
      'stacking',
      { ...stack, measuredBy: 'operator', modules: weak },
      runs,
    );
    expect(error).toBeUndefined();
    expect(result.findings.find(({ name }) => name === 'weakest-module')).toMatchObject({ value: 'K2' });
  });
});
