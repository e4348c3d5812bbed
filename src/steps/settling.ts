import type { Seconds } from '../quantity/quantity.js';

interface Look {
  readonly t: Seconds;
  readonly value: number;
}

/**
 * Watches a value that settles: whether it has changed by less than `within` over the last `over` seconds,
 * by a straight line through all that was seen in them, so that no single reading decides. Keeps what
 * lies in the window and no more.
 */
export class Settling {
  readonly #within: number;
  readonly #over: Seconds;
  #window: Look[] = [];

  constructor({ within, over }: { readonly within: number; readonly over: Seconds }) {
    this.#within = within;
    this.#over = over;
  }

  add(t: Seconds, value: number): void {
    this.#window.push({ t, value });
    const keptFrom = this.#window.findLastIndex((look) => t - look.t >= this.#over);
    // The one just before the window stays: without it the window is never full.
    if (keptFrom > 0) this.#window = this.#window.slice(keptFrom);
  }

  /** The change over the window by its straight line; undefined while the window is not full. */
  get change(): number | undefined {
    const [first] = this.#window;
    const last = this.#window.at(-1);
    if (first === undefined || last === undefined || last.t - first.t < this.#over) return undefined;
    const looks = this.#window.length;
    const meanT = this.#window.reduce((sum, { t }) => sum + (t - first.t), 0) / looks;
    const meanValue = this.#window.reduce((sum, { value }) => sum + (value - first.value), 0) / looks;
    let spread = 0;
    let together = 0;
    for (const { t, value } of this.#window) {
      const fromMean = t - first.t - meanT;
      spread += fromMean ** 2;
      together += fromMean * (value - first.value - meanValue);
    }
    return (together / spread) * this.#over;
  }

  get settled(): boolean {
    const { change } = this;
    return change !== undefined && Math.abs(change) < this.#within;
  }
}
