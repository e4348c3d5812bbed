import type { Clock } from '../clock/clock.js';
import { realClock } from '../clock/real-clock.js';
import { VirtualClock } from '../clock/virtual-clock.js';
import { type Bench, type BenchDrivers, postsOf } from '../files/bench.js';
import type { Connect } from '../instrument/connect.js';
import type { OpenedSimulation } from '../simulation/open-simulation.js';
import { connectors } from './connectors.js';
import { Watchman } from './watchman.js';

/** How a bench is reached, and the time that passes there. */
export interface World {
  readonly connect: Connect;
  readonly clock: Clock;
  /** Where the bench is simulated. */
  readonly simulation: OpenedSimulation | undefined;
  /** Starts whoever switches the load off should this program vanish; not where the load goes with it. */
  readonly startWatchman?: () => Watchman;
}

/**
 * The ways to connect that a bench needs, each loaded only when it is used. Where every instrument is
 * simulated or replayed, time is virtual: an hour passes in a moment, or as `virtual` has it.
 */
export async function worldOf(
  bench: Bench,
  drivers: BenchDrivers,
  virtual: (began: Date) => Clock = (began) => new VirtualClock(began),
): Promise<World> {
  const kinds = postsOf(bench).map(([, place]) => place.connection.kind);
  const clock = kinds.every((kind) => kind === 'simulated' || kind === 'replay')
    ? virtual(realClock.wall())
    : realClock;
  const simulation =
    bench.simulation === undefined || !kinds.includes('simulated')
      ? undefined
      : (await import('../simulation/open-simulation.js')).openSimulation({
          simulation: bench.simulation,
          clock,
          drivers,
          group: bench.group,
        });
  const { kind } = bench.instruments.load.connection;
  return {
    connect: connectors(clock, simulation),
    clock,
    simulation,
    ...(kind === 'tcp' || kind === 'serial' ? { startWatchman: () => new Watchman() } : {}),
  };
}
