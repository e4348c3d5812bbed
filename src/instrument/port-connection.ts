import type { Duplex } from 'node:stream';
import type { Seconds } from '../quantity/quantity.js';
import { ConnectionLostError } from './connection-errors.js';
import type { Connection } from './connection.js';
import { Incoming } from './incoming.js';
import type { Notice } from './notice.js';

/** A port of this machine that is open, and how it is closed. */
export interface OpenPort {
  /** As the bench file writes it. */
  readonly address: string;
  readonly stream: Duplex;
  /** How long a byte is on its way out once the port has taken it. */
  readonly perByte?: Seconds;
  readonly remark?: Notice | undefined;
  /** How long it may take nothing of what is written. */
  readonly writing: Seconds;
  /** What it means when the port closes of itself. */
  readonly gone: string;
  /** Closes in good order, and says when that is done. */
  hangUp(done: () => void): void;
  /** Closes at once, where that is possible. */
  cut(): void;
}

/** How long closing in good order may take. */
const goodbye: Seconds = 0.25;

/** What every port that pushes bytes at us has in common. */
export class PortConnection implements Connection {
  readonly address: string;
  readonly remark: Notice | undefined;
  readonly #port: OpenPort;
  readonly #incoming: Incoming;
  #closed: Promise<void> | undefined;

  constructor(port: OpenPort) {
    this.address = port.address;
    this.remark = port.remark;
    this.#port = port;
    this.#incoming = new Incoming(port.stream);
    port.stream.on('data', (bytes: Uint8Array) => {
      this.#incoming.arrive(bytes);
    });
    port.stream.on('error', (error) => {
      this.#lost(error.message, error);
    });
    const gone = (error?: unknown): void => {
      this.#lost(port.gone, error instanceof Error ? error : undefined);
    };
    port.stream.on('end', gone);
    port.stream.on('close', gone);
  }

  write(bytes: Uint8Array): Promise<void> {
    if (this.#incoming.ended !== undefined) return Promise.reject(this.#incoming.ended);
    return new Promise((resolve, reject) => {
      const timer = setTimeout(() => {
        reject(this.#lost(`it took nothing of what was sent for ${this.#port.writing} s`));
        this.#port.cut();
      }, this.#port.writing * 1000);
      this.#port.stream.write(bytes, (error) => {
        clearTimeout(timer);
        if (error) reject(this.#lost(error.message, error));
        else this.#untilOut(bytes.length, resolve);
      });
    });
  }

  receive(within: Seconds): Promise<Uint8Array | undefined> {
    return this.#incoming.take(within);
  }

  close(): Promise<void> {
    this.#closed ??= this.#sayGoodbye();
    return this.#closed;
  }

  /** A port takes bytes faster than it sends them, and pauses count from when they are out. */
  #untilOut(count: number, done: () => void): void {
    const { perByte } = this.#port;
    if (perByte === undefined) done();
    else setTimeout(done, perByte * count * 1000);
  }

  #sayGoodbye(): Promise<void> {
    this.#lost('it was closed here');
    return new Promise((resolve) => {
      const timer = setTimeout(() => {
        this.#port.cut();
        resolve();
      }, goodbye * 1000);
      this.#port.hangUp(() => {
        clearTimeout(timer);
        resolve();
      });
    });
  }

  #lost(reason: string, cause?: unknown): ConnectionLostError {
    const error = new ConnectionLostError({ address: this.address, reason, cause });
    this.#incoming.end(error);
    return error;
  }
}
