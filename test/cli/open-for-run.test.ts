import { once } from 'node:events';
import { type AddressInfo, createServer } from 'node:net';
import { expect, it, onTestFinished } from 'vitest';
import { connectors } from '../../src/cli/connectors.js';
import { openForRun } from '../../src/cli/open-for-run.js';
import { planDrivers, readBenchDrivers } from '../../src/cli/bench-drivers.js';
import { realClock } from '../../src/clock/real-clock.js';
import { readBench } from '../../src/files/read-bench.js';
import { StoppedByOperator } from '../../src/run/stopped.js';

/** A load on a loopback port that takes everything in and never answers; and the bench on which it stands. */
async function aSilentLoad() {
  const server = createServer((socket) => {
    socket.on('error', () => undefined).resume();
  }).listen(0, '127.0.0.1');
  onTestFinished(() => void server.close());
  await once(server, 'listening');
  const { port } = server.address() as AddressInfo;
  const file = await readBench('fixtures/benches/nursery.yaml');
  const drivers = planDrivers(await readBenchDrivers(file, ['load']));
  const { load } = file.value.instruments;
  const connection = { kind: 'tcp', host: '127.0.0.1', port } as const;
  const instruments = { load: { ...load, connection } };
  return {
    server,
    bench: { ...file.value, instruments },
    // Nothing ends of itself before it is asked for.
    drivers: { load: { ...drivers.load, wire: { ...drivers.load.wire, timeout: 60 } } },
  };
}

it.each(['while it keeps its first answer back', 'before it is reached at all'])(
  'a bench is given up at once by whoever is in a hurry, %s, and why the run ends is why they wished it to',
  async (when) => {
    const { server, bench, drivers } = await aSilentLoad();
    const [first, second] = [new AbortController(), new AbortController()];
    const hurry = (): void => {
      first.abort(new StoppedByOperator('stopped with Ctrl-C'));
      second.abort();
    };
    if (when.startsWith('before')) hurry();
    const opening = openForRun({
      ...{ bench, drivers, connect: connectors(realClock), clock: realClock },
      ...{ signal: first.signal, hurry: second.signal },
      ...{ onInput: () => undefined, onNotice: () => undefined },
    });
    const outcome = opening.catch((error: unknown) => error);
    if (!when.startsWith('before')) {
      await once(server, 'connection');
      setTimeout(hurry, 100);
    }
    expect(await outcome).toMatchObject({
      message: 'stopped with Ctrl-C',
      advice: expect.stringContaining('switched nothing on') as string,
      cause: first.signal.reason as unknown,
    });
  },
);
