import { once } from 'node:events';
import { type AddressInfo, connect, createServer, type Socket } from 'node:net';
import { onTestFinished } from 'vitest';

export interface OneClient {
  readonly port: number;
  /** How many clients came, in all. */
  readonly clients: () => number;
}

/**
 * Stands before an instrument on a loopback port and serves one client at a time, as small instruments do: a
 * second one waits unheard, or is turned away, until a moment after the first is gone.
 */
export async function oneClientAtATime(
  port: number,
  others: 'wait' | 'are-turned-away',
  moment = 300,
): Promise<OneClient> {
  let clients = 0;
  let served: Socket | undefined;
  const sockets = new Set<Socket>();
  const waiting: Socket[] = [];
  const serveNext = (near: Socket): void => {
    served = near;
    const far = connect(port, '127.0.0.1');
    sockets.add(far);
    far.on('error', () => near.destroy());
    near.pipe(far);
    far.pipe(near);
    near.once('close', () => {
      far.destroy();
      setTimeout(() => {
        served = undefined;
        const next = waiting.find((socket) => !socket.destroyed);
        if (next !== undefined) serveNext(next);
      }, moment);
    });
  };
  const server = createServer({ pauseOnConnect: true, noDelay: true }, (near) => {
    clients += 1;
    sockets.add(near);
    near.on('error', () => near.destroy());
    if (served === undefined) serveNext(near);
    else if (others === 'wait') waiting.push(near);
    else near.destroy();
  }).listen(0, '127.0.0.1');
  await once(server, 'listening');
  onTestFinished(() => {
    server.close();
    for (const socket of sockets) socket.destroy();
  });
  return { port: (server.address() as AddressInfo).port, clients: () => clients };
}
