import { once } from 'node:events';
import { type AddressInfo, connect, createServer, type Socket } from 'node:net';
import { onTestFinished } from 'vitest';

export interface CuttableLine {
  readonly port: number;
  /** Drops every connection and refuses new ones for so many seconds. */
  cutFor(seconds: number): void;
}

/** A port that leads to another one, until it is cut; there until the test is over. */
export async function cuttable(to: number): Promise<CuttableLine> {
  const ends = new Set<Socket>();
  const server = createServer((near) => {
    const far = connect({ host: '127.0.0.1', port: to, noDelay: true });
    near.setNoDelay(true);
    for (const [one, other] of [
      [near, far],
      [far, near],
    ] as const) {
      ends.add(one);
      one.on('error', () => undefined);
      one.once('close', () => {
        ends.delete(one);
        other.destroy();
      });
      one.pipe(other);
    }
  });
  const cut = (): void => {
    server.close();
    for (const end of ends) end.destroy();
  };
  server.listen(0, '127.0.0.1');
  await once(server, 'listening');
  const { port } = server.address() as AddressInfo;
  let back: NodeJS.Timeout | undefined;
  onTestFinished(() => {
    clearTimeout(back);
    cut();
  });
  return {
    port,
    cutFor(seconds) {
      cut();
      back = setTimeout(() => server.listen(port, '127.0.0.1'), seconds * 1000);
    },
  };
}
