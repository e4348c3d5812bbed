import type { Clock } from '../clock/clock.js';
import type { BenchDrivers } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import type { Simulation } from '../files/simulation-section.js';
import type { Connection } from '../instrument/connection.js';
import type { Seconds } from '../quantity/quantity.js';
import { dialectFor } from './dialects/choose-dialect.js';
import { errorOf } from './instrument-errors.js';
import { randomFrom, type Random } from './random.js';
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
   */
  connect(role: string, driver: Driver, dialect?: string): Connection;
  /** The instrument itself, to be served on another line. */
  instrument(role: string, driver: Driver, dialect?: string): VirtualInstrument;
}

/**
 * Sets up a simulated bench: the module, the leads and the load, and instruments that are reached by bytes only.
 * Everything random comes from the simulation's seed.
 * @throws CannotSimulateError
 */
export function openSimulation(facts: {
  readonly simulation: Simulation;
  readonly clock: Clock;
  readonly drivers: BenchDrivers;
}): OpenedSimulation {
  const { simulation, clock, drivers } = facts;
  const random = randomFrom(simulation.seed);
  const began = clock.now();
  const world = worldOf(simulation, drivers.load, random);
  const instruments = new Map<string, VirtualInstrument>();
  const instrument = (role: string, driver: Driver, dialectName?: string): VirtualInstrument => {
    if (role !== 'load' && role !== 'meter') {
      throw new CannotSimulateError({
        what: `a ${role}`,
        advice: 'Only a load and a meter can be simulated.',
      });
    }
    const known = instruments.get(role);
    if (known !== undefined) return known;
    const dialect = dialectFor(driver, dialectName);
    const made = new VirtualInstrument({ bench: world, simulation, driver, dialect, random });
    instruments.set(role, made);
    return made;
  };
  return {
    world,
    began,
    operator: simulatedOperator({ bench: world, clock, began }, simulation.answers),
    instrument,
    connect: (role, driver, dialectName) => {
      const reached = instrument(role, driver, dialectName);
      return new SimulatedConnection({
        address: `simulated:${reached.dialect}`,
        instrument: reached,
        clock,
        began,
      });
    },
  };
}

function worldOf(simulation: Simulation, load: Driver, random: Random): VirtualBench {
  return new VirtualBench(
    theCircuit(simulation),
    loadHardware(load, simulation.leads, {
      setCurrent: errorOf(simulation, 'load', load, 'set-current', random),
      setVoltage: errorOf(simulation, 'load', load, 'set-voltage', random),
    }),
    simulation.faults.filter(
      (fault): fault is WorldFault => fault.what === 'module-dead' || fault.what === 'reversed',
    ),
  );
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
