import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { Finding } from '../../src/analysis/finding.js';
import type { RunHeader } from '../../src/record/run-header.js';
import {
  type Brick,
  circuitEvidence,
  circuitHeader,
  type CircuitPoint,
  sharingPoints,
} from './circuit-evidence.js';
import { evenly } from './evidence-of.js';

const alike: Brick = { voltage: 15.21, droop: 0.018, ballast: 0.05 };
const bricks = { K1: { ...alike, voltage: 15.24 }, K2: alike, K3: { ...alike, voltage: 15.19 } };
const loads = evenly(1, 10, 10);
/** What is read scatters, the same in every run. */
const scatter = (index: number): number => 4e-5 * Math.sin(12.9 * index + 1);

function header(said: readonly [number, number, number], fixed = 1e-3): RunHeader {
  const [k1, k2, k3] = said;
  return circuitHeader({
    circuit: 'parallel',
    ballasts: { K1: [k1, 0.01 * k1], K2: [k2, 0.01 * k2], K3: [k3, 0.01 * k3] },
    meter: { voltage: { ofReading: 5e-4, fixed, resolution: 1e-5 } },
    load: { current: { ofReading: 2e-3, fixed: 0.01, resolution: 1e-3 } },
  });
}

function read(change: (places: Record<string, number>, index: number) => Record<string, number>) {
  return sharingPoints(bricks, loads, 2.4).map((point, index): CircuitPoint => {
    const volts = Object.entries(point.places).map(([name, value], place) => {
      return [name, Number(value) + scatter(3 * index + place)] as const;
    });
    return { ...point, places: change(Object.fromEntries(volts), index) };
  });
}

function findingsOf(
  said: RunHeader,
  points: readonly CircuitPoint[] = read((places) => places),
): readonly Finding[] {
  return analyse(circuitEvidence(said, points));
}

const named = (findings: readonly Finding[], name: string): Finding | undefined =>
  findings.find((finding) => finding.name === name);
const resting = (findings: readonly Finding[]): readonly string[] =>
  findings.map(({ name }) => name).filter((name) => /^(share|imbalance|recommended-ballast)/.test(name));

describe('currents that add up to the load’s', () => {
  it('are believed, and no ballast is named', () => {
    const findings = findingsOf(header([0.05, 0.05, 0.05]));
    expect(findings.filter(({ name }) => name.startsWith('ballast-of'))).toEqual([]);
    expect(resting(findings)).toHaveLength(5);
  });
});

describe('ballasts that are all off by as much as was promised of them', () => {
  it('are what one ohmmeter makes of them, and nothing is wrong', () => {
    const six = Object.fromEntries(['K1', 'K2', 'K3', 'K4', 'K5', 'K6'].map((name) => [name, alike]));
    const said = circuitHeader({
      circuit: 'parallel',
      ballasts: Object.fromEntries(Object.keys(six).map((name) => [name, [0.0505, 0.000505] as const])),
    });
    const findings = findingsOf(said, sharingPoints(six, loads, 2.4));
    expect(named(findings, 'share-of-K6')?.value).toBeCloseTo(1 / 6, 6);
  });
});

describe('a ballast of another value than the bench file says', () => {
  it.each([
    ['K1', [0.06, 0.05, 0.05]],
    ['K2', [0.05, 0.04, 0.05]],
    ['K3', [0.05, 0.05, 0.062]],
  ] as const)('is named and found: %s', (module, said) => {
    const findings = findingsOf(header(said));
    const ballasts = findings.filter(({ name }) => name.startsWith('ballast-of'));
    expect(ballasts.map(({ name }) => name)).toEqual([`ballast-of-${module}`]);
    const [low = NaN, high = NaN] = ballasts[0]?.interval ?? [];
    expect(low).toBeLessThan(0.05);
    expect(high).toBeGreaterThan(0.05);
    expect(high - low).toBeLessThan(0.004);
    expect(ballasts[0]?.note).toMatch(
      /^the bench file says \d+ mΩ: measure it again; shares are not given until then$/,
    );
  });

  it('leaves nothing that rests on it: no shares, no imbalance, nobody who hogs', () => {
    const findings = findingsOf(header([0.05, 0.04, 0.05]));
    expect(resting(findings)).toEqual([]);
    expect(named(findings, 'hogging-module')).toMatchObject({
      value: 'undetermined',
      note: expect.stringMatching(
        /^the modules' currents add up to 1\d\.\d A where the load takes \d+/,
      ) as string,
    });
    expect(named(findings, 'recommended-current')).toMatchObject({
      value: 4,
      note: 'the smallest label sets it, as how they share is not known',
    });
    expect(named(findings, 'group-current')?.value).toBeCloseTo(10, 6);
  });

  it('is found where the sum hides it within what the meter promises at zero', () => {
    const findings = findingsOf(header([0.05, 0.045, 0.05], 0.05));
    expect(findings.filter(({ name }) => name.startsWith('ballast-of')).map(({ name }) => name)).toEqual([
      'ballast-of-K2',
    ]);
    expect(named(findings, 'hogging-module')?.note).toBe(
      "the modules' currents add up, but not by the ballasts that the bench file gives",
    );
  });

  it('is not singled out where all are off alike: then a meter or the load is in question', () => {
    const findings = findingsOf(header([0.04, 0.04, 0.04]));
    expect(findings.filter(({ name }) => name.startsWith('ballast-of'))).toEqual([]);
    expect(named(findings, 'hogging-module')?.note).toMatch(
      /all ballasts alike .* 1\.25 .*: a meter or the load/,
    );
  });

  it('is not singled out by points that all hang together', () => {
    const climb = read((places) => places).filter(({ phase }) => phase !== 'proof');
    const findings = findingsOf(header([0.05, 0.04, 0.05]), climb);
    expect(findings.filter(({ name }) => name.startsWith('ballast-of'))).toEqual([]);
    expect(resting(findings)).toEqual([]);
    expect(named(findings, 'hogging-module')?.note).toContain('measure each of them again');
  });
});

describe('currents that do not add up for another reason', () => {
  it.each([
    [
      'a channel that is stuck',
      ({ K1 = 0 }) => ({ K1, K2: K1, K3: K1 }),
      'every place reads the same, so one and the same is read: a stuck channel of the scanner',
    ],
    [
      'a meter in another mode',
      (places: Record<string, number>) => ({ ...places, K2: 0.05 }),
      'what is read at the ballast of K2 stays at 50 mV whatever the load takes: a meter in another mode, a stuck channel, or probes elsewhere',
    ],
    [
      'probes reversed',
      ({ K3 = 0, ...places }) => ({ ...places, K3: -K3 }),
      'the ballast of K3 reads below zero: its probes are reversed',
    ],
    [
      'something that comes and goes',
      ({ K2 = 0, ...places }: Record<string, number>, index: number) => ({
        ...places,
        K2: index % 2 ? K2 : 2 * K2,
      }),
      'the ballasts cannot be told apart by what was read: measure each of them again',
    ],
  ])('are not averaged in, and the reason is named: %s', (_, change, reason) => {
    const findings = findingsOf(header([0.05, 0.05, 0.05]), read(change));
    expect(resting(findings)).toEqual([]);
    expect(findings.filter(({ name }) => name.startsWith('ballast-of'))).toEqual([]);
    expect(named(findings, 'hogging-module')).toMatchObject({
      value: 'undetermined',
      note: expect.stringContaining(reason) as string,
    });
  });
});
