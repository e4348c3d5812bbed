import { Connections } from '../bench/connections.js';
import {
  loadMayStillBeOn,
  makeSafeUnopened,
  makeSourceSafeUnopened,
  sourceMayStillBeOn,
  type Safety,
} from '../bench/make-safe.js';
import { exitCodeOf, exitCodes, type ExitCode } from '../errors/railproof-error.js';
import type { Bench, Post } from '../files/bench.js';
import { readBench } from '../files/read-bench.js';
import type { FileRead } from '../files/read-text.js';
import { printable } from '../quantity/printable.js';
import { lineBehind } from './driver-line.js';
import { errorText } from './error-text.js';
import { say } from './say.js';
import { stopOnSignals } from './stop-signals.js';
import type { Streams } from './streams.js';
import { whenAborted } from './when-aborted.js';
import { type DriverFiles, planDrivers, readBenchDrivers } from './bench-drivers.js';
import { type World, worldOf } from './wiring.js';

/**
 * `railproof safe`: the load of a bench off, and read back; then its source, where it has one. Unless that is
 * confirmed the last words are what to do by hand, whatever it was that failed. Whoever wants it to end has to wait
 * until the load was told; a second wish ends the wait for an answer, and the load is told again over a new
 * connection.
 */
export async function safe(wanted: { readonly bench: string }, streams: Streams): Promise<ExitCode> {
  const stop = stopOnSignals(streams);
  try {
    const file = await readBench(wanted.bench);
    const drivers = await driversFor(file, ['load']);
    const { connect: anew, clock } = await worldOf(file.value, planDrivers(drivers));
    const connections = new Connections(anew);
    whenAborted(stop.hurry, () => void connections.giveUp());
    const way = { connect: connections.connect, clock };
    const load = await makeSafeUnopened({ bench: file.value, drivers: planDrivers(drivers), ...way });
    tell('load', load, drivers, streams);
    const { source } = file.value.instruments;
    const status = source === undefined ? exitCodes.conforms : await sourceOff(file, way, streams);
    if (load.safety.kind === 'confirmed') return status;
    // Of both it is the load that must not be missed.
    if (source !== undefined) say(streams.stderr, load.safety.advice);
    return exitCodes.instrument;
  } catch (error) {
    say(streams.stderr, `${errorText(error)}\n${loadMayStillBeOn}`);
    return exitCodeOf(error);
  } finally {
    stop.release();
  }
}

/** Whatever is wrong with it, the load was told before. */
async function sourceOff(
  file: FileRead<Bench>,
  way: Pick<World, 'connect' | 'clock'>,
  streams: Streams,
): Promise<ExitCode> {
  try {
    const drivers = await driversFor(file, ['load', 'source']);
    const source = await makeSourceSafeUnopened({
      bench: file.value,
      drivers: planDrivers(drivers),
      ...way,
    });
    if (source === undefined) return exitCodes.conforms;
    tell('source', source, drivers, streams);
    return source.safety.kind === 'confirmed' ? exitCodes.conforms : exitCodes.instrument;
  } catch (error) {
    say(streams.stderr, `${errorText(error)}\n${sourceMayStillBeOn}`);
    return exitCodeOf(error);
  }
}

/** Nothing that is wrong with another instrument may keep the load on. A simulated bench is there as a whole. */
function driversFor(file: FileRead<Bench>, posts: readonly Post[]): Promise<DriverFiles> {
  return file.value.simulation === undefined ? readBenchDrivers(file, posts) : readBenchDrivers(file);
}

function tell(
  what: 'load' | 'source',
  { safety, address }: { readonly safety: Safety; readonly address: string },
  drivers: DriverFiles,
  { stdout, stderr }: Streams,
): void {
  if (safety.kind === 'confirmed') {
    say(stdout, `The ${what} at ${printable(address)} is off; it was read back.`);
  } else {
    const place = lineBehind(
      safety.cause,
      drivers.map(({ file }) => file),
    );
    const why = printable(safety.why) + (place === undefined ? '' : `; see ${printable(place)}`);
    say(stderr, `It could not be confirmed that the ${what} is off: ${why}\n${safety.advice}`);
  }
}
