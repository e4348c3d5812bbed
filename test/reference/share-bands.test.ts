import { describe, expect, it } from 'vitest';
import { drawnGroup, withoutErrors } from '../../src/arrangement/drawn-group.js';
import { draws } from '../../src/arrangement/build-parallel.js';
import type { ModuleProfile, Taken, TakenContribution } from '../../src/arrangement/module-profile.js';
import type { ShareBand } from '../../src/arrangement/parallel-build.js';
import { shareBand } from '../../src/arrangement/share-band.js';
import type { WorstBallast } from '../../src/arrangement/worst-form.js';
import { latinHypercube } from '../../src/statistics/latin-hypercube.js';
import { type Random, randomFrom } from '../../src/statistics/random.js';
import { madeProfile } from '../arrangement/made-profile.js';

// The check is Monte Carlo as JCGM 101:2008, 7.2 to 7.7 describes it: 100 000 draws by plain chance, each solved
// at each load by halving the bus voltage until the currents add up, and the quantiles of the sorted results.
// It shares with what it checks the random numbers' source, and nothing else.
const MANY = 100_000;
/** Of the band's width. A hundred thousand draws leave a quantile uncertain by 0.2 % of it themselves. */
const TOLERANCE = 0.02;

type Line = Partial<TakenContribution> & { readonly uncertainty: number };

function taken(like: Taken, value: number, lines: readonly Line[]): Taken {
  const budget = lines.map((line): TakenContribution => ({
    name: 'a line',
    kind: line.degreesOfFreedom === undefined ? 'B' : 'A',
    degreesOfFreedom: Infinity,
    shared: undefined,
    ...line,
  }));
  return { ...like, value, budget };
}

function module(
  name: string,
  made: Parameters<typeof madeProfile>[1] & {
    readonly lines?: { voltage?: Line[]; droop?: Line[]; limit?: Line[] };
  },
): ModuleProfile {
  const profile = madeProfile(name, made);
  const { voltage, droop, limit } = made.lines ?? {};
  return {
    ...profile,
    ...(voltage && { openCircuit: taken(profile.openCircuit, profile.openCircuit.value, voltage) }),
    ...(droop && { droop: taken(profile.droop, profile.droop.value, droop) }),
    ...(limit && profile.dropout && { dropout: taken(profile.dropout, profile.dropout.value, limit) }),
  };
}

const gain: Line = { uncertainty: 0.01, shared: 'meter voltage, gain' };
const limitGain: Line = { uncertainty: 0.015, shared: 'load current, gain' };

const cases: readonly {
  readonly what: string;
  readonly modules: readonly ModuleProfile[];
  readonly ballast: WorstBallast;
  /** About the corners of the shares and between them. */
  readonly loads: readonly number[];
}[] = [
  {
    what: 'two joined by little more than their leads, one idle up to 1.4 A',
    modules: [
      module('K1', {
        openCircuit: 15.24,
        lines: { voltage: [gain, { uncertainty: 0.004, degreesOfFreedom: 4 }] },
      }),
      module('K2', {
        openCircuit: 15.2,
        lines: {
          voltage: [gain, { uncertainty: 0.003, degreesOfFreedom: 3 }],
          droop: [{ uncertainty: 0.002, degreesOfFreedom: 9 }],
        },
      }),
    ],
    ballast: { resistance: 0.01, tolerance: 0.1 },
    loads: [1.3, 1.5, 6],
  },
  {
    what: 'three behind ballasts, of constant current, up to where the first is at its limit and beyond',
    modules: [
      module('K1', { style: 'constant-current', lines: { limit: [limitGain, { uncertainty: 0.02 }] } }),
      module('K2', {
        openCircuit: 15.19,
        droop: 0.021,
        dropout: 5.2,
        style: 'constant-current',
        lines: { limit: [limitGain, { uncertainty: 0.02, degreesOfFreedom: 6 }] },
      }),
      module('K3', {
        openCircuit: 15.24,
        droop: 0.016,
        dropout: 5.5,
        style: 'constant-current',
        lines: { limit: [limitGain, { uncertainty: 0.02 }] },
      }),
    ],
    ballast: { resistance: 0.1, tolerance: 0.05 },
    loads: [1, 12, 15, 15.4],
  },
  {
    what: 'three that hiccup, before, where and after one leaves',
    modules: [
      module('K1', { openCircuit: 15.4, dropout: 2.5, usable: 2.45 }),
      module('K2', { openCircuit: 15.2, droop: 0.03, dropout: 6, usable: 5.9 }),
      module('K3', { openCircuit: 15.22, droop: 0.02, dropout: 6, usable: 5.9 }),
    ],
    ballast: { resistance: 0.05, tolerance: 0.05 },
    loads: [1, 2.5, 2.8, 10],
  },
];

// Some seconds each, and more on a busy machine.
const patience = 120_000;

describe.each(cases)('the bands of $what', { timeout: patience }, ({ modules, ballast, loads }) => {
  it('are those of a hundred thousand draws by chance, within 2 % of their width', () => {
    const band = bandOf(modules, ballast, loads);
    const chance = byChance(modules, ballast, loads);
    for (const [place] of loads.entries()) {
      const columns = [...band.currents, band.busVoltage];
      for (const [column, found] of columns.entries()) {
        const [low, high] = chance[place]?.[column] ?? [NaN, NaN];
        const width = high - low;
        const off = Math.max(
          Math.abs((found.low[place] ?? NaN) - low),
          Math.abs((found.high[place] ?? NaN) - high),
        );
        expect(off).toBeLessThanOrEqual(TOLERANCE * width + 1e-9);
      }
    }
  });
});

describe('the time that it takes', { timeout: patience }, () => {
  it('is a small part of what as many places take by chance, and about half a second', () => {
    const [, three] = cases;
    if (three === undefined) throw new Error('no case');
    const places = 200;
    const loads = Array.from({ length: places }, (_, place) => (15.7 * (place + 1)) / places);
    const took = (work: () => unknown): number => {
      const before = process.cpuUsage();
      work();
      const { user, system } = process.cpuUsage(before);
      return (user + system) / 1e6;
    };
    const band = took(() => bandOf(three.modules, three.ballast, loads));
    const chance = took(() => byChance(three.modules, three.ballast, [12])) * places;
    expect(chance / band).toBeGreaterThan(10);
    // In seconds of the processor; a busy machine makes them longer, as it shares its caches.
    expect(band).toBeLessThan(4);
  });
});

function bandOf(
  modules: readonly ModuleProfile[],
  ballast: WorstBallast,
  loads: readonly number[],
): ShareBand {
  return shareBand(
    {
      best: drawnGroup(modules, ballast, withoutErrors),
      drawn: drawnGroup(modules, ballast, latinHypercube(draws, randomFrom(1))),
    },
    loads,
  );
}

/** At each load the 95 % interval of each current and of the bus. */
function byChance(
  modules: readonly ModuleProfile[],
  ballast: WorstBallast,
  loads: readonly number[],
): readonly (readonly (readonly [number, number])[])[] {
  const random = randomFrom(20_261_202);
  const results = loads.map(() => [...modules, 'bus'].map((): number[] => []));
  for (let draw = 0; draw < MANY; draw += 1) {
    const shared = new Map<string, number>();
    const group = modules.map((profile): Drawn => {
      const { openCircuit, droop, dropout, usable, limitStyle } = profile;
      return {
        voltage: chanceOf(openCircuit, random, shared),
        resistance:
          Math.max(0, chanceOf(droop, random, shared)) +
          ballast.resistance * random.uniform(1 - ballast.tolerance, 1 + ballast.tolerance),
        limit: chanceOf(dropout ?? usable, random, shared),
        leaves: limitStyle?.word !== 'constant-current',
      };
    });
    for (const [place, load] of loads.entries()) {
      const solved = solvedByHalves(group, load);
      if (solved === undefined) continue;
      for (const [column, value] of solved.entries()) results[place]?.[column]?.push(value);
    }
  }
  return results.map((columns) =>
    columns.map((values) => {
      const sorted = Float64Array.from(values).sort();
      return [
        sorted[Math.round(0.025 * sorted.length)] ?? NaN,
        sorted[Math.round(0.975 * sorted.length)] ?? NaN,
      ] as const;
    }),
  );
}

function chanceOf({ value, budget }: Taken, random: Random, shared: Map<string, number>): number {
  return budget.reduce((sum, line) => {
    const known = line.shared === undefined ? undefined : shared.get(line.shared);
    const error = known ?? standard(line.degreesOfFreedom, random);
    if (line.shared !== undefined) shared.set(line.shared, error);
    return sum + line.uncertainty * error;
  }, value);
}

/** Student's t as what it is: a normal number over the root of a mean square of others. */
function standard(degreesOfFreedom: number, random: Random): number {
  const normal = random.normal();
  if (degreesOfFreedom === Infinity) return normal;
  let squares = 0;
  for (let one = 0; one < degreesOfFreedom; one += 1) squares += random.normal() ** 2;
  return normal / Math.sqrt(squares / degreesOfFreedom);
}

interface Drawn {
  readonly voltage: number;
  readonly resistance: number;
  readonly limit: number;
  readonly leaves: boolean;
}

/** The currents and the bus; undefined where the group does not hold the load. */
function solvedByHalves(group: readonly Drawn[], load: number): readonly number[] | undefined {
  const present = group.map(() => true);
  for (;;) {
    const current = ({ voltage, resistance, limit }: Drawn, index: number, bus: number): number =>
      present[index] === true ? Math.min(limit, Math.max(0, (voltage - bus) / resistance)) : 0;
    let [low, high] = [12, 16];
    for (let turn = 0; turn < 45; turn += 1) {
      const bus = (low + high) / 2;
      let sum = 0;
      for (let index = 0; index < group.length; index += 1) sum += current(group[index] as Drawn, index, bus);
      if (sum > load) low = bus;
      else high = bus;
    }
    const pushed = group
      .map(({ voltage, resistance, limit, leaves }, index) => ({
        index,
        leaves,
        bus: voltage - resistance * limit,
      }))
      .filter(({ index, leaves, bus }) => leaves && present[index] === true && bus > high)
      .sort((one, other) => other.bus - one.bus)
      .at(0);
    if (pushed === undefined) {
      return low === 12 ? undefined : [...group.map((one, index) => current(one, index, high)), high];
    }
    present[pushed.index] = false;
  }
}
