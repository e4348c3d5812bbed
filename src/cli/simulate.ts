import { createInterface } from 'node:readline/promises';
import { realClock } from '../clock/real-clock.js';
import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { withAddresses } from '../files/live-bench.js';
import { readBench } from '../files/read-bench.js';
import { printable } from '../quantity/printable.js';
import { type ServedBench, serveBench } from '../simulation/serve.js';
import { errorText } from './error-text.js';
import { say } from './say.js';
import type { Streams } from './streams.js';
import { planDrivers, readBenchDrivers } from './bench-drivers.js';

/**
 * `railproof simulate`: serves the instruments of a simulated bench until it is told to stop. What it
 * prints is the bench file to use with them. With `acts`, each line that is typed is something done at the
 * bench by hand, as a run asks for it.
 */
export async function simulate(
  wanted: { readonly bench: string; readonly pty?: boolean; readonly acts?: boolean },
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
    if (wanted.acts === true) void doAsTyped(served.operator, streams);
    await stop;
    // Else a line that nobody types any more would keep the program waiting.
    streams.stdin.destroy();
  } finally {
    await served.close();
  }
  return exitCodes.conforms;
}

/** One act after the other, as one pair of hands does them; what can't be done is told, and the rest goes on. */
async function doAsTyped(operator: ServedBench['operator'], { stdin, stderr }: Streams): Promise<void> {
  stderr.write(
    'Type what is done at the bench by hand: unplug, plug in, leads together, probe the output, ...\n',
  );
  for await (const line of createInterface({ input: stdin })) {
    const act = line.trim();
    if (act === '') continue;
    try {
      await operator.act(act);
      stderr.write(`done: ${printable(act)}\n`);
    } catch (error) {
      say(stderr, errorText(error));
    }
  }
}

function stopAsked(): Promise<void> {
  return new Promise((resolve) => {
    for (const name of ['SIGINT', 'SIGTERM', 'SIGHUP'])
      process.once(name, () => {
        resolve();
      });
  });
}
