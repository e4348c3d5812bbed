import type { Clock } from '../clock/clock.js';
import type { Wire } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connection } from './connection.js';
import { ReplyReader } from './reply-reader.js';

export interface Patience {
  /** Counted from here. */
  readonly since: Seconds;
  /** Longest silence. */
  readonly silence: Seconds;
  /** Longest wait in all, however much comes. */
  readonly atMost: Seconds;
}

/** What was on the line though nobody had asked. */
export interface Unasked {
  readonly size: number;
  /** Its first bytes. */
  readonly begins: Uint8Array;
  /** It stopped in the middle of a reply, or did not stop: more of it may come. */
  readonly unfinished: boolean;
}

/** More than this is not waited out. */
const mostUnasked = 1024 * 1024;

/**
 * Messages out and replies in over one connection, with the ends of line and the gap. It knows nothing of
 * which reply belongs to which message.
 */
export class Line {
  readonly address: string;
  readonly #connection: Connection;
  readonly #wire: Wire;
  readonly #clock: Clock;
  readonly #reader: ReplyReader;
  #quietSince = -Infinity;
  /** The instrument hears nothing before. */
  #deafUntil = -Infinity;
  #sentAt = -Infinity;

  constructor(connection: Connection, wire: Wire, clock: Clock) {
    this.address = connection.address;
    this.#connection = connection;
    this.#wire = wire;
    this.#clock = clock;
    this.#reader = new ReplyReader(connection.address, wire.replyEnd);
  }

  get sentAt(): Seconds {
    return this.#sentAt;
  }

  /**
   * Sends a message as soon as the instrument will hear it; after it, it hears nothing for the `rest`.
   * @throws ConnectionLostError
   */
  async send(message: string, rest: Seconds = 0): Promise<void> {
    const pause = Math.max(this.#quietSince + this.#wire.gap, this.#deafUntil) - this.#clock.now();
    if (pause > 0) await this.#clock.sleep(pause);
    const bytes = Buffer.from(message + this.#wire.sendEnd, 'latin1');
    await this.#connection.write(bytes);
    this.#sentAt = this.#quietSince = this.#clock.now();
    this.#deafUntil = this.#sentAt + rest;
  }

  /**
   * The next reply as `cut` takes it from the reader, or undefined when it did not come in time.
   * @throws ConnectionLostError, and whatever `cut` throws
   */
  async reply<Reply>(
    cut: (reader: ReplyReader) => Reply | undefined,
    { since, silence, atMost }: Patience,
  ): Promise<Reply | undefined> {
    const end = since + atMost;
    let deadline = Math.min(since + silence, end);
    for (;;) {
      const reply = cut(this.#reader);
      if (reply !== undefined) return reply;
      const left = deadline - this.#clock.now();
      const bytes = left > 0 ? await this.#connection.receive(left) : undefined;
      if (bytes === undefined) return undefined;
      this.#quietSince = this.#clock.now();
      this.#reader.push(bytes);
      deadline = Math.min(this.#clock.now() + silence, end);
    }
  }

  /** What has come of a reply that is not whole. */
  begun(): Uint8Array {
    return this.#reader.discard();
  }

  /** Throws away what is on the line, without waiting for more. */
  async clear(): Promise<Unasked> {
    let last = this.#reader.discard();
    let begins = last;
    let size = last.length;
    while (size <= mostUnasked) {
      const bytes = await this.#connection.receive(0);
      if (bytes === undefined) break;
      this.#quietSince = this.#clock.now();
      if (size === 0) begins = bytes;
      size += bytes.length;
      last = bytes;
    }
    return { size, begins, unfinished: size > mostUnasked || !this.#isWhole(last) };
  }

  #isWhole(bytes: Uint8Array): boolean {
    const text = Buffer.from(bytes.subarray(-16)).toString('latin1');
    return text === '' || text.endsWith(this.#wire.replyEnd) || text.endsWith('\n');
  }
}
