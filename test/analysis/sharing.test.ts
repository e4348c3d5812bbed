import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { Finding } from '../../src/analysis/finding.js';
import type { RunHeader } from '../../src/record/run-header.js';
import {
  atRest,
  type Brick,
  circuitEvidence,
  circuitHeader,
  type CircuitHeader,
  type CircuitPoint,
  sharingPoints,
} from './circuit-evidence.js';
import { evenly } from './evidence-of.js';

const loads = evenly(0.8, 8, 10);
const alike: Brick = { voltage: 15.21, droop: 0.018, ballast: 0.05 };

function headerOf(bricks: Readonly<Record<string, Brick>>, rest: Partial<CircuitHeader> = {}): RunHeader {
  return circuitHeader({
    circuit: 'parallel',
    ballasts: Object.fromEntries(
      Object.entries(bricks).map(([name, { ballast }]) => [name, [ballast, ballast * 0.01] as const]),
    ),
    meter: { voltage: { ofReading: 5e-4, fixed: 1e-4, resolution: 1e-5 } },
    load: {
      voltage: { ofReading: 1e-3, fixed: 0.01 },
      current: { ofReading: 2e-3, fixed: 0.01, resolution: 1e-3 },
    },
    ...rest,
  });
}

function findingsOf(header: RunHeader, points: readonly CircuitPoint[]): Map<string, Finding> {
  return new Map(analyse(circuitEvidence(header, points)).map((finding) => [finding.name, finding]));
}

/** As if the ballasts were what the bench file says, whatever they are. */
function shared(bricks: Readonly<Record<string, Brick>>, rest: Partial<CircuitHeader> = {}) {
  return findingsOf(headerOf(bricks, rest), sharingPoints(bricks, loads));
}

describe('a group that shares', () => {
  const found = shared({ K1: { ...alike, voltage: 15.212 }, K2: alike });

  it('has nobody who hogs, shares near a half, and an imbalance within what was asked for', () => {
    expect(found.get('hogging-module')).toMatchObject({ value: 'none' });
    expect(found.get('share-of-K1')?.value).toBeCloseTo(0.5018, 4);
    // ΔV/R over the mean: 2 mV over 68 mΩ of 4 A.
    expect(found.get('imbalance')?.value).toBeCloseTo(0.002 / 0.068 / 4, 4);
    expect(found.get('hogging-module')?.note).toMatch(/^the imbalance is .* at 8\.00 A, 10 % asked for$/);
  });

  it('holds at least what was tried', () => {
    expect(found.get('group-current')).toMatchObject({
      value: expect.closeTo(8, 9) as number,
      bound: 'least',
      note: 'nothing dropped up to 8.00 A',
    });
  });

  it('is judged by what the step was told: an imbalance of 0.5 % asked for can’t be told here', () => {
    const strict = shared(
      { K1: { ...alike, voltage: 15.212 }, K2: alike },
      { settings: { imbalance: 0.005, tolerance: 0.01 } },
    );
    expect(strict.get('hogging-module')?.value).toBe('undetermined');
  });
});

describe('a group in which one hogs', () => {
  it('is told by its voltage, where that is why', () => {
    const found = shared({
      K1: { ...alike, voltage: 15.219, ballast: 0.003 },
      K2: { ...alike, ballast: 0.003 },
    });
    expect(found.get('hogging-module')?.value).toBe('undetermined');
    const little = shared({
      K1: { voltage: 15.219, droop: 0.001, ballast: 0.003 },
      K2: { voltage: 15.21, droop: 0.001, ballast: 0.003 },
    });
    expect(little.get('hogging-module')).toMatchObject({
      value: 'K1',
      note: "it carries 64 % of 8.00 A because its open-circuit voltage is 9.0 mV above K2's, and there are only 3.0 mΩ of ballast in each",
    });
  });

  it('is told by how little it gives way, where that is why', () => {
    const found = shared({
      K1: { ...alike, droop: 0.001, ballast: 0.01 },
      K2: { ...alike, droop: 0.04, ballast: 0.01 },
    });
    expect(found.get('hogging-module')).toMatchObject({ value: 'K1' });
    expect(found.get('hogging-module')?.note).toContain(
      'it gives way by 11 mΩ where K2 gives way by 50 mΩ, droop and ballast together',
    );
  });

  it('is told by what each gives alone, where the other carried nothing beside it', () => {
    const found = shared({
      K1: { voltage: 15.3, droop: 0.001, ballast: 0.003 },
      K2: { voltage: 15.21, droop: 0.001, ballast: 0.003 },
    });
    expect(found.get('hogging-module')).toMatchObject({
      value: 'K1',
      note: 'it carries 100 % of 8.00 A because alone at 2.00 A it stands 90 mV above K2, and there are only 3.0 mΩ of ballast in each',
    });
    expect(found.get('recommended-ballast')).toMatchObject({
      value: 'undetermined',
      note: expect.stringContaining('run real-limit on it alone') as string,
    });
  });

  it('carries no more than all in words, whatever an offset of the meter makes of it', () => {
    const bricks = {
      K1: { voltage: 15.3, droop: 0.001, ballast: 0.003 },
      K2: { voltage: 15.21, droop: 0.001, ballast: 0.003 },
    };
    const meter = { voltage: { ofReading: 5e-4, fixed: 1e-3, resolution: 1e-5 } };
    const points = sharingPoints(bricks, loads).map((point) => ({
      ...point,
      places: Object.fromEntries(
        Object.entries(point.places).map(([name, volts]) => [name, Number(volts) - 3e-4]),
      ),
    }));
    const found = findingsOf(headerOf(bricks, { meter }), points);
    expect(found.get('share-of-K1')?.value).toBeGreaterThan(1);
    expect(found.get('share-of-K1')?.note).toMatch(/^8\.00 A of 8\.00 A/);
    expect(found.get('share-of-K2')?.note).toMatch(/^0 A of 8\.00 A/);
    expect(found.get('hogging-module')?.note).toMatch(/^it carries 100 % of 8\.00 A/);
  });

  it('does not carry more than its own label by our advice', () => {
    const found = shared({ K1: { ...alike, voltage: 15.4 }, K2: alike });
    const recommended = found.get('recommended-current');
    // It carries its 4 A at 5.2 A: (15.4 − 15.21) V over 136 mΩ are 1.4 A more than a half.
    const least = 2 * (4 - 0.19 / 0.136);
    expect(Number(recommended?.value)).toBeLessThan(least);
    expect(Number(recommended?.value)).toBeGreaterThan(0.95 * least);
    expect(recommended?.note).toBe('the label of K1 sets it, which carries most');
  });
});

describe('the module that meets its limit first', () => {
  const bricks = { K1: { ...alike, voltage: 15.3 }, K2: alike };

  /** K1 gives no more than 3 A. */
  function limited(load: number): CircuitPoint {
    const { currents } = atRest(bricks, load);
    const k1 = Math.min(3, currents['K1'] ?? 0);
    const k2 = load - k1;
    return { set: load, output: 15.21 - 0.068 * k2, places: { K1: 0.05 * k1, K2: 0.05 * k2 } };
  }

  it('is the one whose current stays while the group goes on, and hogging is judged below that', () => {
    const found = findingsOf(headerOf(bricks), [...sharingPoints(bricks, []), ...loads.map(limited)]);
    expect(found.get('group-current')?.note).toBe(
      'K1 meets its limit first, at 3.00 A when the whole takes 4.80 A, and the group still holds; nothing dropped up to 8.00 A',
    );
    expect(found.get('hogging-module')).toMatchObject({ value: 'K1' });
    expect(found.get('hogging-module')?.note).toMatch(/K1 is at its limit beyond 4\.80 A$/);
  });

  it('is the one that has vanished, and is named where it did not come back', () => {
    const left = (load: number): CircuitPoint => {
      const k1 = load < 5 ? (atRest(bricks, load).currents['K1'] ?? 0) : 0;
      return { set: load, output: 15, places: { K1: 0.05 * k1, K2: 0.05 * (load - k1) } };
    };
    const found = findingsOf(headerOf(bricks), [...sharingPoints(bricks, []), ...loads.map(left)]);
    expect(found.get('group-current')?.note).toMatch(
      /^K1 left after 3\.06 A of its own, when the whole took 4\.80 A, and the others carried it/,
    );
  });
});

describe('a group that fails', () => {
  const dropped = (set: number): CircuitPoint => ({
    set,
    outcome: 'dropped',
    output: 0.4,
    current: 0.1,
    places: { K1: 0, K2: 0 },
  });

  it('at about what one of them holds says so, and who hogged', () => {
    const bricks = {
      K1: { voltage: 15.25, droop: 0.001, ballast: 0.005 },
      K2: { voltage: 15.21, droop: 0.001, ballast: 0.005 },
    };
    const back: CircuitPoint = { phase: 'proof', set: 0.8, output: 15.2, places: { K1: 0, K2: 0.004 } };
    const found = findingsOf(headerOf(bricks), [
      ...sharingPoints(bricks, evenly(0.8, 4, 5)),
      dropped(4.8),
      back,
    ]);
    expect(found.get('group-current')).toMatchObject({ value: expect.closeTo(4.4, 6) as number });
    expect(found.get('group-current')?.note).toBe(
      "it fails at about what one of them holds: K1 hogs, carried 4.00 A of 4.00 A, leaves at its limit, and the rest can't carry it; K1 did not come back",
    );
    expect(found.get('usable-current')?.value).toBeCloseTo(4.4, 6);
  });

  it('says no more than what each carried where nobody watched the overload', () => {
    const bricks = { K1: alike, K2: alike };
    const found = findingsOf(headerOf(bricks), [...sharingPoints(bricks, evenly(0.8, 7.2, 9)), dropped(8)]);
    expect(found.get('group-current')?.note).toBe('at 7.20 A they carried K1 3.60 A, K2 3.60 A');
  });
});

describe('the ballast that would do', () => {
  it('is the smallest preferred one, with its worst case, its heat and its cost', () => {
    const found = shared({ K1: { ...alike, voltage: 15.25 }, K2: alike });
    const ballast = found.get('recommended-ballast');
    expect(Number(ballast?.value)).toBeGreaterThan(0.08);
    expect(ballast?.note).toMatch(
      /^\d+ mΩ ± 1 % in each: at worst [\d.]+ % imbalance at 8\.00 A, up to [\d.]+ W of heat in one \(take \d+ W ones\), costs \d+ mV$/,
    );
  });

  it('is 0 Ω where they share well enough joined directly', () => {
    const soft = { voltage: 15.21, droop: 0.2, ballast: 0.01 };
    expect(shared({ K1: soft, K2: soft }).get('recommended-ballast')).toMatchObject({
      value: 0,
      note: expect.stringMatching(/^joined directly they stay within 10 % at 8\.00 A/) as string,
    });
  });

  it.each([
    [{ imbalance: 0.02, tolerance: 0.05 }, { ...alike, voltage: 15.25 }, /take closer ones/],
    [{ imbalance: 0.01, tolerance: 0 }, { ...alike, voltage: 15.5 }, /choose others/],
  ])('is none, and why, for %j', (settings, high, why) => {
    const ballast = shared({ K1: high, K2: alike }, { settings }).get('recommended-ballast');
    expect(ballast).toMatchObject({ value: 'none', note: expect.stringMatching(why) as string });
  });
});

describe('a record of a group that holds little', () => {
  it.each<[string, readonly CircuitPoint[], readonly string[]]>([
    ['no points', [], []],
    ['the proof alone', sharingPoints({ K1: alike, K2: alike }, []), []],
    [
      'one place only, of two',
      [{ set: 2, output: 15.1, places: { K1: 0.05 } }],
      ['usable-current', 'recommended-current', 'group-current'],
    ],
    [
      'one point',
      [{ set: 2, output: 15.1, places: { K1: 0.05, K2: 0.05 } }],
      [
        'usable-current',
        'recommended-current',
        'group-current',
        'hogging-module',
        'recommended-ballast',
        'imbalance',
        'share-of-K1',
        'share-of-K2',
      ],
    ],
  ])('gives what there is: %s', (_, points, names) => {
    expect([...findingsOf(headerOf({ K1: alike, K2: alike }), points).keys()]).toEqual(names);
  });

  it('that has one module only is read all the same, and says why nothing is told of shares', () => {
    const found = findingsOf(headerOf({ K1: alike }), sharingPoints({ K1: alike }, loads));
    expect([...found.keys()]).toEqual([
      'usable-current',
      'recommended-current',
      'group-current',
      'hogging-module',
    ]);
    expect(found.get('hogging-module')).toMatchObject({
      value: 'undetermined',
      note: 'the record has one module only, which shares with none',
    });
    expect(found.get('recommended-current')?.value).toBeLessThanOrEqual(4);
  });
});
