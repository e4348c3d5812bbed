import { once } from 'node:events';
import { type AddressInfo, connect, createServer, type Socket } from 'node:net';
import { onTestFinished } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import { serveOnPty } from '../../src/simulation/serve-pty.js';

export interface Muffler {
  /** For a bench file. */
  readonly address: string;
  /** From now on the instrument hears everything and nobody hears the instrument; comes back when an answer was kept back. */
  mute(): Promise<void>;
}

/** Stands between a run and an instrument on a loopback port, on a port of its own or on a pty. */
export async function muffler(port: number, as: 'tcp' | { readonly pty: string }): Promise<Muffler> {
  let muted = false;
  let keptBack = (): void => undefined;
  const sockets = new Set<Socket>();
  const server = createServer((near) => {
    const far = connect(port, '127.0.0.1');
    for (const socket of [near, far]) {
      sockets.add(socket);
      socket.on('error', () => socket.destroy()).once('close', () => sockets.delete(socket));
    }
    near.pipe(far);
    far.on('data', (bytes: Buffer) => {
      if (muted) keptBack();
      else near.write(bytes);
    });
    far.once('end', () => near.end());
  }).listen(0, '127.0.0.1');
  await once(server, 'listening');
  const own = (server.address() as AddressInfo).port;
  const pty = as === 'tcp' ? undefined : await serveOnPty({ port: own, link: as.pty, clock: realClock });
  onTestFinished(async () => {
    await pty?.close();
    server.close();
    for (const socket of sockets) socket.destroy();
  });
  return {
    address: as === 'tcp' ? `tcp://127.0.0.1:${own}` : `serial:${as.pty}?baud=115200`,
    mute: () => {
      muted = true;
      return new Promise((resolve) => {
        keptBack = resolve;
      });
    },
  };
}
