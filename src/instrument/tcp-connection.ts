import { connect, type Socket } from 'node:net';
import type { ConnectionAddress } from '../files/bench.js';
import { formatAddress } from '../files/connection-address.js';
import type { Seconds } from '../quantity/quantity.js';
import { InstrumentUnreachableError } from './connection-errors.js';
import type { Connection } from './connection.js';
import { type OpenPort, PortConnection } from './port-connection.js';

export type TcpAddress = Extract<ConnectionAddress, { kind: 'tcp' }>;

export interface TcpPatience {
  /** How long the other side may take to accept. */
  readonly connecting: Seconds;
  /** How long it may take nothing of what is written. */
  readonly writing: Seconds;
}

const whenRefused =
  'Is it switched on, is its remote control enabled, and is the port the right one? ' +
  'Is another program connected, as some instruments serve only one program at a time?';

/**
 * Opens a raw socket to an instrument.
 * @throws InstrumentUnreachableError when nobody is there, it refuses, or does not accept in time.
 */
export function openTcp(
  address: TcpAddress,
  { connecting = 5, writing = 5 }: Partial<TcpPatience> = {},
): Promise<Connection> {
  const name = formatAddress(address);
  return new Promise((resolve, reject) => {
    const socket = connect({ host: address.host, port: address.port, noDelay: true, keepAlive: true });
    const fail = (reason: string, facts: { advice?: string; cause?: unknown } = {}): void => {
      clearTimeout(timer);
      socket.destroy();
      reject(new InstrumentUnreachableError({ address: name, reason, ...facts }));
    };
    const refused = (error: NodeJS.ErrnoException): void => {
      const advice = error.code === 'ECONNREFUSED' ? { advice: whenRefused } : {};
      fail(whyNot(error, address.host), { ...advice, cause: error });
    };
    const timer = setTimeout(() => {
      fail(`no connection within ${Number(connecting.toFixed(1))} s`);
    }, connecting * 1000);
    socket.once('error', refused);
    socket.once('connect', () => {
      clearTimeout(timer);
      socket.off('error', refused);
      resolve(new PortConnection({ address: name, writing, ...portOf(socket) }));
    });
  });
}

/**
 * Hangs up by saying goodbye and waiting for the other side to do the same: a socket destroyed with bytes
 * unread is reset, and a reset may rob the instrument of the last message, which may be the one that makes it
 * safe.
 */
function portOf(socket: Socket): Pick<OpenPort, 'stream' | 'gone' | 'hangUp' | 'cut'> {
  return {
    stream: socket,
    gone: 'the other side hung up',
    hangUp: (done) => {
      if (socket.closed) {
        done();
        return;
      }
      socket.once('close', done);
      socket.resume();
      socket.end();
    },
    cut: () => socket.destroy(),
  };
}

function whyNot(error: NodeJS.ErrnoException, host: string): string {
  switch (error.code) {
    case 'ECONNREFUSED':
      return 'the connection is refused: nothing listens on this port';
    case 'ENOTFOUND':
    case 'EAI_AGAIN':
      return `no host is called "${host}"`;
    case 'EHOSTUNREACH':
    case 'ENETUNREACH':
      return 'there is no way to this host';
    case 'ETIMEDOUT':
      return 'nobody answers at this address';
    case undefined:
    default:
      return error.message === '' ? (error.code ?? 'it cannot be opened') : error.message;
  }
}
