import { type Clock, isSettable, type SettableClock } from '../clock/clock.js';
import type { Seconds } from '../quantity/quantity.js';

/** The clocks of recording and replay agree to rounding, no better. */
const rounding: Seconds = 1e-9;

/**
 * The time of one replayed dialogue. Its own begins at 0 s, wherever the clock is, and passes by waiting.
 * Once it has begun at a moment of a run, it is that of the clock, where the clock can be set: then all
 * dialogues of a run keep step, and no moment is a sum of waits.
 */
export class ReplayTime {
  readonly #clock: Clock;
  #reached: Seconds = 0;
  #run: SettableClock | undefined;

  constructor(clock: Clock) {
    this.#clock = clock;
  }

  /** What comes now came at that moment of a run. */
  begin(t: Seconds): void {
    if (isSettable(this.#clock)) this.#run = this.#clock;
    this.reach(t);
  }

  reach(t: Seconds): void {
    this.#reached = Math.max(this.#reached, t);
    this.#run?.reach(t);
  }

  /** Without waiting: what was found then, between two messages, is found now, however long that took. */
  isWithin(t: Seconds, within: Seconds): boolean {
    return within <= 0 || t <= (this.#run?.now() ?? this.#reached) + within + rounding;
  }

  async waitUntil(t: Seconds, within: Seconds): Promise<void> {
    if (this.#run === undefined && within > 0) await this.#clock.sleep(Math.max(0, t - this.#reached));
    this.reach(t);
  }

  async wait(within: Seconds): Promise<void> {
    this.#reached += Math.max(0, within);
    await this.#clock.sleep(within);
  }
}
