import { makeSafe } from '../bench/make-safe.js';
import { openBench } from '../bench/open-bench.js';
import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { readBench } from '../files/read-bench.js';
import type { Streams } from './streams.js';
import { planDrivers, readBenchDrivers, worldOf } from './wiring.js';

/** `railproof safe`: the load of a bench off, and read back. The meter is left alone: it may not answer. */
export async function safe(wanted: { readonly bench: string }, streams: Streams): Promise<ExitCode> {
  const file = await readBench(wanted.bench);
  const drivers = planDrivers(await readBenchDrivers(file));
  const world = await worldOf(file.value, drivers);
  const bench = await openBench({
    bench: file.value,
    drivers: { load: drivers.load },
    connect: world.connect,
    clock: world.clock,
    onInput: () => undefined,
    onNotice: () => undefined,
  });
  try {
    const safety = await makeSafe(bench);
    if (safety.kind === 'confirmed') {
      streams.stdout.write(`The load at ${bench.load.address} is off; it was read back.\n`);
      return exitCodes.conforms;
    }
    streams.stderr.write(`${safety.why}\n${safety.advice}\n`);
    return exitCodes.instrument;
  } finally {
    await bench.close();
  }
}
