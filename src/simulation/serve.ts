import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Clock } from '../clock/clock.js';
import type { Bench, BenchDrivers } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import { openSimulation } from './open-simulation.js';
import { serveOnPty } from './serve-pty.js';
import { LOOPBACK, serveOnTcp } from './serve-tcp.js';
import { CannotSimulateError } from './simulation-errors.js';
import type { VirtualBench } from './virtual-bench.js';

export type ServedRole = 'load' | 'meter';

export interface ServedBench {
  /** As a bench file writes them: `tcp://127.0.0.1:5025`, `serial:<link>?baud=115200`. */
  readonly addresses: Readonly<Partial<Record<ServedRole, string>>>;
  readonly world: VirtualBench;
  close(): Promise<void>;
}

export interface ServeOptions {
  readonly bench: Bench;
  readonly drivers: BenchDrivers;
  /** Must keep real time: others wait on the other end of the line. */
  readonly clock: Clock;
  /** `pty` needs socat. TCP when left out. */
  readonly lines?: 'tcp' | 'pty';
  /** TCP ports by role; any free one when left out. */
  readonly ports?: Readonly<Partial<Record<ServedRole, number>>>;
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
  const opened = openSimulation({ simulation, clock, drivers });
  const addresses: Partial<Record<ServedRole, string>> = {};
  const closings: (() => Promise<void>)[] = [];
  const close = async (): Promise<void> => {
    for (let one = closings.pop(); one !== undefined; one = closings.pop()) await one();
  };
  try {
    const folder = options.lines === 'pty' ? await temporaryFolder(closings) : undefined;
    for (const [role, driver] of Object.entries(drivers) as [ServedRole, Driver | undefined][]) {
      if (driver === undefined) continue;
      const instrument = opened.instrument(role, driver, dialectIn(bench, role));
      const served = await serveOnTcp({ instrument, clock, began: opened.began, port: ports[role] ?? 0 });
      closings.push(() => served.close());
      if (folder === undefined) {
        addresses[role] = `tcp://${LOOPBACK}:${served.port}`;
        continue;
      }
      const link = join(folder, role);
      const line = await serveOnPty({ port: served.port, link, clock });
      closings.push(() => line.close());
      addresses[role] = `serial:${link}?baud=115200`;
    }
  } catch (error) {
    await close();
    throw error;
  }
  return { addresses, world: opened.world, close };
}

async function temporaryFolder(closings: (() => Promise<void>)[]): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'railproof-bench-'));
  closings.push(() => rm(folder, { recursive: true, force: true }));
  return folder;
}

function dialectIn(bench: Bench, role: ServedRole): string | undefined {
  const connection = bench.instruments[role]?.connection;
  return connection?.kind === 'simulated' ? connection.dialect : undefined;
}
