import { cutText } from '../quantity/cut-text.js';
import type { Seconds } from '../quantity/quantity.js';

/** Something that happened on the way, besides readings: the same thing in the same step is one, and counted. */
export interface Happening {
  readonly kind: 'notice' | 'asked' | 'answered' | 'input' | 'guard' | 'taken-again' | 'recovery';
  readonly text: string;
  /** In which step; undefined before the first. */
  readonly step: number | undefined;
  readonly first: Seconds;
  readonly last: Seconds;
  readonly times: number;
}

/** In the order in which they came, as many as are kept: the first and the last of them. */
export interface Happenings {
  readonly kept: readonly Happening[];
  /** How many between the first and the last are not kept; the journal has them. */
  readonly missed: number;
}

/** More than a person reads. Chosen, no published source. */
const mostFirst = 120;
const mostLast = 80;
const longestText = 1000;

type Counted = { -readonly [Key in keyof Happening]: Happening[Key] };

/** Its memory is bounded, whatever an instrument says and however often. */
export class HappeningCollector {
  readonly #first: Counted[] = [];
  readonly #last: Counted[] = [];
  /** Of those kept, by what makes them the same. */
  readonly #known = new Map<string, Counted>();
  #missed = 0;

  add(kind: Happening['kind'], said: string, step: number | undefined, t: Seconds): void {
    const text = cut(said);
    const key = `${kind} ${step ?? ''} ${text}`;
    const before = this.#known.get(key);
    if (before !== undefined) {
      before.last = t;
      before.times += 1;
      return;
    }
    const happening = { kind, text, step, first: t, last: t, times: 1 };
    this.#known.set(key, happening);
    if (this.#first.length < mostFirst) {
      this.#first.push(happening);
      return;
    }
    this.#last.push(happening);
    if (this.#last.length > mostLast) this.#forgetOne();
  }

  result(): Happenings {
    return { kept: [...this.#first, ...this.#last], missed: this.#missed };
  }

  #forgetOne(): void {
    const gone = this.#last.shift();
    if (gone === undefined) return;
    this.#known.delete(`${gone.kind} ${gone.step ?? ''} ${gone.text}`);
    this.#missed += gone.times;
  }
}

function cut(text: string): string {
  if (text.length <= longestText) return text;
  return `${cutText(text, longestText)}… (shortened; the journal has all of it)`;
}
