import type { Clock } from './clock.js';
import { VirtualClock } from './virtual-clock.js';

/** In seconds; below it a timer of the machine is too coarse to be worth waiting for. */
const leastWait = 0.004;
/** What a busy machine may be behind, in seconds; more is let go, or it would rush once it has time again. */
const mostBehind = 0.1;
/** The longest that anybody looks at a simulated run, in seconds. */
const watchable = 60;

/** So that what is planned passes in about a minute, and never slower than it would at a real bench. */
export function paceFor(planned: number): number {
  return Math.max(1, planned / watchable);
}

/**
 * Virtual time that can be watched: what passes on it takes real time too, `pace` times shorter. What is computed
 * takes none, so whoever goes by it sees the same moments as on a virtual clock, to the last digit.
 */
export class PacedClock extends VirtualClock {
  readonly #pace: number;
  readonly #real: Clock;
  /** The real moment at which what passed so far has had its due. */
  #due: number;
  #paid = 0;

  /** @param pace virtual seconds in a real one. */
  constructor(began: Date, pace: number, real: Clock) {
    super(began);
    this.#pace = pace;
    this.#real = real;
    this.#due = real.now();
  }

  override async sleep(seconds: number, signal?: AbortSignal): Promise<void> {
    await super.sleep(seconds, signal);
    const real = this.#real.now();
    this.#due = Math.max(this.#due, real - mostBehind) + (this.now() - this.#paid) / this.#pace;
    this.#paid = this.now();
    if (this.#due - real >= leastWait) await this.#real.sleep(this.#due - real, signal);
  }
}
