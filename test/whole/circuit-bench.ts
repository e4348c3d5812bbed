import { join } from 'node:path';
import { performPlan } from '../../src/cli/perform-plan.js';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { planDrivers, readBenchDrivers } from '../../src/cli/bench-drivers.js';
import { shipped } from '../../src/cli/shipped.js';
import { vocabulary } from '../../src/cli/vocabulary.js';
import { worldOf } from '../../src/cli/wiring.js';
import type { Bench, BenchDrivers, Group } from '../../src/files/bench.js';
import type { Driver } from '../../src/files/driver.js';
import type { Module } from '../../src/files/module.js';
import { readProcedure } from '../../src/files/read-procedure.js';
import type { FileRead } from '../../src/files/read-text.js';
import type { ModuleLimit, SimulatedFault, SimulatedModule } from '../../src/files/simulation-section.js';
import type { Result } from '../../src/report/result.js';
import { makePlan } from '../../src/run/plan.js';
import { stepKinds } from '../../src/steps/index.js';
import { nobodyWatches } from './run-quietly.js';

const simulated = { kind: 'simulated' } as const;

/** How module currents and voltages are told apart on the bench. */
export type MeasuredBy = Group['measuredBy'];

/** A circuit of bricks of the nursery, and what a bench for it may have otherwise than it should. */
export interface CircuitCase {
  readonly circuit: 'parallel' | 'series';
  readonly measuredBy: MeasuredBy;
  /** What is really there, in the order of the circuit. */
  readonly modules: readonly SimulatedModule[];
  /** What the labels say; 15 V, 4 A where left out. */
  readonly rated?: { readonly voltage: number; readonly current: number };
  /** What the bench file says of the ballasts, where that is not what is there. */
  readonly said?: readonly { readonly resistance: number; readonly uncertainty: number }[];
  /** The order in which the modules stand on the bench, where it is not that of `modules`. */
  readonly wired?: readonly string[];
  readonly seed?: number;
  readonly leads?: number;
  readonly limits?: Bench['limits'];
  /** A meter that reads millivolts well, in place of the cautious guess of the shipped driver. */
  readonly fineMeter?: boolean;
  readonly faults?: readonly SimulatedFault[];
  /** What the modules withstand from output to earth. */
  readonly outputIsolation?: Module['outputIsolation'];
}

/** A module as it really is, a 15 V brick that hiccups unless told otherwise. */
export function brick(
  name: string,
  {
    limit = { style: 'hiccup', current: 5.3, period: 0.8 },
    ...rest
  }: Partial<SimulatedModule> & { readonly limit?: ModuleLimit } = {},
): SimulatedModule {
  return {
    name,
    openCircuitVoltage: 15.21,
    droopResistance: 0.018,
    limit,
    noise: 0.001,
    ballast: 0.05,
    reverseDiode: false,
    earth: 'isolated',
    ...rest,
  };
}

/** The stated half-width of a ballast, as a share of it: what four leads and a good meter leave. */
export const ballastTolerance = 0.01;

export function benchOf(given: CircuitCase): Bench {
  const { circuit, measuredBy, modules, seed = 7, leads = 0.035 } = given;
  const meter = { driver: 'meter-read-scpi', connection: simulated };
  const channelOf = (index: number) => (measuredBy === 'scanner' ? { channel: 101 + index } : {});
  return {
    name: `nursery-${measuredBy}`,
    instruments: {
      load: { driver: 'load-input-scpi', connection: simulated },
      meter,
      ...(measuredBy === 'scanner'
        ? { scanner: { driver: 'scanner-route-scpi', connection: simulated } }
        : {}),
    },
    leads: { resistance: 0.035, uncertainty: 0.005 },
    voltageFrom: 'meter-at-module',
    limits: given.limits ?? { voltage: 80, current: 20, power: 300 },
    group: {
      measuredBy,
      ...(measuredBy === 'scanner' ? { outputChannel: 100 } : {}),
      places: modules.map(({ ballast }, index) => ({
        ...(ballast > 0 || given.said !== undefined
          ? {
              ballast: given.said?.[index] ?? {
                resistance: ballast,
                uncertainty: ballast * ballastTolerance,
              },
            }
          : {}),
        ...channelOf(index),
        ...(measuredBy === 'meters' ? { meter } : {}),
      })),
    },
    simulation: {
      seed,
      circuit,
      leads,
      modules: wiredModules(given),
      instruments: {},
      answers: {},
      faults: given.faults ?? [],
    },
  };
}

function wiredModules({ modules, wired }: CircuitCase): readonly SimulatedModule[] {
  return wired === undefined
    ? modules
    : wired.flatMap((name) => modules.filter((module) => module.name === name));
}

export function modulesOf({ modules, rated, outputIsolation }: CircuitCase): readonly Module[] {
  return modules.map(({ name }) => ({
    name,
    description: '15 V brick from a retired label printer',
    rated: rated ?? { voltage: 15, current: 4 },
    protectionClass: 'I',
    input: 'mains',
    outputIsolation: outputIsolation ?? 'unknown',
    changes: [],
  }));
}

export interface Rehearsed {
  readonly result: Result;
  /** Of the run; undefined when it completed. */
  readonly error: Error | undefined;
}

/** Performs a procedure (a shipped one by its name, else a path) on a simulated circuit. */
export async function runCircuit(
  procedureName: string,
  given: CircuitCase,
  runs: string,
): Promise<Rehearsed> {
  const bench = benchOf(given);
  const benchFile = asRead(bench, join(runs, 'bench.yaml'));
  const drivers = await readBenchDrivers(benchFile);
  const procedure = await readProcedure(procedureName, vocabulary, {
    relativeTo: '.',
    shipped: shipped.procedures,
  });
  const [first, ...others] = modulesOf(given);
  if (first === undefined) throw new Error('a circuit has modules');
  const plan = makePlan(
    procedure.value,
    [first, ...others],
    bench,
    given.fineMeter === true ? finer(planDrivers(drivers)) : planDrivers(drivers),
    stepKinds,
  );
  const world = await worldOf(bench, plan.drivers);
  if (world.simulation === undefined) throw new Error('the bench is not simulated');
  const files = {
    procedure,
    bench: benchFile,
    modules: [asRead(first, 'module.yaml'), ...others.map((one) => asRead(one, 'module.yaml'))] as const,
    drivers,
  };
  const [firstFile, ...otherFiles] = files.modules;
  const performed = await performPlan(
    { plan, files: { ...files, modules: [firstFile, ...otherFiles] } },
    world,
    {
      runs,
      operator: simulatedOperator(world.simulation),
      signal: new AbortController().signal,
      hurry: new AbortController().signal,
      watch: nobodyWatches,
    },
  );
  if (performed.understood.kind === 'error') throw performed.understood.error;
  const { ending } = performed;
  return {
    result: performed.understood.result,
    error: ending.how === 'completed' ? undefined : ending.error,
  };
}

/** What a bench meter of six digits promises; the ones simulated draw their errors within it. */
const fine = { ofReading: 1e-4, fixed: 2e-5, resolution: 1e-6 };

function finer(drivers: BenchDrivers): BenchDrivers {
  const sharpen = (driver: Driver): Driver => ({
    ...driver,
    accuracy: { ...driver.accuracy, voltage: fine },
  });
  return {
    ...drivers,
    meter: drivers.meter === undefined ? undefined : sharpen(drivers.meter),
    places: drivers.places?.map((driver) => (driver === undefined ? undefined : sharpen(driver))),
  };
}

function asRead<T>(value: T, path: string): FileRead<T> {
  return { value, path, text: '' };
}
