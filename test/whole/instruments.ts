import { createServer, type Socket } from 'node:net';
import type { AddressInfo } from 'node:net';

export interface TestInstrument {
  readonly address: string;
  /** Every line that arrived, in order. */
  readonly heard: readonly string[];
  close(): Promise<void>;
}

/** A TCP instrument on loopback that does as it is told for each line it hears. */
export async function instrument(answer: (line: string, socket: Socket) => void): Promise<TestInstrument> {
  const heard: string[] = [];
  const sockets = new Set<Socket>();
  const server = createServer((socket) => {
    sockets.add(socket);
    let kept = '';
    socket.on('error', () => undefined);
    socket.on('data', (bytes) => {
      const lines = (kept + bytes.toString('latin1')).split('\n');
      kept = lines.pop() ?? '';
      for (const line of lines) {
        heard.push(line);
        answer(line, socket);
      }
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const { port } = server.address() as AddressInfo;
  return {
    address: `tcp://127.0.0.1:${port}`,
    heard,
    close: () =>
      new Promise((resolve) => {
        for (const socket of sockets) socket.destroy();
        server.close(() => {
          resolve();
        });
      }),
  };
}

/** An address on loopback where nobody listens: one that was free a moment ago. */
export async function nobody(): Promise<string> {
  const once = await instrument(() => undefined);
  await once.close();
  return once.address;
}
