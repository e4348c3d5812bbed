import { connect, type Socket } from 'node:net';
import type { ConnectionAddress } from '../files/bench.js';
import type { Seconds } from '../quantity/quantity.js';
import { addressText } from './address-text.js';
import { ConnectionLostError, InstrumentUnreachableError } from './connection-errors.js';
import type { Connection } from './connection.js';
import { Incoming } from './incoming.js';

export type TcpAddress = Extract<ConnectionAddress, { kind: 'tcp' }>;

export interface TcpPatience {
  /** How long the other side may take to accept. */
  readonly connecting: Seconds;
  /** How long it may take nothing of what is written. */
  readonly writing: Seconds;
}

const goodbye: Seconds = 0.25;

/**
 * Opens a raw socket to an instrument.
 * @throws InstrumentUnreachableError when nobody is there, it refuses, or does not accept in time.
 */
export function openTcp(
  address: TcpAddress,
  patience: TcpPatience = { connecting: 5, writing: 5 },
): Promise<Connection> {
  const name = addressText(address);
  return new Promise((resolve, reject) => {
    const socket = connect({ host: address.host, port: address.port, noDelay: true, keepAlive: true });
    const fail = (reason: string, cause?: unknown): void => {
      clearTimeout(timer);
      socket.destroy();
      reject(new InstrumentUnreachableError({ address: name, reason, cause }));
    };
    const refused = (error: NodeJS.ErrnoException): void => {
      fail(whyNot(error, address.host), error);
    };
    const timer = setTimeout(() => {
      fail(`no connection within ${patience.connecting} s`);
    }, patience.connecting * 1000);
    socket.once('error', refused);
    socket.once('connect', () => {
      clearTimeout(timer);
      socket.off('error', refused);
      resolve(new TcpConnection(name, socket, patience.writing));
    });
  });
}

class TcpConnection implements Connection {
  readonly address: string;
  readonly #socket: Socket;
  readonly #writing: Seconds;
  readonly #incoming: Incoming;

  constructor(address: string, socket: Socket, writing: Seconds) {
    this.address = address;
    this.#socket = socket;
    this.#writing = writing;
    this.#incoming = new Incoming(socket);
    socket.on('data', (bytes) => {
      this.#incoming.arrive(bytes);
    });
    socket.on('error', (error) => {
      this.#lost(error.message, error);
    });
    socket.on('end', () => {
      this.#lost('the other side hung up');
    });
    socket.on('close', () => {
      this.#lost('the other side hung up');
    });
  }

  write(bytes: Uint8Array): Promise<void> {
    if (this.#incoming.ended !== undefined) return Promise.reject(this.#incoming.ended);
    return new Promise((resolve, reject) => {
      const timer = setTimeout(() => {
        reject(this.#lost(`it took nothing of what was sent for ${this.#writing} s`));
        this.#socket.destroy();
      }, this.#writing * 1000);
      this.#socket.write(bytes, (error) => {
        clearTimeout(timer);
        if (error) reject(this.#lost(error.message, error));
        else resolve();
      });
    });
  }

  receive(within: Seconds): Promise<Uint8Array | undefined> {
    return this.#incoming.take(within);
  }

  /**
   * Says goodbye and waits a moment for the other side to do the same: a socket destroyed with bytes unread
   * is reset, and a reset may rob the instrument of the last message, which may be the one that makes it safe.
   */
  close(): Promise<void> {
    const socket = this.#socket;
    this.#lost('it was closed here');
    if (socket.closed) return Promise.resolve();
    return new Promise((resolve) => {
      const timer = setTimeout(() => socket.destroy(), goodbye * 1000);
      socket.once('close', () => {
        clearTimeout(timer);
        resolve();
      });
      socket.resume();
      socket.end();
    });
  }

  #lost(reason: string, cause?: unknown): ConnectionLostError {
    const error = new ConnectionLostError({ address: this.address, reason, cause });
    this.#incoming.end(error);
    return error;
  }
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
