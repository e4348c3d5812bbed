import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { connect } from 'node:net';
import { expect, it, onTestFinished } from 'vitest';
import { connectors } from '../../src/cli/connectors.js';
import { realClock } from '../../src/clock/real-clock.js';
import { toyDriver } from '../instrument/fixtures/toy-load.js';

const listening = `const server = require('node:net').createServer();
server.listen({ host: '127.0.0.1', port: 0, backlog: 1 }, () => console.log(server.address().port));`;

/** A port behind which nothing takes up a connection: its process is stopped, and its queue is full. */
async function portThatHangs(): Promise<number> {
  const holder = spawn(process.execPath, ['-e', listening], { stdio: ['ignore', 'pipe', 'inherit'] });
  onTestFinished(() => void holder.kill('SIGKILL'));
  const [port] = (await once(holder.stdout, 'data')) as [Buffer];
  holder.kill('SIGSTOP');
  const queued = Array.from({ length: 4 }, () => connect({ host: '127.0.0.1', port: Number(port) }));
  for (const socket of queued) socket.on('error', () => undefined);
  onTestFinished(() => {
    for (const socket of queued) socket.destroy();
  });
  await Promise.all(queued.slice(0, 2).map((socket) => once(socket, 'connect')));
  return Number(port);
}

it('an instrument that is sought again is not waited for any longer than there is time for', async () => {
  const port = await portThatHangs();
  await expect(
    connectors(realClock)({ kind: 'tcp', host: '127.0.0.1', port }, toyDriver, 'load', 1),
  ).rejects.toMatchObject({
    code: 'INSTRUMENT_UNREACHABLE',
    message: `tcp://127.0.0.1:${port}: no connection within 1 s`,
  });
});
