import type { Clock } from '../clock/clock.js';
import { ConnectionLostError } from '../instrument/connection-errors.js';
import type { Connection } from '../instrument/connection.js';
import type { Seconds } from '../quantity/quantity.js';
import { MessageSplitter } from './message-splitter.js';
import type { VirtualInstrument } from './virtual-instrument.js';

/** From the instrument to the program: an interface, a wire and an operating system. */
export const REPLY_LATENCY: Seconds = 0.001;

/** Closer than this, two moments are the same one: sums of seconds are rounded. */
const SAME_MOMENT: Seconds = 1e-9;

/**
 * A line to one virtual instrument. Bytes in, bytes out; a wait moves the clock to when the reply is there.
 * `began` is the clock's time at which the bench's time was 0.
 */
export class SimulatedConnection implements Connection {
  readonly address: string;
  readonly #instrument: VirtualInstrument;
  readonly #clock: Clock;
  readonly #began: Seconds;
  readonly #splitter = new MessageSplitter();
  readonly #underway: { readonly due: Seconds; readonly bytes: Uint8Array }[] = [];
  /** When it drops: at the first fault that does so after it was opened. */
  readonly #lostFrom: Seconds;
  #closed = false;

  constructor(facts: { address: string; instrument: VirtualInstrument; clock: Clock; began: Seconds }) {
    this.address = facts.address;
    this.#instrument = facts.instrument;
    this.#clock = facts.clock;
    this.#began = facts.began;
    const opened = this.#now();
    this.#lostFrom = Math.min(
      Number.POSITIVE_INFINITY,
      ...facts.instrument.gone.filter(({ until }) => until > opened).map(({ from }) => from),
    );
  }

  write(bytes: Uint8Array): Promise<Seconds> {
    const now = this.#now();
    if (this.#closed || now >= this.#lostFrom - SAME_MOMENT) return Promise.reject(this.#lost());
    for (const incoming of this.#splitter.feed(bytes)) {
      const { reply, readyAt } = this.#instrument.hear(incoming, now);
      if (reply !== undefined) {
        this.#underway.push({ due: readyAt + REPLY_LATENCY, bytes: new TextEncoder().encode(reply) });
      }
    }
    return Promise.resolve(0);
  }

  async receive(within: Seconds): Promise<Uint8Array | undefined> {
    const deadline = this.#now() + within;
    for (;;) {
      if (this.#closed) throw this.#lost();
      const arrived = this.#takeArrived();
      if (arrived !== undefined) return arrived;
      const now = this.#now();
      if (now >= this.#lostFrom - SAME_MOMENT) throw this.#lost();
      if (now >= deadline - SAME_MOMENT) return undefined;
      const due = this.#underway[0]?.due ?? Number.POSITIVE_INFINITY;
      await this.#clock.sleep(Math.min(due, this.#lostFrom, deadline) - now);
    }
  }

  close(): Promise<void> {
    this.#closed = true;
    this.#underway.length = 0;
    return Promise.resolve();
  }

  #now(): Seconds {
    return this.#clock.now() - this.#began;
  }

  #takeArrived(): Uint8Array | undefined {
    const now = this.#now() + SAME_MOMENT;
    const still = this.#underway.findIndex(({ due }) => due > now || due > this.#lostFrom);
    const arrived = this.#underway.splice(0, still === -1 ? this.#underway.length : still);
    return arrived.length === 0 ? undefined : Buffer.concat(arrived.map(({ bytes }) => bytes));
  }

  #lost(): ConnectionLostError {
    return new ConnectionLostError({
      address: this.address,
      reason: this.#closed ? 'it was closed here' : 'the simulated instrument is gone',
    });
  }
}
