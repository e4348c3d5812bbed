import { afterRealTime } from '../clock/real-timer.js';
import type { RailproofError } from '../errors/railproof-error.js';
import type { Seconds } from '../quantity/quantity.js';

/** The side that bytes come from; told to wait when more has come than anyone has taken. */
export interface Flow {
  pause(): void;
  resume(): void;
}

const most = 256 * 1024;

/**
 * What has arrived on a line and has not been taken yet: turns bytes that are pushed at us into bytes that
 * are asked for. It holds a bounded amount: from 256 KiB on, the sender is made to wait.
 *
 * Waiting is done in real time, because it is real ports that push.
 */
export class Incoming {
  readonly #flow: Flow;
  #chunks: Uint8Array[] = [];
  #size = 0;
  #paused = false;
  #ended: RailproofError | undefined;
  #wake: (() => void) | undefined;

  constructor(flow: Flow) {
    this.#flow = flow;
  }

  arrive(bytes: Uint8Array): void {
    if (bytes.length === 0 || this.#ended !== undefined) return;
    this.#chunks.push(bytes);
    this.#size += bytes.length;
    if (this.#size >= most && !this.#paused) {
      this.#paused = true;
      this.#flow.pause();
    }
    this.#wake?.();
  }

  /** Nothing more will arrive; the first reason is kept. */
  end(reason: RailproofError): void {
    this.#ended ??= reason;
    this.#wake?.();
  }

  get ended(): RailproofError | undefined {
    return this.#ended;
  }

  /**
   * All that has arrived, at least one byte; undefined when none came in time.
   * @throws the reason given to `end`, once everything before it has been taken.
   */
  async take(within: Seconds): Promise<Uint8Array | undefined> {
    if (this.#size === 0 && this.#ended === undefined) {
      await (within > 0 ? this.#arrival(within) : turnOfTheEventLoop());
    }
    if (this.#size > 0) return this.#all();
    if (this.#ended !== undefined) throw this.#ended;
    return undefined;
  }

  #arrival(within: Seconds): Promise<void> {
    return new Promise((resolve) => {
      const done = (): void => {
        callOff();
        // Woken after its time was over, it is done twice; the next one may be waiting by then.
        if (this.#wake === done) this.#wake = undefined;
        resolve();
      };
      // On a busy machine the time may be over before we had a turn to take in what came well within it.
      const callOff = afterRealTime(within, () => void turnOfTheEventLoop().then(done));
      this.#wake = done;
    });
  }

  #all(): Uint8Array {
    const chunks = this.#chunks;
    const all =
      chunks.length === 1 && chunks[0] !== undefined ? chunks[0] : Buffer.concat(chunks, this.#size);
    this.#chunks = [];
    this.#size = 0;
    if (this.#paused) {
      this.#paused = false;
      this.#flow.resume();
    }
    return all;
  }
}

/** Long enough for what the operating system already holds to be handed over; no waiting for more. */
async function turnOfTheEventLoop(): Promise<void> {
  for (let turn = 0; turn < 2; turn++) await new Promise((resolve) => setImmediate(resolve));
}
