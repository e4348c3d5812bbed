import { type Slanted, rootBetween } from '../statistics/root-search.js';
import { RunningSum } from './running-sum.js';
import { type Stretch, type Straight, onStretch } from './stretch.js';

/** Rounding in the sums decides nothing: within this share of what was added up, they count as equal. */
const ROUNDING = 8 * Number.EPSILON;

/**
 * What all parts give together at one place less what is demanded there: the surplus, while one part after
 * the other turns to its next stretch. The straight ones are kept as one sum, so asking for the sign costs
 * the same for two of them as for twenty; only a zero that was found is worked out afresh from every part.
 */
export class Balance {
  readonly #parts: Stretch[];
  demand: Straight;
  readonly #atZero = new RunningSum();
  readonly #slope = new RunningSum();
  readonly #bent = new Set<number>();
  #endless = 0;

  constructor(parts: readonly Stretch[], demand: Straight) {
    this.#parts = [...parts];
    this.demand = demand;
    for (const [index, part] of this.#parts.entries()) this.#count(index, part, 1);
  }

  /** Turns a part to its next stretch and gives back the one it leaves. */
  turn(index: number, stretch: Stretch): Stretch | undefined {
    const left = this.#parts[index];
    if (left !== undefined) this.#count(index, left, -1);
    this.#parts[index] = stretch;
    this.#count(index, stretch, 1);
    return left;
  }

  /** From here on nothing can balance: a part or the demand goes on without end. */
  get isEndless(): boolean {
    return this.#endless > 0 || this.demand.start === Number.POSITIVE_INFINITY;
  }

  /** Do the parts give at least what is demanded? */
  isAbove(place: number): boolean {
    if (this.isEndless) return false;
    const straight = this.#slope.value * place;
    const demanded = onStretch(this.demand, place).value;
    let surplus = this.#atZero.value + straight - demanded;
    let size = Math.abs(this.#atZero.value) + Math.abs(straight) + Math.abs(demanded);
    for (const index of this.#bent) {
      const value = this.#valueOf(index, place);
      surplus += value;
      size += Math.abs(value);
    }
    return surplus >= 0 || (Number.isFinite(surplus) && -surplus <= ROUNDING * size);
  }

  /** The surplus and its slope, added up afresh. */
  surplus(place: number): Slanted {
    const demanded = onStretch(this.demand, place);
    let value = -demanded.value;
    let slope = -demanded.slope;
    for (const part of this.#parts) {
      const given = onStretch(part, place);
      value += given.value;
      slope += given.slope;
    }
    return { value, slope };
  }

  /**
   * The place within a stretch of all parts where the surplus changes its sign: straight lines meet in closed
   * form, bent ones by Newton's step.
   */
  zeroBetween(from: number, to: number): number {
    const first = this.surplus(from).value;
    const last = this.surplus(to).value;
    if (first === 0 || first > 0 === last > 0) return Math.abs(first) <= Math.abs(last) ? from : to;
    if (this.#bent.size > 0) return rootBetween((place) => this.surplus(place), from, to);
    return Math.min(to, Math.max(from, from + (to - from) * (first / (first - last))));
  }

  /**
   * A place where the surplus dips below zero between two at which it does not: falling bent parts beside
   * rising straight ones can do that. The sum is convex, so halving finds the bottom.
   */
  dipBetween(from: number, to: number): number | undefined {
    if (this.#bent.size === 0 || this.#slope.value <= this.demand.slope) return undefined;
    let low = from;
    let high = to;
    while (high - low > ROUNDING * to) {
      const middle = (low + high) / 2;
      const { value, slope } = this.surplus(middle);
      if (value < 0) return this.isAbove(middle) ? undefined : middle;
      if (slope < 0) low = middle;
      else high = middle;
    }
    return undefined;
  }

  /**
   * What each part gives at a zero. A place can be no finer than its last digit, which along a steep stretch
   * is worth something; that remainder is spread by one more step of Newton, so the sum comes out.
   */
  valuesAtZero(place: number): readonly number[] {
    const { value, slope } = this.surplus(place);
    const finest = ROUNDING * Math.abs(place);
    const step = Math.min(finest, Math.max(-finest, -value / slope));
    return this.#parts.map((part) => {
      const given = onStretch(part, place);
      return Number.isFinite(step) ? given.value + given.slope * step : given.value;
    });
  }

  /** What each part gives at a place, those that have just been left on the stretch they left. */
  valuesAt(place: number, left: ReadonlyMap<number, Stretch> = new Map()): readonly number[] {
    return this.#parts.map((part, index) => onStretch(left.get(index) ?? part, place).value);
  }

  #valueOf(index: number, place: number): number {
    const part = this.#parts[index];
    return part === undefined ? 0 : onStretch(part, place).value;
  }

  #count(index: number, stretch: Stretch, sign: 1 | -1): void {
    if (stretch.kind === 'bent') {
      if (sign > 0) this.#bent.add(index);
      else this.#bent.delete(index);
    } else if (stretch.start === Number.NEGATIVE_INFINITY) {
      this.#endless += sign;
    } else {
      this.#atZero.add(sign * (stretch.start - stretch.slope * stretch.from));
      this.#slope.add(sign * stretch.slope);
    }
  }
}
