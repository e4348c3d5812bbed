import { spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { type AddressInfo, createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, onTestFinished } from 'vitest';
import type { ConnectionAddress } from '../../../src/files/bench.js';
import type { QuirkyInstrument } from './quirky-instrument.js';

/** How many programs it serves at a time; one too many is hung up on. */
export interface Serving {
  readonly clients?: number;
  /** It stops listening as soon as somebody is connected. */
  readonly deafToOthers?: boolean;
}

/** Serves an instrument on a loopback port of its own until the test is over. */
export async function serveQuirkyTcp(
  instrument: QuirkyInstrument,
  { clients = Infinity, deafToOthers = false }: Serving = {},
): Promise<Extract<ConnectionAddress, { kind: 'tcp' }>> {
  let connected = 0;
  const server = createServer({ noDelay: true }, (socket) => {
    socket.on('error', () => undefined);
    onTestFinished(() => void socket.destroy());
    if (connected >= clients) {
      socket.destroy();
      return;
    }
    connected += 1;
    if (deafToOthers) server.close();
    const hear = instrument.connect({
      say: (bytes) => {
        if (socket.writable) socket.write(bytes);
      },
    });
    socket.on('data', hear);
    socket.on('close', () => {
      connected -= 1;
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  onTestFinished(() => void server.close());
  return { kind: 'tcp', host: '127.0.0.1', port: (server.address() as AddressInfo).port };
}

/** Serves an instrument on a pseudo-terminal of its own until the test is over. */
export async function serveQuirkyPty(
  instrument: QuirkyInstrument,
): Promise<Extract<ConnectionAddress, { kind: 'serial' }>> {
  const { port } = await serveQuirkyTcp(instrument);
  const folder = await mkdtemp(join(tmpdir(), 'railproof-quirks-'));
  const path = join(folder, 'port');
  const line = `pty,raw,echo=0,link=${path}`;
  const socat = spawn('socat', ['-t0', line, `tcp:127.0.0.1:${port},nodelay`], { stdio: 'ignore' });
  const gone = new Promise((resolve) => socat.once('close', resolve));
  onTestFinished(async () => {
    socat.kill();
    await gone;
    await rm(folder, { recursive: true, force: true });
  });
  await expect.poll(() => existsSync(path), { timeout: 20_000, interval: 10 }).toBe(true);
  return { kind: 'serial', path };
}
