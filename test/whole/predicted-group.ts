import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { profilesOf, requireAll } from '../../src/arrangement/profiles.js';
import type { ModuleProfile } from '../../src/arrangement/module-profile.js';
import { readDrawer } from '../../src/cli/read-records.js';
import { shelves } from '../../src/cli/shipped.js';
import type { Bench } from '../../src/files/bench.js';
import { readDriver } from '../../src/files/read-driver.js';
import type { SimulatedInstrument, Simulation } from '../../src/files/simulation-section.js';
import type { Finding } from '../../src/analysis/finding.js';
import { errorOf } from '../../src/simulation/instrument-errors.js';
import { type Random, randomFrom } from '../../src/statistics/random.js';
import { brick, type CircuitCase, modulesOf, runCircuit } from './circuit-bench.js';
import { runQuietly } from './run-quietly.js';

/** A group that was measured twice: each module alone, and then all of them together. */
export interface MeasuredGroup {
  /** By the records of each alone. */
  readonly profiles: readonly ModuleProfile[];
  /** What was bought: its nominal value, and what it may be off by. */
  readonly ballast: { readonly resistance: number; readonly tolerance: number };
  /** At which the shares were measured: the highest that the group held. */
  readonly load: number;
  /** In the order of the modules. */
  readonly shares: readonly Finding[];
}

const nominal = [0.047, 0.068, 0.1];
/** Of one percent, and of five. */
const tolerances = [0.01, 0.01, 0.05, 0.05];
/** On the bench of the group, where they were measured with four leads and a good meter. */
const known = 0.002;

/**
 * Two or three bricks that nobody has seen before, and ballasts from one bag: each brick is put to
 * `real-limit` on one bench, whose instruments have the same errors each time and scatter anew, and then
 * all of them to `sharing`.
 */
export async function measuredGroup(seed: number): Promise<MeasuredGroup> {
  const runs = mkdtempSync(join(tmpdir(), 'railproof-prediction-'));
  try {
    const random = randomFrom(seed).fork('predicted group');
    const ballast = {
      resistance: nominal[seed % nominal.length] ?? 0.1,
      tolerance: tolerances[seed % tolerances.length] ?? 0.05,
    };
    const given = randomGroup(seed, ballast, random);
    const alone = await profilesAlone(given, join(runs, 'alone'), random);
    const { result, error } = await runCircuit('sharing', given, join(runs, 'together'));
    if (error !== undefined) throw error;
    const load = Math.max(
      ...result.evidence.steps
        .flatMap(({ points }) => points)
        .flatMap(({ phase, outcome, set }) =>
          phase === 'share' && outcome === 'held' ? [set.current ?? 0] : [],
        ),
    );
    const shares = given.modules.flatMap(
      ({ name }) => result.findings.find((finding) => finding.name === `share-of-${name}`) ?? [],
    );
    if (shares.length < given.modules.length) throw new Error(`the shares of seed ${seed} are missing`);
    return { profiles: alone, ballast, load, shares };
  } finally {
    rmSync(runs, { recursive: true, force: true });
  }
}

function randomGroup(
  seed: number,
  { resistance, tolerance }: MeasuredGroup['ballast'],
  { uniform: between }: Random,
): CircuitCase {
  const rated = { voltage: 12, current: between(2, 3.2) };
  const modules = Array.from({ length: seed % 3 === 0 ? 3 : 2 }, (_, index) =>
    brick(`K${index + 1}`, {
      openCircuitVoltage: 12 * between(0.998, 1.004),
      droopResistance: between(0.006, 0.03),
      limit: { style: 'hiccup', current: rated.current * between(1.15, 1.4), period: 0.8 },
      noise: between(0.0002, 0.0005),
      ballast: resistance * (1 + between(-tolerance, tolerance)),
    }),
  );
  const said = modules.map(({ ballast }) => {
    const measured = ballast * (1 + between(-known, known));
    return { resistance: measured, uncertainty: measured * known };
  });
  return {
    circuit: 'parallel',
    measuredBy: 'scanner',
    modules,
    said,
    rated,
    seed,
    fineMeter: true,
    leads: between(0.03, 0.04),
  };
}

async function profilesAlone(
  given: CircuitCase,
  runs: string,
  random: Random,
): Promise<readonly ModuleProfile[]> {
  const instruments = await instrumentsOf(random.fork('instruments'));
  for (const [index, module] of modulesOf(given).entries()) {
    const truth = given.modules[index];
    if (truth === undefined) throw new Error('each module is one of the group');
    const simulation: Simulation = {
      seed: Math.floor(random.uniform(1, 2 ** 31)),
      circuit: 'single',
      leads: random.uniform(0.03, 0.04),
      modules: [{ ...truth, ballast: 0 }],
      instruments,
      answers: {},
      faults: [],
    };
    await runQuietly('real-limit', { ...bench, simulation }, module, runs);
  }
  const found = profilesOf(readDrawer([runs]).records, new Date());
  return requireAll(found);
}

const bench: Bench = {
  name: 'bench of one',
  instruments: {
    load: { driver: 'load-input-scpi', connection: { kind: 'simulated' } },
    meter: { driver: 'meter-read-scpi', connection: { kind: 'simulated' } },
  },
  leads: { resistance: 0.035, uncertainty: 0.005 },
  voltageFrom: 'meter-at-module',
  limits: { voltage: 60, current: 12, power: 300 },
};

/** Drawn once for a bench, within what the drivers promise, as a simulation without a word on it would. */
async function instrumentsOf(random: Random): Promise<Readonly<Record<string, SimulatedInstrument>>> {
  const told: Record<string, SimulatedInstrument> = {};
  for (const role of ['load', 'meter'] as const) {
    const name = bench.instruments[role]?.driver ?? '';
    const { value: driver } = await readDriver(name, shelves);
    const error = (quantity: string) => errorOf({ instruments: {} }, role, driver, quantity, random);
    told[role] = { errors: { voltage: error('voltage'), current: error('current') } };
  }
  return told;
}
