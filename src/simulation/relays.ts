import type { Seconds } from '../quantity/quantity.js';

/** How the relays of a scanner fail, and from when on. */
export interface StuckRelays {
  readonly from: Seconds;
  /** Whether the scanner says what is closed, or what it was told to close. */
  readonly noticed: boolean;
}

/**
 * The relays of a scanner. A stuck one stays closed, whatever the scanner is told; where none is closed when
 * it happens, the next one to be closed is the one that sticks.
 */
export class Relays {
  readonly #stuck: StuckRelays;
  #told: readonly number[] = [];
  #closed: readonly number[] = [];

  constructor(stuck: StuckRelays) {
    this.#stuck = stuck;
  }

  /** What is really closed, in rising order. */
  get closed(): readonly number[] {
    return this.#closed;
  }

  /** What the scanner says is closed. */
  get said(): readonly number[] {
    return this.#stuck.noticed ? this.#closed : this.#told;
  }

  close(channels: readonly number[], at: Seconds): void {
    this.#move(
      [...new Set([...this.#told, ...channels])].sort((one, other) => one - other),
      at,
    );
  }

  open(channels: readonly number[] | 'all', at: Seconds): void {
    this.#move(channels === 'all' ? [] : this.#told.filter((channel) => !channels.includes(channel)), at);
  }

  #move(told: readonly number[], at: Seconds): void {
    this.#told = told;
    if (at >= this.#stuck.from && this.#closed.length > 0) return;
    this.#closed = told;
  }
}
