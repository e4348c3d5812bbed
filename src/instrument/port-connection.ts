import { performance } from 'node:perf_hooks';
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
  /** When all that was written is out, in milliseconds of the machine's clock. */
  #outAt = 0;
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

  write(bytes: Uint8Array): Promise<Seconds> {
    if (this.#incoming.ended !== undefined) return Promise.reject(this.#incoming.ended);
    return new Promise((resolve, reject) => {
      const timer = setTimeout(() => {
        reject(this.#lost(`it took nothing of what was sent for ${this.#port.writing} s`));
        this.#port.cut();
      }, this.#port.writing * 1000);
      this.#port.stream.write(bytes, (error) => {
        clearTimeout(timer);
        if (error) reject(this.#lost(error.message, error));
        else resolve(this.#onTheWay(bytes.length));
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

  /** A port takes bytes faster than it sends them: so long these are behind, and what it took before them. */
  #onTheWay(count: number): Seconds {
    const { perByte } = this.#port;
    if (perByte === undefined) return 0;
    const now = performance.now();
    this.#outAt = Math.max(this.#outAt, now) + perByte * count * 1000;
    return (this.#outAt - now) / 1000;
  }

  async #sayGoodbye(): Promise<void> {
    const isThere = this.#incoming.ended === undefined;
    this.#lost('it was closed here');
    const left = this.#outAt - performance.now();
    if (isThere && left > 0) await new Promise((resolve) => setTimeout(resolve, left));
    await this.#hangUp();
  }

  #hangUp(): Promise<void> {
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
