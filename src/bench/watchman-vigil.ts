import type { Seconds } from '../quantity/quantity.js';

/**
 * What the runner says to the watchman, a word a line: that it still beats; that the input is about to be
 * switched on; that it was read back to be off; that the run is over and the watchman may go.
 */
export const words = ['beat', 'on', 'off', 'done'] as const;
export type Word = (typeof words)[number];

/** How often a runner says that it still beats. */
export const beatEvery: Seconds = 0.5;
/** How long it may say nothing while the input is on, before it counts as hung. */
export const longestSilence: Seconds = 3.5;
/** How often the watchman looks. */
export const lookEvery: Seconds = 0.5;
/** The most that one look counts for: while the watchman itself slept, or got no turn, nothing was missed. */
const mostOfALook: Seconds = 1;

/** What the watchman knows of the runner: nothing but its words and the time. */
export class Vigil {
  #input: 'on' | 'off' = 'off';
  #isDone = false;
  #wasHeard = false;
  #silence: Seconds = 0;
  #lookedAt: Seconds;

  constructor(now: Seconds) {
    this.#lookedAt = now;
  }

  hear(word: Word): void {
    this.#wasHeard = true;
    if (word === 'on' || word === 'off') this.#input = word;
    if (word === 'done') this.#isDone = true;
  }

  get isDone(): boolean {
    return this.#isDone;
  }

  /**
   * Whether a runner that is still there hangs: a stopped process, a blocked loop. One that is slow with the
   * input off is left alone. A machine that was suspended, or too busy for either of us, costs a runner one
   * look's worth of patience and no more.
   */
  hangs(now: Seconds): boolean {
    const sinceLook = Math.min(now - this.#lookedAt, mostOfALook);
    this.#silence = this.#wasHeard ? 0 : this.#silence + sinceLook;
    this.#wasHeard = false;
    this.#lookedAt = now;
    return this.#input === 'on' && this.#silence > longestSilence;
  }
}
