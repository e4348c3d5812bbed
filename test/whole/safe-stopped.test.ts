import { once } from 'node:events';
import { type AddressInfo, createServer, type Socket } from 'node:net';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, it, onTestFinished, vi } from 'vitest';
import { benchFile } from '../cli/at-a-socket.js';
import { until } from './at-the-bench.js';
import { ended, type Ended, start } from './railproof.js';

vi.setConfig({ testTimeout: 60_000 });

/** A load that hears everything and says nothing: what it was told, connection by connection. */
async function silentLoad() {
  const told: string[] = [];
  const sockets: Socket[] = [];
  const server = createServer((socket) => {
    const index = told.push('') - 1;
    sockets.push(socket);
    socket
      .on('error', () => undefined)
      .on('data', (bytes: Buffer) => {
        told[index] = `${told[index] ?? ''}${bytes.toString()}`;
      });
  }).listen(0, '127.0.0.1');
  await once(server, 'listening');
  const folder = mkdtempSync(join(tmpdir(), 'railproof-safe-'));
  onTestFinished(() => {
    for (const socket of sockets) socket.destroy();
    server.close();
    rmSync(folder, { recursive: true, force: true });
  });
  const driver = join(folder, 'driver.yaml');
  const shipped = readFileSync('drivers/load-input-scpi.yaml', 'utf8');
  // Patient enough that nothing ends of itself before it is asked for twice.
  writeFileSync(driver, shipped.replace('timeout: 1 s', 'timeout: 4 s'));
  const { port } = server.address() as AddressInfo;
  const address = `tcp://127.0.0.1:${port}`;
  return { told, address, driver, bench: benchFile(folder, address) };
}

/** A program that is told to stop once it has asked who is there, and told again when it has said so. */
async function stoppedTwice(
  args: readonly string[],
  told: readonly string[],
  second: NodeJS.Signals,
): Promise<Ended> {
  const child = start(args);
  let talk = '';
  child.stderr?.on('data', (more: Buffer) => {
    talk += more.toString();
  });
  const end = ended(child);
  await until(() => told[0]?.includes('*IDN?') === true);
  child.kill('SIGINT');
  await until(() => talk.includes('stopped with Ctrl-C'));
  await new Promise((resolve) => setTimeout(resolve, 150));
  child.kill(second);
  return end;
}

it('making safe is not stopped by Ctrl-C, once or twice: the load is told on each connection', async () => {
  const { told, bench } = await silentLoad();
  const { status, stderr } = await stoppedTwice(['safe', '--bench', bench], told, 'SIGINT');
  expect(told.map((each) => each.trim().split('\n')[0])).toEqual(['INP OFF', 'INP OFF']);
  expect(stderr.trimEnd().split('\n').at(-1)).toMatch(/^THE LOAD MAY STILL BE ON\. /);
  expect(status).toBe(69);
});

it('a trial of a driver that is stopped twice ends at once, and says that nobody knows', async () => {
  const { told, address, driver } = await silentLoad();
  const trial = ['drivers', '--try', driver, '--connection', address];
  const { status, stderr } = await stoppedTwice(trial, told, 'SIGTERM');
  expect(told[0]?.trim().split('\n')[0]).toBe('INP OFF');
  expect(stderr.trimEnd().split('\n').at(-1)).toMatch(/^THE LOAD MAY STILL BE ON\. /);
  expect(status).toBe(3);
});
