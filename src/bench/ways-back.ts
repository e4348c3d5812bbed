import type { ConnectionAddress } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import type { WayBack } from '../instrument/gap.js';
import type { Connect } from '../instrument/connect.js';
import type { Audience } from './audience.js';

/** The ways back to the instruments of one bench, and a count of how often one had to be gone. */
export class WaysBack {
  readonly #connect: Connect;
  readonly #signal: AbortSignal | undefined;
  readonly #audience: Audience;
  #gaps = 0;
  #latest: string | undefined;
  #givenUp = false;

  constructor(facts: {
    readonly connect: Connect;
    readonly signal: AbortSignal | undefined;
    readonly audience: Audience;
  }) {
    this.#connect = facts.connect;
    this.#signal = facts.signal;
    this.#audience = facts.audience;
  }

  /** Of all instruments together. */
  get gaps(): number {
    return this.#gaps;
  }

  /** What was the matter the last time, in words. */
  get latest(): string | undefined {
    return this.#latest;
  }

  /** From now on what is lost stays lost. */
  giveUp(): void {
    this.#givenUp = true;
  }

  to(address: ConnectionAddress, driver: Driver, post: string): WayBack {
    return {
      connect: (within) => this.#connect(address, driver, post, within),
      // Making safe has its own way: what makes safe is told before anything is asked.
      isWanted: () => !this.#givenUp && this.#audience.isHeeded,
      ...(this.#signal && { signal: this.#signal }),
      onGap: () => {
        this.#gaps += 1;
      },
      onNotice: (text) => {
        this.#latest = text;
        this.#audience.notice(text);
      },
    };
  }
}
