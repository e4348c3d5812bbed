import type { Post } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Dialect, Interpreter, MeterMode } from './dialects/dialect.js';
import { faultTime, isOn, type Spell, spellsOf } from './instrument-faults.js';
import { type InstrumentFacts, InstrumentReadings } from './instrument-readings.js';
import type { Incoming } from './message-splitter.js';
import type { Probes } from './probes.js';
import { Relays } from './relays.js';
import type { VirtualBench } from './virtual-bench.js';

/** What a relay takes to close or to open. */
const RELAY_TIME: Seconds = 0.004;

/** The range of a load or of a source whose driver gives no ratings. */
const USUAL_RANGE = { current: 60, voltage: 150 };

export interface Answer {
  /** With its end of line. */
  readonly reply: string | undefined;
  /** When the instrument is done with the message, and its reply begins to travel. */
  readonly readyAt: Seconds;
}

/** One instrument: a way of speaking, what it does when told, the time it takes, and how it fails. */
export class VirtualInstrument {
  readonly post: Post;
  /** The name of its way of speaking. */
  readonly dialect: string;
  /** When its connections drop, and nobody can open one. */
  readonly gone: readonly Spell[];
  readonly #silent: readonly Spell[];
  /** When it loses its power next; those that it has lived through are gone from here. */
  readonly #restarts: Spell[];
  /** When it begins to repeat its last readings. */
  readonly #stuckFrom: Seconds;
  /** The last reading of each quantity, for one that is stuck. */
  readonly #last = new Map<string, number>();
  readonly #bench: VirtualBench;
  readonly #probes: Probes;
  readonly #replyEnd: string;
  readonly #dialect: Dialect;
  readonly #driver: Driver;
  #interpreter: Interpreter;
  readonly #readings: InstrumentReadings;
  readonly #relays: Relays;
  #mode: MeterMode = 'voltage';
  /** When someone at its panel sets the meter to resistance; never, once that is done. */
  #panelAt: Seconds;
  /** One thing after the other: when it has done all that it was told. */
  #free: Seconds = 0;

  constructor(facts: InstrumentFacts) {
    const { post, bench, probes, simulation, group, driver, dialect } = facts;
    const { role } = dialect;
    const fault = (what: Parameters<typeof faultTime>[3]): Seconds =>
      faultTime(simulation, group, post, what);
    this.post = post;
    this.dialect = dialect.name;
    const spells = (...names: Parameters<typeof spellsOf>[3][]): readonly Spell[] =>
      spellsOf(simulation, group, post, ...names);
    this.gone = spells(`${role}-lost`, `${role}-restarted`);
    this.#silent = spells(`${role}-silent`);
    this.#restarts = [...spells(`${role}-restarted`)];
    this.#stuckFrom = role === 'load' || role === 'meter' ? fault(`${role}-stuck`) : Number.POSITIVE_INFINITY;
    this.#panelAt = fault('meter-wrong-mode');
    this.#bench = bench;
    this.#probes = probes;
    this.#replyEnd = dialect.replyEnd;
    this.#readings = new InstrumentReadings(facts);
    const stuck = fault('scanner-stuck');
    const unnoticed = fault('scanner-stuck-unnoticed');
    this.#relays = new Relays({ from: Math.min(stuck, unnoticed), noticed: stuck <= unnoticed });
    this.#dialect = dialect;
    this.#driver = driver;
    this.#interpreter = this.#wake(dialect, driver);
  }

  isGoneAt(at: Seconds): boolean {
    return isOn(this.gone, at);
  }

  /** Takes what has come in at a moment of the bench's time. A silent instrument neither answers nor obeys. */
  hear(incoming: Incoming, at: Seconds): Answer {
    this.#free = Math.max(this.#free, at);
    this.#liveThroughRestarts();
    if (isOn(this.#silent, this.#free)) return { reply: undefined, readyAt: this.#free };
    if (this.#free >= this.#panelAt) {
      this.#mode = 'resistance';
      this.#panelAt = Number.POSITIVE_INFINITY;
    }
    if (incoming.kind === 'overrun') {
      this.#interpreter.overrun();
      return { reply: undefined, readyAt: this.#free };
    }
    const { reply } = this.#interpreter.hear(incoming.text);
    return { reply: this.#spoken(incoming.text, reply), readyAt: this.#free };
  }

  /** It repeats a message, ends its lines and asks for the next message where and as its driver says. */
  #spoken(message: string, reply: string | undefined): string | undefined {
    const { echo = false, prompt = '', replyEnd } = this.#driver.wire;
    const end = this.#replyEnd.endsWith(replyEnd) ? this.#replyEnd : replyEnd;
    const lines = [...(echo ? [message] : []), ...(reply === undefined ? [] : [reply])];
    const spoken = lines.map((line) => line + end).join('') + prompt;
    return spoken === '' ? undefined : spoken;
  }

  #wake(dialect: Dialect, { ratings }: Driver): Interpreter {
    const identity = `railproof,simulated ${dialect.role},K-bench,${serialNumber(this.post)}`;
    switch (dialect.role) {
      case 'load':
        return dialect.wake({
          identity,
          most: {
            current: ratings.current ?? USUAL_RANGE.current,
            voltage: ratings.voltage ?? USUAL_RANGE.voltage,
          },
          state: () => this.#bench.loadAt(this.#free),
          set: (change) => {
            this.#bench.setLoad(change, this.#free);
          },
          measure: (what) => this.#taking(what, (at) => this.#readings.read(what, at)),
        });
      case 'meter':
        return dialect.wake({
          identity,
          mode: () => this.#mode,
          setMode: (mode) => {
            this.#mode = mode;
          },
          measure: (what) =>
            this.#taking(what, (at) =>
              what === 'voltage' ? this.#readings.read(what, at) : this.#readings.ohms(at),
            ),
        });
      case 'scanner':
        return dialect.wake({
          identity,
          closed: () => this.#relays.said,
          close: (channels) => {
            this.#relays.close(channels, this.#free);
            this.#relaysMoved();
          },
          open: (channels) => {
            this.#relays.open(channels, this.#free);
            this.#relaysMoved();
          },
        });
      case 'thermometer':
        return dialect.wake({
          identity,
          measure: () => this.#taking('temperature', (at) => this.#readings.temperature(at)),
        });
      case 'source':
        return dialect.wake({
          identity,
          most: {
            current: ratings.current ?? USUAL_RANGE.current,
            voltage: ratings.voltage ?? USUAL_RANGE.voltage,
          },
          state: () => this.#bench.sourceAt(this.#free),
          set: (change) => {
            this.#bench.setSource(change, this.#free);
          },
          measure: (what) => this.#taking(what, (at) => this.#readings.ofSource(what, at)),
        });
    }
  }

  /** It wakes as it did the first time; what a load does of that, the bench has seen to. */
  #liveThroughRestarts(): void {
    for (
      let [next] = this.#restarts;
      next !== undefined && next.from <= this.#free;
      [next] = this.#restarts
    ) {
      this.#restarts.shift();
      this.#mode = 'voltage';
      this.#relays.open('all', next.from);
      if (this.#dialect.role === 'scanner') this.#probes.close(this.#relays.closed, next.from);
      this.#interpreter = this.#wake(this.#dialect, this.#driver);
    }
  }

  #relaysMoved(): void {
    this.#free += RELAY_TIME;
    this.#probes.close(this.#relays.closed, this.#free);
  }

  /** A reading takes its time, be it an old one. */
  #taking(what: string, read: (at: Seconds) => number): number {
    const from = this.#free;
    this.#free = from + this.#readings.time;
    const old = from >= this.#stuckFrom ? this.#last.get(what) : undefined;
    const value = old ?? read(from);
    this.#last.set(what, value);
    return value;
  }
}

/** The places' own meters are told apart by theirs. */
function serialNumber(post: Post): number {
  return post.startsWith('meter-') ? 1 + Number(post.slice('meter-'.length)) : 1;
}
