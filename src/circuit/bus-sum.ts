import type { DrawnBranch } from './drawn-branch.js';

/** Stiffer than a branch can be: a joint of a micro-ohm. */
const leastResistance = 1e-6;

const idle = 0;
const regulating = 1;
const limited = 2;
const gone = 3;

/** Where currents are written: the value of each draw lies beside that of the next. */
export interface WalkColumns {
  /** `values[(load·(N + 1) + k)·draws + draw]`: the current of branch k; k = N is the voltage of the bus. */
  readonly values: Float64Array;
  readonly draws: number;
}

/** Some of rising loads, and between which voltages of the bus they are met. */
export interface LoadsMet {
  readonly loads: ArrayLike<number>;
  /** Index of the first, and of the first that is not one of them. */
  readonly from: number;
  readonly to: number;
  readonly low: number;
  readonly high: number;
}

/**
 * What the branches of a group give together at a voltage of the bus, in one draw at a time: a straight line, and
 * the hyperbola of each that keeps its power. As the bus falls each begins to give at its open-circuit voltage, and
 * bends or leaves at its limit; in between the sum stays the same line. It is asked ten thousand times over and must
 * leave nothing to be collected, so numbers lie in typed arrays.
 */
export class BusSum {
  readonly #branches: readonly DrawnBranch[];
  readonly #resistance: Float64Array;
  readonly #state: Uint8Array;
  /** Each branch's current is `atZero − slope·V`, or bent where it keeps its power. */
  readonly #atZero: Float64Array;
  readonly #slope: Float64Array;
  readonly #power: Float64Array;
  /** Of all straight ones: at 0 V, and by how much less for each volt. */
  readonly #sums = new Float64Array(2);
  #bent = 0;
  #draw = 0;

  constructor(branches: readonly DrawnBranch[]) {
    const count = branches.length;
    this.#branches = branches;
    this.#resistance = new Float64Array(count);
    this.#state = new Uint8Array(count);
    this.#atZero = new Float64Array(count);
    this.#slope = new Float64Array(count);
    this.#power = new Float64Array(count);
  }

  /** Another draw, of which nothing gives yet. */
  setOut(draw: number): void {
    this.#draw = draw;
    this.#bent = 0;
    this.#sums[0] = 0;
    this.#sums[1] = 0;
    for (let branch = 0; branch < this.#branches.length; branch += 1) {
      const { droop, ballast } = this.#branches[branch] as DrawnBranch;
      this.#resistance[branch] = Math.max(
        leastResistance,
        (droop[draw] as number) + (ballast[draw] as number),
      );
      this.#state[branch] = idle;
      this.#atZero[branch] = 0;
      this.#slope[branch] = 0;
    }
  }

  /** Droop and ballast in series. */
  resistanceOf(branch: number): number {
    return this.#resistance[branch] as number;
  }

  isRegulating(branch: number): boolean {
    return this.#state[branch] === regulating;
  }

  begin(branch: number): void {
    const { voltage } = this.#branches[branch] as DrawnBranch;
    const slope = 1 / this.resistanceOf(branch);
    this.#state[branch] = regulating;
    this.#slope[branch] = slope;
    this.#atZero[branch] = (voltage[this.#draw] as number) * slope;
    this.#addUp();
  }

  limit(branch: number): void {
    const one = this.#branches[branch] as DrawnBranch;
    const current = one.limit[this.#draw] as number;
    const ballast = one.ballast[this.#draw] as number;
    const beyond = one.beyond[this.#draw] as number;
    const bus = (one.voltage[this.#draw] as number) - this.resistanceOf(branch) * current;
    const module = bus + ballast * current;
    this.#state[branch] = limited;
    let slope = 0;
    switch (one.past) {
      case 'holds':
        slope = 1 / (beyond + ballast);
        break;
      case 'folds': {
        const back = (current - beyond) / module;
        slope = -back / (1 - ballast * back);
        break;
      }
      case 'keeps-power':
        this.#power[branch] = module * current;
        this.#bent += 1;
        break;
      case 'leaves':
        this.#state[branch] = gone;
        break;
    }
    const stays = one.past === 'holds' || one.past === 'folds';
    this.#slope[branch] = slope;
    this.#atZero[branch] = stays ? current + slope * bus : 0;
    this.#addUp();
  }

  at(bus: number): number {
    let sum = this.#sumAtZero - this.#sumSlope * bus;
    if (this.#bent > 0) {
      for (let branch = 0; branch < this.#branches.length; branch += 1) {
        if (this.#isBent(branch)) sum += this.#onHyperbola(branch, bus);
      }
    }
    return sum;
  }

  /** What each branch gives at loads that are met between two corners, and the bus there. */
  write(met: LoadsMet, { values, draws }: WalkColumns): void {
    const row = (this.#branches.length + 1) * draws;
    const first = met.from * row + this.#draw;
    this.#writeBuses(met, values, first + row - draws, row);
    for (let branch = 0; branch < this.#branches.length; branch += 1) {
      const isBent = this.#isBent(branch);
      const atZero = this.#atZero[branch] as number;
      const slope = this.#slope[branch] as number;
      const end = met.to * row;
      const toBus = row - (branch + 1) * draws;
      for (let at = first + branch * draws; at < end; at += row) {
        const bus = values[at + toBus] as number;
        const current = isBent ? this.#onHyperbola(branch, bus) : atZero - slope * bus;
        // The end of a line is not met to the last digit.
        values[at] = current < 0 ? 0 : current;
      }
    }
  }

  /** The bus at which they give each load together, where it lies from `low` to `high`. */
  #writeBuses({ loads, from, to, low, high }: LoadsMet, values: Float64Array, at: number, row: number): void {
    const isBent = this.#bent > 0;
    const atZero = this.#sumAtZero;
    const slope = this.#sumSlope;
    for (let load = from, place = at; load < to; load += 1, place += row) {
      const wanted = loads[load] as number;
      const bus = isBent ? this.#bentBusAt(wanted, low, high) : (atZero - wanted) / slope;
      values[place] = bus >= low ? Math.min(bus, high) : low;
    }
  }

  /** Afresh at each corner, so that nothing is left of what was taken away. */
  #addUp(): void {
    let atZero = 0;
    let slope = 0;
    for (let branch = 0; branch < this.#slope.length; branch += 1) {
      atZero += this.#atZero[branch] as number;
      slope += this.#slope[branch] as number;
    }
    this.#sums[0] = atZero;
    this.#sums[1] = slope;
  }

  /** From the low side the steps on a convex curve never go too far. */
  #bentBusAt(load: number, low: number, high: number): number {
    let bus = low;
    for (;;) {
      let value = this.#sumAtZero - this.#sumSlope * bus - load;
      let slope = -this.#sumSlope;
      for (let branch = 0; branch < this.#branches.length; branch += 1) {
        if (!this.#isBent(branch)) continue;
        const current = this.#onHyperbola(branch, bus);
        value += current;
        slope -= current / this.#root(branch, bus);
      }
      const next = Math.min(high, bus - value / slope);
      if (!(next - bus > 4 * Number.EPSILON * bus)) return bus;
      bus = next;
    }
  }

  get #sumAtZero(): number {
    return this.#sums[0] as number;
  }

  get #sumSlope(): number {
    return this.#sums[1] as number;
  }

  #isBent(branch: number): boolean {
    return this.#state[branch] === limited && (this.#branches[branch] as DrawnBranch).past === 'keeps-power';
  }

  /** (V_bus + r·I)·I = P, in the form of the quadratic's root that loses no digits. */
  #onHyperbola(branch: number, bus: number): number {
    return (2 * (this.#power[branch] as number)) / (bus + this.#root(branch, bus));
  }

  #root(branch: number, bus: number): number {
    const ballast = (this.#branches[branch] as DrawnBranch).ballast[this.#draw] as number;
    return Math.sqrt(bus * bus + 4 * ballast * (this.#power[branch] as number));
  }
}
