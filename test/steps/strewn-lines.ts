import type { VirtualClock } from '../../src/clock/virtual-clock.js';
import { ConnectionLostError, InstrumentUnreachableError } from '../../src/instrument/connection-errors.js';
import type { Connection } from '../../src/instrument/connection.js';
import type { Arrival } from '../instrument/fixtures/virtual-line.js';

/** What befalls a question, or its answer. */
export type Mishap =
  | { readonly kind: 'none' }
  /** The answer takes longer, and all that come after it wait. */
  | { readonly kind: 'late'; readonly by: number }
  | { readonly kind: 'garbled' }
  /** The question never arrives. */
  | { readonly kind: 'swallowed' }
  /** The connection drops before the question arrives, or after; for so long nobody can open it. */
  | { readonly kind: 'dropped'; readonly when: 'before' | 'after'; readonly for: number };

export interface Asked {
  readonly post: string;
  readonly question: string;
}

/**
 * An instrument that answers in order, on a line where things go wrong. Every number that it answers is one
 * that it has never answered before, so that each can be told from all others.
 */
export class StrewnInstrument {
  /** What each number answered. */
  readonly answered = new Map<number, Asked & { readonly nth: number }>();
  readonly #post: string;
  readonly #clock: VirtualClock;
  readonly #react: (message: string, at: number) => readonly Arrival[];
  readonly #mishap: () => Mishap;
  /** What is on its way survives a connection that is opened again, as on a serial line. */
  readonly #keeps: boolean;
  #arrivals: Arrival[] = [];
  #free = 0;
  #asked = 0;
  #goneUntil = 0;
  #current: StrewnLine | undefined;

  constructor(facts: {
    readonly post: string;
    readonly clock: VirtualClock;
    readonly react: (message: string, at: number) => readonly Arrival[];
    readonly mishap: () => Mishap;
    readonly keeps: boolean;
  }) {
    this.#post = facts.post;
    this.#clock = facts.clock;
    this.#react = facts.react;
    this.#mishap = facts.mishap;
    this.#keeps = facts.keeps;
  }

  /** How many questions it was asked so far, whether they arrived or not. */
  get asked(): number {
    return this.#asked;
  }

  open(): Connection {
    if (this.#clock.now() < this.#goneUntil) {
      throw new InstrumentUnreachableError({ address: `strewn:${this.#post}`, reason: 'nobody is there' });
    }
    if (!this.#keeps) this.#arrivals = [];
    this.#current = new StrewnLine(`strewn:${this.#post}`, this);
    return this.#current;
  }

  /** Whether the message went out; the connection may be gone after it. */
  hear(message: string): boolean {
    const now = this.#clock.now();
    if (!message.endsWith('?')) {
      this.#react(message, now);
      return true;
    }
    this.#asked += 1;
    const mishap = this.#mishap();
    if (mishap.kind === 'dropped') {
      this.#goneUntil = now + mishap.for;
      this.#current?.drop();
      if (mishap.when === 'before') return false;
    }
    if (mishap.kind === 'swallowed') return true;
    const [answer] = this.#react(message, now);
    if (answer === undefined) return true;
    this.#free = Math.max(this.#free, answer.at) + (mishap.kind === 'late' ? mishap.by : 0);
    const text =
      mishap.kind === 'garbled' ? '#~!' : this.#marked(message, Buffer.from(answer.bytes).toString());
    this.#arrivals.push({ at: this.#free, bytes: Buffer.from(`${text}\n`) });
    return true;
  }

  async receive(within: number): Promise<Uint8Array | undefined> {
    const now = this.#clock.now();
    const next = this.#arrivals[0]?.at ?? Number.POSITIVE_INFINITY;
    await this.#clock.sleep(Math.min(within, Math.max(0, next - now)));
    if (next > now + within) return undefined;
    const here = this.#arrivals.filter(({ at }) => at <= this.#clock.now() + 1e-9);
    this.#arrivals = this.#arrivals.slice(here.length);
    return Buffer.concat(here.map(({ bytes }) => bytes));
  }

  #marked(question: string, answer: string): string {
    const text = answer.trim();
    if (!/^(MEAS|READ)/.test(question)) return text;
    const marked = (Number(text) + this.#asked * 1e-7).toFixed(9);
    this.answered.set(Number(marked), { post: this.#post, question, nth: this.#asked });
    return marked;
  }
}

class StrewnLine implements Connection {
  readonly address: string;
  readonly #instrument: StrewnInstrument;
  #gone: string | undefined;

  constructor(address: string, instrument: StrewnInstrument) {
    this.address = address;
    this.#instrument = instrument;
  }

  drop(): void {
    this.#gone ??= 'it dropped';
  }

  write(bytes: Uint8Array): Promise<number> {
    const message = Buffer.from(bytes).toString('latin1').trimEnd();
    if (this.#gone === undefined && this.#instrument.hear(message)) return Promise.resolve(0);
    return Promise.reject(this.#lost());
  }

  receive(within: number): Promise<Uint8Array | undefined> {
    return this.#gone === undefined ? this.#instrument.receive(within) : Promise.reject(this.#lost());
  }

  close(): Promise<void> {
    this.#gone ??= 'it was closed here';
    return Promise.resolve();
  }

  #lost(): ConnectionLostError {
    return new ConnectionLostError({ address: this.address, reason: this.#gone ?? 'it dropped' });
  }
}
