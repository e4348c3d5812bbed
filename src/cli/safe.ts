import { Connections } from '../bench/connections.js';
import {
  loadMayStillBeOn,
  makeSafeUnopened,
  makeSourceSafeUnopened,
  type Safety,
} from '../bench/make-safe.js';
import { exitCodeOf, exitCodes, type ExitCode } from '../errors/railproof-error.js';
import type { Driver } from '../files/driver.js';
import { readBench } from '../files/read-bench.js';
import type { FileRead } from '../files/read-text.js';
import { printable } from '../quantity/printable.js';
import { lineBehind } from './driver-line.js';
import { errorText } from './error-text.js';
import { stopOnSignals } from './stop-signals.js';
import type { Streams } from './streams.js';
import { planDrivers, readBenchDrivers, worldOf } from './wiring.js';

/**
 * `railproof safe`: the load of a bench off, and read back; then its source, where it has one. Unless that is confirmed the last words are what
 * to do by hand, whatever it was that failed. Whoever wants it to end has to wait until the load was told; a
 * second wish ends the wait for an answer, and the load is told again over a new connection.
 */
export async function safe(wanted: { readonly bench: string }, streams: Streams): Promise<ExitCode> {
  const stop = stopOnSignals(streams);
  try {
    const file = await readBench(wanted.bench);
    const driverFiles = await readBenchDrivers(file);
    const drivers = planDrivers(driverFiles);
    const files = driverFiles.map((each) => each.file);
    const world = await worldOf(file.value, drivers);
    const { clock } = world;
    const connections = new Connections(world.connect);
    stop.hurry.addEventListener('abort', () => void connections.giveUp(), { once: true });
    const { connect } = connections;
    const parts = { bench: file.value, drivers, connect, clock };
    const load = await makeSafeUnopened(parts);
    tell('load', load, files, streams);
    const source = await makeSourceSafeUnopened(parts);
    if (source !== undefined) tell('source', source, files, streams);
    const confirmed = load.safety.kind === 'confirmed' && source?.safety.kind !== 'unconfirmed';
    // Of both it is the load that must not be missed.
    if (source !== undefined && load.safety.kind === 'unconfirmed') {
      streams.stderr.write(`${load.safety.advice}\n`);
    }
    return confirmed ? exitCodes.conforms : exitCodes.instrument;
  } catch (error) {
    streams.stderr.write(`${errorText(error)}\n${loadMayStillBeOn}\n`);
    return exitCodeOf(error);
  } finally {
    stop.release();
  }
}

function tell(
  what: 'load' | 'source',
  { safety, address }: { readonly safety: Safety; readonly address: string },
  drivers: readonly FileRead<Driver>[],
  { stdout, stderr }: Streams,
): void {
  if (safety.kind === 'confirmed') {
    stdout.write(`The ${what} at ${printable(address)} is off; it was read back.\n`);
  } else {
    const place = lineBehind(safety.cause, drivers);
    const why = printable(safety.why) + (place === undefined ? '' : `; see ${printable(place)}`);
    stderr.write(`It could not be confirmed that the ${what} is off: ${why}\n${safety.advice}\n`);
  }
}
