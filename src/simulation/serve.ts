import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Clock } from '../clock/clock.js';
import {
  type Bench,
  type BenchDrivers,
  driverAt,
  type InstrumentPlace,
  type Post,
  postsOf,
} from '../files/bench.js';
import { openSimulation } from './open-simulation.js';
import { serveOnPty } from './serve-pty.js';
import { LOOPBACK, serveOnTcp } from './serve-tcp.js';
import type { SimulatedOperator } from './simulated-operator.js';
import { CannotSimulateError } from './simulation-errors.js';
import type { VirtualBench } from './virtual-bench.js';

export interface ServedBench {
  /** By post, as a bench file writes them: `tcp://127.0.0.1:5025`, `serial:<link>?baud=115200`. */
  readonly addresses: Readonly<Partial<Record<Post, string>>>;
  readonly world: VirtualBench;
  /** Whoever has hands at it: the plugs and the meter's probes. */
  readonly operator: SimulatedOperator;
  close(): Promise<void>;
}

export interface ServeOptions {
  readonly bench: Bench;
  readonly drivers: BenchDrivers;
  /** Must keep real time: others wait on the other end of the line. */
  readonly clock: Clock;
  /** `pty` needs socat. TCP when left out. */
  readonly lines?: 'tcp' | 'pty';
  /** TCP ports by post; any free one when left out. */
  readonly ports?: Readonly<Partial<Record<Post, number>>>;
}

/**
 * Serves the simulated instruments of a bench in real time, each on a line of its own, to any program on this
 * machine. All is closed again when one of them cannot be served.
 * @throws CannotSimulateError when the bench has no simulation section.
 * @throws CannotServeError when a port is in use or socat is missing.
 */
export async function serveBench(options: ServeOptions): Promise<ServedBench> {
  const { bench, drivers, clock, ports = {} } = options;
  const { simulation } = bench;
  if (simulation === undefined) {
    throw new CannotSimulateError({
      what: `the bench ${bench.name}: it has no simulation section`,
      advice: 'Add one that says what is really there; fixtures/benches has examples.',
    });
  }
  const opened = openSimulation({ simulation, clock, drivers, group: bench.group });
  const addresses: Partial<Record<Post, string>> = {};
  const closings: (() => Promise<void>)[] = [];
  const close = async (): Promise<void> => {
    for (let one = closings.pop(); one !== undefined; one = closings.pop()) await one();
  };
  try {
    const folder = options.lines === 'pty' ? await temporaryFolder(closings) : undefined;
    for (const [post, place] of postsOf(bench)) {
      const driver = driverAt(drivers, post);
      if (driver === undefined) continue;
      const instrument = opened.instrument(post, driver, dialectIn(place));
      const served = await serveOnTcp({ instrument, clock, began: opened.began, port: ports[post] ?? 0 });
      closings.push(() => served.close());
      if (folder === undefined) {
        addresses[post] = `tcp://${LOOPBACK}:${served.port}`;
        continue;
      }
      const link = join(folder, post);
      const line = await serveOnPty({ port: served.port, link, clock });
      closings.push(() => line.close());
      addresses[post] = `serial:${link}?baud=115200`;
    }
  } catch (error) {
    await close();
    throw error;
  }
  return { addresses, world: opened.world, operator: opened.operator, close };
}

async function temporaryFolder(closings: (() => Promise<void>)[]): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'railproof-bench-'));
  closings.push(() => rm(folder, { recursive: true, force: true }));
  return folder;
}

function dialectIn({ connection }: InstrumentPlace): string | undefined {
  return connection.kind === 'simulated' ? connection.dialect : undefined;
}
