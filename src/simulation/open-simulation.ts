import type { Clock } from '../clock/clock.js';
import { type BenchDrivers, type Group, isPost, type Post, roleOf } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import type { Simulation } from '../files/simulation-section.js';
import { InstrumentUnreachableError } from '../instrument/connection-errors.js';
import type { Connection } from '../instrument/connection.js';
import type { Seconds } from '../quantity/quantity.js';
import { dialectFor } from './dialects/choose-dialect.js';
import { errorOf } from './instrument-errors.js';
import { Probes } from './probes.js';
import { randomFrom, type Random } from '../statistics/random.js';
import { SimulatedConnection } from './simulated-connection.js';
import { CannotSimulateError } from './simulation-errors.js';
import { type SimulatedOperator, simulatedOperator } from './simulated-operator.js';
import { VirtualBench, type WorldFault } from './virtual-bench.js';
import { VirtualInstrument } from './virtual-instrument.js';
import { loadHardware } from './virtual-load.js';

export interface OpenedSimulation {
  /** What is really there. For tests and demonstrations: a run sees only what the lines carry. */
  readonly world: VirtualBench;
  readonly operator: SimulatedOperator;
  /** The clock's time at which the bench's time was 0; faults count from here. */
  readonly began: Seconds;
  /**
   * A line to one instrument, which is made by the first line to it. `dialect` names a way of speaking.
   * @throws NotUnderstoodBySimulationError, UnknownDialectError, CannotSimulateError
   * @throws InstrumentUnreachableError while a fault keeps it from being reached
   */
  connect(post: string, driver: Driver, dialect?: string): Connection;
  /** The instrument itself, to be served on another line. */
  instrument(post: string, driver: Driver, dialect?: string): VirtualInstrument;
}

/**
 * Sets up a simulated bench: the modules, the leads and the load, and instruments that are reached by bytes
 * only. `group` says which channel of a scanner is wired to which place. Everything random comes from the
 * simulation's seed.
 * @throws CannotSimulateError
 */
export function openSimulation(facts: {
  readonly simulation: Simulation;
  readonly clock: Clock;
  readonly drivers: BenchDrivers;
  readonly group?: Group | undefined;
}): OpenedSimulation {
  const { simulation, clock, drivers, group } = facts;
  const random = randomFrom(simulation.seed);
  const began = clock.now();
  const world = worldOf(simulation, drivers, random);
  const probes = new Probes({ simulation, group, scanned: drivers.scanner !== undefined });
  const instruments = new Map<Post, VirtualInstrument>();
  const instrument = (post: string, driver: Driver, dialectName?: string): VirtualInstrument => {
    if (!isPost(post) || driver.role !== roleOf(post)) throw cannotBe(post, driver);
    const known = instruments.get(post);
    if (known !== undefined) return known;
    const dialect = dialectFor(driver, dialectName);
    const made = new VirtualInstrument({
      post,
      bench: world,
      probes,
      simulation,
      group,
      driver,
      dialect,
      random,
    });
    instruments.set(post, made);
    return made;
  };
  return {
    world,
    began,
    operator: simulatedOperator({ bench: world, probes, clock, began }, simulation.answers),
    instrument,
    connect: (post, driver, dialectName) => {
      const reached = instrument(post, driver, dialectName);
      const address = `simulated:${reached.dialect}`;
      if (reached.isGoneAt(clock.now() - began)) {
        throw new InstrumentUnreachableError({ address, reason: 'the simulated instrument is gone' });
      }
      return new SimulatedConnection({ address, instrument: reached, clock, began });
    },
  };
}

function cannotBe(post: string, { name, role }: Driver): CannotSimulateError {
  return new CannotSimulateError({
    what: `the driver ${name}, for a ${role}, at the post "${post}"`,
    advice:
      'There are a load, a meter, a scanner, a thermometer, a source, and own meters of the places: meter-1, meter-2.',
  });
}

function worldOf(simulation: Simulation, { load, source }: BenchDrivers, random: Random): VirtualBench {
  return new VirtualBench(
    theCircuit(simulation),
    loadHardware(load, simulation.leads, {
      setCurrent: errorOf(simulation, 'load', load, 'set-current', random),
      setVoltage: errorOf(simulation, 'load', load, 'set-voltage', random),
    }),
    worldFaults(simulation),
    source === undefined ? 'hand' : 'source',
  );
}

function worldFaults({ circuit, faults }: Simulation): readonly WorldFault[] {
  const ofTheWorld = faults.filter(
    (fault): fault is WorldFault =>
      fault.what === 'module-dead' ||
      fault.what === 'reversed' ||
      fault.what === 'load-restarted' ||
      fault.what === 'source-restarted',
  );
  if (circuit !== 'single' && ofTheWorld.some(({ what, of }) => what === 'reversed' && of !== undefined)) {
    throw new CannotSimulateError({
      what: 'one module of several that is wired the wrong way round',
      advice: "Leave out its 'of': then the leads at the output of the whole are swapped.",
    });
  }
  return ofTheWorld;
}

function theCircuit({ circuit, modules }: Simulation): Pick<Simulation, 'circuit' | 'modules'> {
  if (circuit === 'single' ? modules.length !== 1 : modules.length < 2) {
    throw new CannotSimulateError({
      what: `a ${circuit} circuit of ${modules.length} modules`,
      advice: `Give ${circuit === 'single' ? 'one module' : 'at least two modules'} in the simulation section.`,
    });
  }
  if (new Set(modules.map(({ name }) => name)).size < modules.length) {
    throw new CannotSimulateError({
      what: 'two modules of the same name',
      advice: 'Give each module of the simulation section a name of its own.',
    });
  }
  return { circuit, modules };
}
