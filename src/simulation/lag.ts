import type { Amperes, Seconds, Volts } from '../quantity/quantity.js';

/**
 * So many time constants fit into the settling time that the driver gives: by then a step has come to within
 * a twentieth of a thousandth of its size, which is what "settled" means to an honest maker.
 */
const TIME_CONSTANTS_IN_SETTLING = 10;

/** By how much what an instrument reads is still behind what it sees, after a step. */
export class Lag {
  readonly #timeConstant: Seconds;
  #since: Seconds = 0;
  #behind: { readonly voltage: Volts; readonly current: Amperes } = { voltage: 0, current: 0 };

  constructor(settling: Seconds) {
    this.#timeConstant = settling / TIME_CONSTANTS_IN_SETTLING;
  }

  of(what: 'voltage' | 'current', at: Seconds): number {
    if (this.#timeConstant === 0) return 0;
    return this.#behind[what] * Math.exp(-Math.max(0, at - this.#since) / this.#timeConstant);
  }

  /** What is seen has fallen at once by so much, which the readings have yet to do. */
  step(at: Seconds, fallen: { readonly voltage: Volts; readonly current: Amperes }): void {
    this.#behind = {
      voltage: this.of('voltage', at) + fallen.voltage,
      current: this.of('current', at) + fallen.current,
    };
    this.#since = at;
  }
}
