import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SimulatedModule } from '../../src/files/simulation-section.js';
import type { Result } from '../../src/report/result.js';
import { randomFrom } from '../../src/statistics/random.js';
import { trueValues } from '../../src/simulation/true-values.js';
import { randomCase, type RandomCase } from './random-case.js';
import { runQuietly } from './run-quietly.js';

/** Few in the ordinary run; as many as RAILPROOF_SEEDS says, of which the soaks, being long, take a third. */
const asked = process.env['RAILPROOF_SEEDS'];
const seeds = Number(asked ?? 6);
const soaks = asked === undefined ? 4 : Math.ceil(seeds / 3);
const folder = mkdtempSync(join(tmpdir(), 'railproof-limit-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

function findingOf({ findings }: Result, name: string) {
  return findings.find((one) => one.name === name);
}

/** How many of these intervals leave the truth out. */
function misses(
  seen: readonly {
    readonly interval: readonly [number, number] | null | undefined;
    readonly truth: number;
  }[],
): number {
  return seen.filter(({ interval, truth }) => !(interval && interval[0] <= truth && truth <= interval[1]))
    .length;
}

describe('the limit of a module nobody has seen before, by a trace at constant voltage', () => {
  const seen: { readonly result: Result; readonly given: RandomCase }[] = [];

  beforeAll(async () => {
    for (let seed = 1; seed <= seeds; seed += 1) {
      const given = randomCase(seed);
      seen.push({ given, result: await runQuietly('limit-shape', given.bench, given.module, folder) });
    }
  }, 600_000);

  it('has the style that went into it', () => {
    const found = seen.map(({ result, given }) => [
      given.truth.name,
      findingOf(result, 'limit-style')?.value,
    ]);
    expect(found).toEqual(seen.map(({ given }) => [given.truth.name, given.truth.limit.style]));
  });

  it('gives its true short-circuit current within the interval, where it has one', () => {
    const short = seen.flatMap(({ result, given }) => {
      const truth = trueValues({ leads: 0 }, given.truth).shortCircuitCurrent;
      const interval = findingOf(result, 'short-circuit-current')?.interval;
      return truth === undefined ? [] : [{ interval, truth }];
    });
    expect(short.length).toBeGreaterThan(1);
    expect(misses(short), JSON.stringify(short)).toBeLessThanOrEqual(Math.ceil(short.length / 10));
  });

  it('gives none for a module that pulses or switches itself off', () => {
    const without = seen.filter(
      ({ given }) => trueValues({ leads: 0 }, given.truth).shortCircuitCurrent === undefined,
    );
    expect(without.map(({ result }) => findingOf(result, 'short-circuit-current'))).toEqual(
      without.map(() => undefined),
    );
  });
});

/** K1's kin: a thermal section and a room of its own for each seed. */
function warmCase(seed: number): RandomCase & { readonly riseAt: (current: number) => number } {
  const given = randomCase(seed);
  const { uniform } = randomFrom(seed).fork('warm');
  const riseAtRated = uniform(15, 45);
  const ambient = uniform(15, 30);
  const truth: SimulatedModule = {
    ...given.truth,
    ratedCurrent: given.module.rated.current,
    thermal: { riseAtRated, timeConstant: uniform(300, 1200), ambient, limitPerKelvin: -0.0005 },
  };
  const { simulation } = given.bench;
  if (simulation === undefined) throw new Error('the bench is simulated');
  return {
    ...given,
    truth,
    riseAt: (current) => riseAtRated * (current / given.module.rated.current) ** 2,
    bench: {
      ...given.bench,
      instruments: {
        ...given.bench.instruments,
        thermometer: { driver: 'thermometer-query-scpi', connection: { kind: 'simulated' } },
      },
      // Half of the benches do not know their room, and take the cold module's temperature for it.
      ...(seed % 2 === 0 ? {} : { ambient: { temperature: ambient, uncertainty: 0.5 } }),
      simulation: { ...simulation, modules: [truth] },
    },
  };
}

describe.each([
  ['cut short after one and a half time constants', 1.5, 'predicted, not reached'],
  ['that was waited for', 8, 'settles at'],
])('a soak %s', (_, timeConstants, note) => {
  const seen: { readonly result: Result; readonly truth: number; readonly timeConstant: number }[] = [];

  beforeAll(async () => {
    for (let seed = 1; seed <= soaks; seed += 1) {
      const given = warmCase(seed);
      const timeConstant = given.truth.thermal?.timeConstant ?? Number.NaN;
      const lasting = Math.round(timeConstants * timeConstant);
      const procedure = procedureOf([
        'open-circuit: { for: 2 s }',
        `soak: { current: 100 % of rated-current, for: ${lasting} s, every: ${timeConstants > 2 ? 20 : 10} s }`,
      ]);
      const result = await runQuietly(procedure, given.bench, given.module, folder);
      seen.push({ result, truth: given.riseAt(given.module.rated.current), timeConstant });
    }
  }, 600_000);

  it('gives the settled rise within its interval', () => {
    const rises = seen.map(({ result, truth }) => ({
      interval: findingOf(result, 'temperature-rise')?.interval,
      truth,
    }));
    expect(misses(rises), JSON.stringify(rises)).toBeLessThanOrEqual(Math.ceil(soaks / 10));
  });

  it('says whether it was reached or is predicted', () => {
    for (const { result } of seen) expect(findingOf(result, 'temperature-rise')?.note).toContain(note);
  });

  it('gives the time constant within its interval', () => {
    const found = seen.map(({ result, timeConstant }) => ({
      interval: findingOf(result, 'thermal-time-constant')?.interval,
      truth: timeConstant,
    }));
    expect(misses(found), JSON.stringify(found)).toBeLessThanOrEqual(Math.ceil(soaks / 10));
  });
});

/** A procedure file with these steps. */
function procedureOf(steps: readonly string[]): string {
  const path = join(folder, 'rehearsal.yaml');
  const list = steps.map((step) => `  - ${step}\n`).join('');
  writeFileSync(path, `railproof: procedure 1\nname: rehearsal\ntitle: A rehearsal\nsteps:\n${list}`);
  return path;
}
