import type { LoadLaw } from '../../src/circuit/load-law.js';
import type { ModuleLimit, SimulatedModule, Simulation } from '../../src/files/simulation-section.js';
import type { LoadState } from '../../src/simulation/virtual-load.js';
import { type Moment, VirtualBench, type WorldFault } from '../../src/simulation/virtual-bench.js';
import { k1 } from './bench-parts.js';

export const sinks = (current: number): LoadLaw => ({
  kind: 'current',
  current,
  leastVoltage: 1,
  leads: 0.035,
});

/** A 12 V brick of the common kind: about 3.7 A, a milliohm or two of droop. */
export function brick(
  name: string,
  openCircuitVoltage: number,
  change: Partial<SimulatedModule> = {},
): SimulatedModule {
  const limit: ModuleLimit = { style: 'hiccup', current: 3.7, period: 0.8 };
  return k1(limit, { name, openCircuitVoltage, droopResistance: 0.0015, earth: 'isolated', ...change });
}

const exact = { gain: 0, offset: 0, resolution: 0 };

export const LEADS = 0.035;

/** A world whose load does exactly what it is told. */
export function worldOf(
  circuit: Simulation['circuit'],
  modules: readonly SimulatedModule[],
  faults: readonly WorldFault[] = [],
): VirtualBench {
  const hardware = { leads: LEADS, leastVoltage: 1, setCurrent: exact, setVoltage: exact };
  return new VirtualBench({ circuit, modules }, hardware, faults);
}

/** What is there once a load has been on for a while. */
export function under(
  world: VirtualBench,
  change: Partial<LoadState> | number,
  at: number,
  elapsed = 0.3,
): Moment {
  const load =
    typeof change === 'number' ? ({ input: 'on', mode: 'current', setCurrent: change } as const) : change;
  world.setLoad(load, at);
  return seen(world, at + elapsed);
}

export function seen(world: VirtualBench, at: number): Moment {
  const [moment] = world.look([at]);
  if (moment === undefined) throw new Error('nothing was looked at');
  return moment;
}

export function voltagesOf({ modules }: Moment): readonly number[] {
  return modules.map(({ voltage }) => voltage);
}

export function currentsOf({ modules }: Moment): readonly number[] {
  return modules.map(({ current }) => current);
}
