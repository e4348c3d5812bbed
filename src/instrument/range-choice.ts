import type { Range } from '../files/driver.js';
import type { Measurement } from './scpi-number.js';

/** Of what a range holds: from here on the next wider one is chosen; up to here one that is smaller. */
const full = 0.95;
const wellWithin = 0.8;

/**
 * Which of a meter's ranges the next reading is to be taken on: the widest at first, then the smallest that
 * holds what was read last. Between what is chosen and what is left there is room, so that a value at the
 * edge of a range does not go to and fro.
 */
export class RangeChoice {
  readonly #ranges: readonly Range[];
  #chosen: number;

  constructor(ranges: readonly Range[]) {
    this.#ranges = ranges;
    this.#chosen = ranges.length - 1;
  }

  /** From 0, the smallest. */
  get chosen(): number {
    return this.#chosen;
  }

  /**
   * Takes note of what was read on the chosen range. It counts, unless it is more than that range holds and
   * there is a wider one: then that is chosen, and it is to be read again.
   */
  took(measurement: Measurement): 'counts' | 'read-again' {
    if (measurement.kind === 'not-a-number') return 'counts';
    const size = measurement.kind === 'value' ? Math.abs(measurement.value) : Number.POSITIVE_INFINITY;
    const widest = this.#ranges.length - 1;
    if (size > this.#holds(this.#chosen) && this.#chosen < widest) {
      this.#chosen += 1;
      return 'read-again';
    }
    if (size > full * this.#holds(this.#chosen)) {
      this.#chosen = Math.min(this.#chosen + 1, widest);
    } else {
      const smaller = this.#ranges.findIndex(({ upTo }) => size <= wellWithin * upTo);
      if (smaller !== -1) this.#chosen = Math.min(this.#chosen, smaller);
    }
    return 'counts';
  }

  #holds(range: number): number {
    return this.#ranges[range]?.upTo ?? Number.POSITIVE_INFINITY;
  }
}
