import { fileURLToPath } from 'node:url';
import type { Ceilings } from '../../src/bench/ceilings.js';
import type { InputListener } from '../../src/bench/load.js';
import { type OpenBench, openBench } from '../../src/bench/open-bench.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { type Bench, driverAt, type Post } from '../../src/files/bench.js';
import type { Driver } from '../../src/files/driver.js';
import { readBench } from '../../src/files/read-bench.js';
import { readDriver } from '../../src/files/read-driver.js';
import type { SimulatedModule, Simulation } from '../../src/files/simulation-section.js';
import type { Connection } from '../../src/instrument/connection.js';
import { VirtualLine } from '../instrument/fixtures/virtual-line.js';
import { type OpenedSimulation, openSimulation } from '../../src/simulation/open-simulation.js';

const fromHere = (path: string): string => fileURLToPath(new URL(path, import.meta.url));
const shelves = { relativeTo: fromHere('../../fixtures'), shipped: fromHere('../../drivers') };

/** One of the nursery's benches, with what a test wants to be otherwise on it. */
export interface NurseryChange {
  /** `nursery` when left out. */
  readonly file?: string;
  readonly module?: Partial<SimulatedModule>;
  readonly simulation?: Partial<Simulation>;
  readonly limits?: Partial<Bench['limits']>;
  readonly bench?: Partial<Bench>;
  readonly load?: Partial<Driver>;
  readonly meter?: Partial<Driver>;
  readonly source?: Partial<Driver>;
  /** What the meter answers to READ? whatever is at its probes; it is told which reading it is, from 1. */
  readonly meterReads?: string | ((count: number) => string);
  /** The same, of the thermometer. */
  readonly thermometerReads?: string | ((count: number) => string);
  readonly onInput?: InputListener;
  readonly onNotice?: (text: string) => void;
  /** Heeded while it is opened, and while a lost instrument is sought. */
  readonly opening?: AbortSignal;
}

export interface Nursery {
  readonly description: Bench;
  readonly drivers: {
    readonly load: Driver;
    readonly meter: Driver;
    readonly thermometer?: Driver;
    readonly source?: Driver;
  };
  readonly clock: VirtualClock;
  readonly simulation: OpenedSimulation;
  /** Every line to an instrument that was opened, oldest first. */
  readonly lines: readonly Connection[];
  /** With the ceilings of a run; else with what the bench allows. */
  readonly open: (ceilings?: Ceilings) => Promise<OpenBench>;
}

/** The bench of a shipped file and shipped drivers; its instruments are reached by bytes, in virtual time. */
export async function nursery(change: NurseryChange = {}): Promise<Nursery> {
  const file = await readBench(fromHere(`../../fixtures/benches/${change.file ?? 'nursery'}.yaml`));
  const description = described(file.value, change);
  const { instruments, simulation } = description;
  if (simulation === undefined) throw new Error(`${file.path} is not simulated`);
  const shippedLoad = await readDriver(instruments.load.driver, shelves);
  const shippedMeter = await readDriver(instruments.meter?.driver ?? '', shelves);
  // What stands there speaks as the shipped drivers say; a changed driver is how we speak to it.
  const thermometer =
    instruments.thermometer && (await readDriver(instruments.thermometer.driver, shelves)).value;
  const source = instruments.source && (await readDriver(instruments.source.driver, shelves)).value;
  const there = {
    load: shippedLoad.value,
    meter: shippedMeter.value,
    ...(thermometer === undefined ? {} : { thermometer }),
    ...(source === undefined ? {} : { source }),
  };
  const drivers = {
    ...there,
    load: { ...there.load, ...change.load },
    meter: { ...there.meter, ...change.meter },
    ...(source === undefined ? {} : { source: { ...source, ...change.source } }),
  };
  const clock = new VirtualClock(new Date('2026-11-20T09:00:00Z'));
  const opened = openSimulation({ simulation, clock, drivers: there });
  const lines: Connection[] = [];
  return {
    description,
    drivers,
    clock,
    simulation: opened,
    lines,
    open: (ceilings) =>
      openBench({
        ...(ceilings === undefined ? {} : { ceilings }),
        bench: description,
        drivers,
        clock,
        connect: (_address, _driver, role) => {
          const reads = { meter: change.meterReads, thermometer: change.thermometerReads }[role];
          const line =
            reads !== undefined
              ? stubborn(clock, reads)
              : opened.connect(role, driverAt(there, role as Post) ?? there.meter);
          lines.push(line);
          return Promise.resolve(line);
        },
        onInput: change.onInput ?? (() => undefined),
        onNotice: change.onNotice ?? (() => undefined),
        ...(change.opening === undefined ? {} : { signal: change.opening }),
      }),
  };
}

/** A meter, or a thermometer, at the end of a line that reads what it is told to. */
function stubborn(clock: VirtualClock, reading: string | ((count: number) => string)): Connection {
  let count = 0;
  const answers: Readonly<Record<string, string>> = {
    '*IDN?': 'NURSERY,METER,K,1',
    'SYST:ERR?': '0,"No error"',
    'CONF?': '"VOLT 100,0.001"',
  };
  return new VirtualLine(clock, (message, at) => {
    const read = (): string => (typeof reading === 'string' ? reading : reading((count += 1)));
    const answer = message === 'READ?' || message === 'MEAS:TEMP?' ? read() : answers[message];
    return answer === undefined ? [] : [{ at: at + 0.02, bytes: Buffer.from(`${answer}\n`) }];
  });
}

function described(bench: Bench, change: NurseryChange): Bench {
  const { simulation } = bench;
  const [module] = simulation?.modules ?? [];
  if (simulation === undefined || module === undefined) throw new Error(`${bench.name} is not simulated`);
  return {
    ...bench,
    limits: { ...bench.limits, ...change.limits },
    simulation: { ...simulation, modules: [{ ...module, ...change.module }], ...change.simulation },
    ...change.bench,
  };
}

const none = { gain: 0, offset: 0, resolution: 0 };

/** Instruments that show and do exactly what they should. */
export const exactInstruments: Simulation['instruments'] = {
  load: { errors: { voltage: none, current: none, 'set-current': none, 'set-voltage': none } },
  meter: { errors: { voltage: none } },
};
