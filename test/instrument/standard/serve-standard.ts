import { createServer, type AddressInfo, type Socket } from 'node:net';
import type { VirtualClock } from '../../../src/clock/virtual-clock.js';
import type { TcpAddress } from '../../../src/instrument/tcp-connection.js';
import { VirtualLine } from '../fixtures/virtual-line.js';
import type { StandardInstrument } from './standard-instrument.js';

/** A line in virtual time; a reply is there a moment after the instrument is done. */
export function virtualLineTo(instrument: StandardInstrument, clock: VirtualClock): VirtualLine {
  return new VirtualLine(clock, (message, at) => {
    instrument.write(message, at);
    const response = instrument.readIfAny();
    if (response === undefined) return [];
    return [{ at: response.at + 0.001, bytes: Buffer.from(`${response.text}\n`, 'latin1') }];
  });
}

export interface ServedInstrument {
  readonly address: TcpAddress;
  close(): Promise<void>;
}

/** The instrument on a loopback port of its own, in real time. A message may come in pieces. */
export async function serveStandard(instrument: StandardInstrument): Promise<ServedInstrument> {
  const sockets = new Set<Socket>();
  const server = createServer((socket) => {
    sockets.add(socket);
    let held = '';
    socket.on('error', () => undefined);
    socket.on('data', (bytes) => {
      const messages = (held + bytes.toString('latin1')).split('\n');
      held = messages.pop() ?? '';
      for (const message of messages) {
        const now = performance.now() / 1000;
        instrument.write(message, now);
        const response = instrument.readIfAny();
        if (response === undefined) continue;
        setTimeout(() => socket.write(`${response.text}\n`, 'latin1'), (response.at - now) * 1000);
      }
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  return {
    address: { kind: 'tcp', host: '127.0.0.1', port: (server.address() as AddressInfo).port },
    close: () =>
      new Promise((resolve) => {
        for (const socket of sockets) socket.destroy();
        server.close(() => {
          resolve();
        });
      }),
  };
}
