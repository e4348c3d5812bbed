import { fileURLToPath } from 'node:url';
import { dirname, sep } from 'node:path';
import { findingNames, findingWords } from '../analysis/finding-names.js';
import type { Clock } from '../clock/clock.js';
import { realClock } from '../clock/real-clock.js';
import { VirtualClock } from '../clock/virtual-clock.js';
import { type Bench, type BenchDrivers, type Post, postsOf } from '../files/bench.js';
import { driversOfChannels } from '../files/bench-channels.js';
import type { Driver } from '../files/driver.js';
import type { FileRead } from '../files/read-text.js';
import type { Connect } from '../instrument/connect.js';
import { stepKinds } from '../steps/index.js';
import type { OpenedSimulation } from '../simulation/open-simulation.js';
import { readDriverAt } from './bench-driver.js';
import { connectors } from './connectors.js';
import { Watchman } from './watchman.js';

/** Everything is wired together here: no other room knows all of these. */

const packageFolder = new URL('../../', import.meta.url);

export const shipped = {
  procedures: fileURLToPath(new URL('procedures/', packageFolder)),
  drivers: fileURLToPath(new URL('drivers/', packageFolder)),
  tolerances: fileURLToPath(new URL('procedures/tolerances/', packageFolder)),
};

/** Where a driver that is named on the command line is sought. */
export const shelves = { relativeTo: '.', shipped: shipped.drivers };

/** As a record names a file: those that come with the program by their place in it, wherever that is. */
export function recordedPath(path: string): string {
  const root = fileURLToPath(packageFolder);
  return path.startsWith(root) ? path.slice(root.length).split(sep).join('/') : path;
}

export const vocabulary = { stepKinds, findings: findingNames, words: findingWords };

/** The driver of each post of a bench, the load's first. */
export type DriverFiles = readonly { readonly post: Post; readonly file: FileRead<Driver> }[];

/**
 * The drivers that a bench names, shipped or beside the bench file, each for the role and the channel it is given;
 * all of them, or those of some posts.
 * @throws BadFileError, NoDriverError, WrongRoleError
 */
export async function readBenchDrivers(
  bench: FileRead<Bench>,
  posts?: readonly Post[],
): Promise<DriverFiles> {
  const where = { relativeTo: dirname(bench.path), shipped: shipped.drivers };
  const files: DriverFiles[number][] = [];
  for (const [post, place] of postsOf(bench.value)) {
    if (posts?.includes(post) === false) continue;
    files.push({ post, file: await readDriverAt(bench, post, place.driver, where) });
  }
  return driversOfChannels(bench, files);
}

/** What was read of them, without where it stood. */
export function planDrivers(files: DriverFiles): BenchDrivers {
  const at = (post: Post): Driver | undefined => files.find((one) => one.post === post)?.file.value;
  const load = at('load');
  if (load === undefined) throw new Error('a bench has a load');
  const highest = Math.max(0, ...files.map(({ post }) => Number(/^meter-(\d+)$/.exec(post)?.[1] ?? 0)));
  const places = Array.from({ length: highest }, (_, index) => at(`meter-${index + 1}`));
  return {
    load,
    meter: at('meter'),
    scanner: at('scanner'),
    thermometer: at('thermometer'),
    source: at('source'),
    ...(places.length === 0 ? {} : { places }),
  };
}

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
