import type { Clock } from '../clock/clock.js';
import type { Wire } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connection } from './connection.js';
import { ReplyReader } from './reply-reader.js';
import { type Missing, SideTalk } from './side-talk.js';

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
  /** What was due after a message before, and has not come. */
  readonly missing?: Missing | undefined;
}

/** More than this is not waited out. */
const mostUnasked = 1024 * 1024;

/**
 * Messages out and replies in over one connection, with the ends of line, the pauses, and what an instrument
 * sends besides its replies. It knows nothing of which reply belongs to which message.
 */
export class Line {
  readonly address: string;
  readonly #connection: Connection;
  readonly #wire: Wire;
  readonly #clock: Clock;
  readonly #reader: ReplyReader;
  readonly #sideTalk: SideTalk;
  /** When the port took the last message. */
  #takenAt = -Infinity;
  /** When the last message was out, or will be. */
  #outAt = -Infinity;
  /** For so long after that the instrument hears nothing. */
  #rest: Seconds = 0;
  #heardAt = -Infinity;
  #missing: Missing | undefined;
  /** Something was waited for in vain, and nothing has come since: what is only told does not wait again. */
  #isSilent = false;

  constructor(connection: Connection, wire: Wire, clock: Clock) {
    this.address = connection.address;
    this.#connection = connection;
    this.#wire = wire;
    this.#clock = clock;
    this.#reader = new ReplyReader(connection.address, wire.replyEnd);
    this.#sideTalk = new SideTalk(wire);
  }

  /** When the last message was out; where its port is slow, that may be yet to come. */
  get outAt(): Seconds {
    return this.#outAt;
  }

  /** The last message was not repeated, though it should have been. */
  get isUnrepeated(): boolean {
    return this.#sideTalk.isUnrepeated;
  }

  /**
   * Sends a message as soon as the instrument will hear it; after it, it hears nothing for the `rest`. What is
   * due after the last one is waited for, but no longer than a reply.
   * @throws ConnectionLostError
   */
  async send(message: string, rest: Seconds = 0): Promise<void> {
    await this.#untilItHears(this.#isSilent ? 0 : this.#wire.timeout);
    const bytes = Buffer.from(message + this.#wire.sendEnd, 'latin1');
    const onTheWay = await this.#connection.write(bytes);
    this.#takenAt = this.#clock.now();
    this.#outAt = this.#takenAt + onTheWay;
    this.#rest = rest;
    this.#sideTalk.sent(message);
  }

  /**
   * The next reply as `cut` takes it from the reader, or undefined when it did not come in time. Where `cut`
   * takes something and gives nothing, it has passed over a reply, and is asked for the next one.
   * @throws ConnectionLostError, and whatever `cut` throws
   */
  async reply<Reply>(
    cut: (reader: ReplyReader) => Reply | undefined,
    { since, silence, atMost }: Patience,
  ): Promise<Reply | undefined> {
    const end = since + atMost;
    let deadline = Math.min(since + silence, end);
    for (;;) {
      const reply = this.#cut(cut);
      if (reply !== undefined) {
        // It was out before it was answered, whatever the speed of its port says: not every port keeps to that.
        this.#outAt = Math.min(this.#outAt, Math.max(this.#takenAt, this.#heardAt));
        return reply;
      }
      const left = deadline - this.#clock.now();
      const bytes = left > 0 ? await this.#connection.receive(left) : undefined;
      if (bytes === undefined) return undefined;
      this.#received(bytes);
      deadline = Math.min(this.#clock.now() + silence, end);
    }
  }

  /** The last reply belongs to the last message: nothing of an earlier one is still to come. */
  caughtUp(): void {
    this.#sideTalk.caughtUp();
  }

  /** What has come of a reply that is not whole. */
  begun(): Uint8Array {
    return this.#sideTalk.begun(this.#reader);
  }

  /**
   * Throws away what is on the line, once the instrument will hear the next message. What is due is waited
   * for; what is not is told.
   * @throws ConnectionLostError
   */
  async clear(): Promise<Unasked> {
    await this.#untilItHears(this.#wire.timeout);
    let { size, begins } = this.#sideTalk.overheard();
    let last: Uint8Array = Buffer.alloc(0);
    for (;;) {
      const foreign = this.#sideTalk.discard(this.#reader);
      if (size === 0) begins = foreign;
      size += foreign.length;
      if (foreign.length > 0) last = foreign;
      const bytes = size > mostUnasked ? undefined : await this.#connection.receive(0);
      if (bytes === undefined) break;
      this.#received(bytes);
    }
    const missing = this.#missing;
    this.#missing = undefined;
    return { size, begins, unfinished: size > mostUnasked || !this.#isWhole(last), missing };
  }

  #cut<Reply>(cut: (reader: ReplyReader) => Reply | undefined): Reply | undefined {
    while (this.#sideTalk.replyIsNext(this.#reader)) {
      const { held } = this.#reader;
      const reply = cut(this.#reader);
      if (this.#reader.held === held) return undefined;
      this.#sideTalk.answered();
      if (reply !== undefined) return reply;
    }
    return undefined;
  }

  async #untilItHears(patience: Seconds): Promise<void> {
    await this.#untilSettled(patience);
    const gapEnd = Math.max(this.#outAt, this.#heardAt) + this.#wire.gap;
    const pause = Math.max(gapEnd, this.#outAt + this.#rest) - this.#clock.now();
    if (pause > 0) await this.#clock.sleep(pause);
  }

  /** Waits for what is due after the last message. Where that does not come, it goes on without. */
  async #untilSettled(patience: Seconds): Promise<void> {
    const end = Math.max(this.#heardAt, this.#outAt + this.#rest) + patience;
    let afterwards = 0;
    while (!this.#sideTalk.isSettled(this.#reader)) {
      const left = Math.max(0, end - this.#clock.now());
      // It may have come long ago, and nobody has looked; whoever does not stop talking is not heard out.
      const bytes = afterwards > mostUnasked ? undefined : await this.#connection.receive(left);
      if (left === 0) afterwards += bytes?.length ?? 0;
      if (bytes === undefined) {
        const missing = this.#sideTalk.giveUp();
        this.#missing ??= missing;
        this.#isSilent = missing !== undefined;
        return;
      }
      this.#received(bytes);
    }
  }

  #received(bytes: Uint8Array): void {
    this.#heardAt = this.#clock.now();
    this.#isSilent = false;
    this.#reader.push(bytes);
  }

  #isWhole(bytes: Uint8Array): boolean {
    const text = Buffer.from(bytes.subarray(-16)).toString('latin1');
    return text === '' || text.endsWith(this.#wire.replyEnd) || text.endsWith('\n');
  }
}
