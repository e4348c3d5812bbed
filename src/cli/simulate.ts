import { realClock } from '../clock/real-clock.js';
import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { withAddresses } from '../files/live-bench.js';
import { readBench } from '../files/read-bench.js';
import { serveBench } from '../simulation/serve.js';
import type { Streams } from './streams.js';
import { planDrivers, readBenchDrivers } from './wiring.js';

/**
 * `railproof simulate`: serves the instruments of a simulated bench until it is told to stop. What it
 * prints is the bench file to use with them.
 */
export async function simulate(
  wanted: { readonly bench: string; readonly pty?: boolean },
  streams: Streams,
): Promise<ExitCode> {
  const file = await readBench(wanted.bench);
  const served = await serveBench({
    bench: file.value,
    drivers: planDrivers(await readBenchDrivers(file)),
    clock: realClock,
    lines: wanted.pty === true ? 'pty' : 'tcp',
  });
  // Listened for before anyone is told that this serves, who might stop it at once.
  const stop = stopAsked();
  try {
    streams.stdout.write(withAddresses(file.text, served.addresses));
    for (const [post, address] of Object.entries(served.addresses))
      streams.stderr.write(`${post}: ${address}\n`);
    streams.stderr.write('Serving until Ctrl-C.\n');
    await stop;
  } finally {
    await served.close();
  }
  return exitCodes.conforms;
}

function stopAsked(): Promise<void> {
  return new Promise((resolve) => {
    for (const name of ['SIGINT', 'SIGTERM', 'SIGHUP'])
      process.once(name, () => {
        resolve();
      });
  });
}
