import { fileURLToPath } from 'node:url';
import { type OpenBench, openBench } from '../../src/bench/open-bench.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { type Bench, type BenchDrivers, driverAt, type Group, type Post } from '../../src/files/bench.js';
import type { Driver } from '../../src/files/driver.js';
import { readDriver } from '../../src/files/read-driver.js';
import type { SimulatedFault, SimulatedModule, Simulation } from '../../src/files/simulation-section.js';
import type { Connection } from '../../src/instrument/connection.js';
import { type OpenedSimulation, openSimulation } from '../../src/simulation/open-simulation.js';

const shelves = { relativeTo: '.', shipped: fileURLToPath(new URL('../../drivers', import.meta.url)) };
const simulated = { kind: 'simulated' } as const;

export interface GroupChange {
  readonly circuit?: 'parallel' | 'series';
  readonly measuredBy?: Group['measuredBy'];
  readonly faults?: readonly SimulatedFault[];
  /** In place of three modules that differ a little. */
  readonly modules?: readonly SimulatedModule[];
  readonly instruments?: Simulation['instruments'];
  readonly limits?: Partial<Bench['limits']>;
  /** How the posts are spoken to, where it is not as their shipped driver says. */
  readonly drivers?: Readonly<Partial<Record<'meter' | 'scanner' | 'thermometer', Partial<Driver>>>>;
}

export interface GroupBench {
  readonly description: Bench;
  readonly drivers: BenchDrivers;
  readonly clock: VirtualClock;
  readonly simulation: OpenedSimulation;
  /** A line of bytes to the instrument at a post. */
  readonly line: (post: Post) => Connection;
  readonly open: () => Promise<OpenBench>;
}

/** K1 to K3 of the nursery, 50 mΩ in series with each, on channels 101 to 103; 110 is the output of the whole. */
export async function groupBench(change: GroupChange = {}): Promise<GroupBench> {
  const { circuit = 'parallel', measuredBy = 'scanner' } = change;
  const shipped = async (name: string): Promise<Driver> => (await readDriver(name, shelves)).value;
  const there = {
    load: await shipped('load-input-scpi'),
    meter: await shipped('meter-read-scpi'),
    scanner: measuredBy === 'scanner' ? await shipped('scanner-route-scpi') : undefined,
    thermometer: await shipped('thermometer-query-scpi'),
    places: measuredBy === 'meters' ? Array.from({ length: 3 }, () => ownMeter) : undefined,
  };
  const spoken = (post: 'meter' | 'scanner' | 'thermometer'): Driver | undefined => {
    const driver = there[post];
    return driver === undefined ? undefined : { ...driver, ...change.drivers?.[post] };
  };
  const drivers: BenchDrivers = {
    ...there,
    meter: spoken('meter'),
    scanner: spoken('scanner'),
    thermometer: spoken('thermometer'),
  };
  const simulation: Simulation = {
    seed: 7,
    circuit,
    leads: 0.035,
    modules: change.modules ?? [module('K1', 12.34), module('K2', 12.34), module('K3', 12.28)],
    instruments: change.instruments ?? exact,
    answers: {},
    faults: change.faults ?? [],
  };
  const description: Bench = {
    name: 'nursery group',
    instruments: {
      load: { driver: 'load-input-scpi', connection: simulated },
      meter: { driver: 'meter-read-scpi', connection: simulated },
      thermometer: { driver: 'thermometer-query-scpi', connection: simulated },
      ...(measuredBy === 'scanner'
        ? { scanner: { driver: 'scanner-route-scpi', connection: simulated } }
        : {}),
    },
    leads: { resistance: 0.035, uncertainty: 0.005 },
    voltageFrom: 'meter-at-module',
    limits: { voltage: 60, current: 12, power: 200, ...change.limits },
    group: {
      measuredBy,
      outputChannel: 110,
      places: [101, 102, 103].map((channel) => ({
        ballast: { resistance: 0.05, uncertainty: 0.0005 },
        channel,
        ...(measuredBy === 'meters' ? { meter: { driver: 'meter-query-scpi', connection: simulated } } : {}),
      })),
    },
    simulation,
  };
  const clock = new VirtualClock(new Date('2026-11-20T09:00:00Z'));
  const opened = openSimulation({ simulation, clock, drivers: there, group: description.group });
  const line = (post: Post): Connection => {
    const driver = driverAt(there, post);
    if (driver === undefined) throw new Error(`no ${post} here`);
    return opened.connect(post, driver);
  };
  return {
    description,
    drivers,
    clock,
    simulation: opened,
    line,
    open: () =>
      openBench({
        bench: description,
        drivers,
        clock,
        connect: (_address, _driver, post) => Promise.resolve(line(post as Post)),
        onInput: () => undefined,
        onNotice: () => undefined,
      }),
  };
}

const ownMeter = (await readDriver('meter-query-scpi', shelves)).value;
const none = { gain: 0, offset: 0, resolution: 0 };
const exact: Simulation['instruments'] = {
  load: { errors: { voltage: none, current: none, power: none, 'set-current': none, 'set-voltage': none } },
  meter: { errors: { voltage: none, resistance: none } },
  thermometer: { errors: { temperature: none } },
};

export function module(
  name: string,
  openCircuitVoltage: number,
  change: Partial<SimulatedModule> = {},
): SimulatedModule {
  return {
    name,
    openCircuitVoltage,
    droopResistance: 0.018,
    limit: { style: 'hiccup', current: 4, period: 0.8 },
    noise: 0,
    ballast: 0.05,
    reverseDiode: true,
    earth: 'isolated',
    ...change,
  };
}
