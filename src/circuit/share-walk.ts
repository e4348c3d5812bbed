import { CornerQueue, atCeiling, atLimit, begins, kinds } from './corner-queue.js';
import type { DrawnBranch } from './drawn-branch.js';

/** What happens on the way up, in the order in which it does, and at which load of the group. */
export interface WalkCorner {
  readonly kind: 'begins' | 'at-ceiling' | 'at-limit' | 'ends';
  /** Of the last, the branch with which the group failed, or −1 where the bus was pulled too low. */
  readonly branch: number;
  readonly load: number;
}

/** How far one draw of the group goes. A. */
export interface WalkEnd {
  /** The branch that reaches its limit first, or −1, and at which load of the group. */
  readonly first: number;
  readonly firstLoad: number;
  /** Where none of its modules regulates any more, or the bus has sagged. */
  readonly end: number;
  /** Where the first module passes its ceiling; endless where none does. */
  readonly ceiling: number;
}

/** Where the walk writes: the value of each draw lies beside that of the next. */
export interface WalkColumns {
  /** `values[(load·(N + 1) + k)·draws + draw]`: the current of branch k; k = N is the voltage of the bus. */
  readonly values: Float64Array;
  readonly draws: number;
}

/** Stiffer than a branch can be: a joint of a micro-ohm. */
const leastResistance = 1e-6;

const idle = 0;
const regulating = 1;
const limited = 2;
const gone = 3;

/**
 * The currents of all branches of a group at rising loads, for those who ask ten thousand times: what
 * `groupPoints` says at each load, at a small part of the cost. The bus is lowered from the highest open-circuit
 * voltage, from corner to corner of Σ I_k(V_bus): a branch begins to give at its open-circuit voltage, and at
 * its limit it bends or leaves. Between two corners the sum is a straight line, so each load is found in closed
 * form (where a module keeps its power, by Newton's steps on a convex curve); one pass over the corners and the
 * loads. As the load of a bus rises slowly, so does the walk: a load that was passed is not met again further
 * down, and of several points of rest it takes the highest, as the load does that has climbed to it.
 *
 * The group ends where none of its modules regulates any more, or where the bus has fallen below
 * (1 − sag) × its open-circuit voltage by more than the ballasts explain.
 * @param branches all with the same number of draws.
 * @param sag 0.05 for 5 %.
 */
export class ShareWalk {
  readonly #branches: readonly DrawnBranch[];
  readonly #sag: number;
  readonly #state: Uint8Array;
  /** Each branch's current is `atZero − slope·V`, or bent where it keeps its power. */
  readonly #atZero: Float64Array;
  readonly #slope: Float64Array;
  readonly #power: Float64Array;
  readonly #corners: CornerQueue;
  #bent = 0;
  /** Of all straight ones: at 0 V, and by how much less for each volt. In an array, as numbers in fields would make garbage. */
  readonly #sums = new Float64Array(2);

  constructor(branches: readonly DrawnBranch[], sag: number) {
    const count = branches.length;
    this.#branches = branches;
    this.#sag = sag;
    this.#state = new Uint8Array(count);
    this.#atZero = new Float64Array(count);
    this.#slope = new Float64Array(count);
    this.#power = new Float64Array(count);
    this.#corners = new CornerQueue(3 * count);
  }

  /**
   * Walks one draw up to its end. Loads that the group does not hold are written as NaN.
   * @param loads rising, 0 at least.
   */
  climb(
    draw: number,
    loads: ArrayLike<number>,
    into?: WalkColumns,
    onCorner?: (corner: WalkCorner) => void,
  ): WalkEnd {
    this.#setOut(draw);
    const corners = this.#corners;
    const floor = this.#floor(draw);
    let next = 0;
    let peak = 0;
    let active = 0;
    let toCome = this.#branches.length;
    let first = -1;
    let firstLoad = Number.POSITIVE_INFINITY;
    let ceiling = Number.POSITIVE_INFINITY;
    let from = corners.busOf(0);
    let last = -1;
    for (let corner = 0; corner < corners.length; corner += 1) {
      const bus = Math.max(floor, corners.busOf(corner));
      const sum = this.#sum(draw, bus);
      for (; next < loads.length && (loads[next] as number) <= sum; next += 1) {
        const place = this.#solve(draw, loads[next] as number, bus, from);
        if (into !== undefined) this.#write(draw, next, place, into);
      }
      peak = Math.max(peak, sum);
      if (corners.busOf(corner) < floor) break;
      from = bus;
      const branch = corners.branchOf(corner);
      const kind = corners.kindOf(corner);
      if (kind === atCeiling) {
        if (this.#state[branch] === regulating) ceiling = Math.min(ceiling, peak);
      } else if (kind === begins) {
        toCome -= 1;
        active += 1;
        this.#begin(draw, branch);
      } else {
        active -= 1;
        if (first < 0) {
          first = branch;
          firstLoad = peak;
        }
        this.#limit(draw, branch);
      }
      onCorner?.({ kind: kinds[kind], branch, load: peak });
      if (active === 0 && toCome === 0) {
        last = branch;
        break;
      }
    }
    onCorner?.({ kind: 'ends', branch: last, load: peak });
    if (into !== undefined) {
      for (; next < loads.length; next += 1) this.#write(draw, next, Number.NaN, into);
    }
    return { first, firstLoad: Math.min(firstLoad, peak), end: peak, ceiling };
  }

  /** Nothing gives yet, and all corners of this draw stand in order. */
  #setOut(draw: number): void {
    this.#state.fill(idle);
    this.#atZero.fill(0);
    this.#slope.fill(0);
    this.#bent = 0;
    this.#sums.fill(0);
    this.#corners.clear();
    for (let branch = 0; branch < this.#branches.length; branch += 1) {
      const { voltage, limit, ceiling } = this.#branches[branch] as DrawnBranch;
      const top = voltage[draw] as number;
      const most = limit[draw] as number;
      const used = ceiling[draw] as number;
      const resistance = this.#resistance(draw, branch);
      this.#corners.insert(top, branch, begins);
      if (used < most) this.#corners.insert(top - resistance * used, branch, atCeiling);
      this.#corners.insert(top - resistance * most, branch, atLimit);
    }
  }

  #floor(draw: number): number {
    let top = 0;
    let across = 0;
    for (const { voltage, ballast, limit } of this.#branches) {
      top = Math.max(top, voltage[draw] as number);
      across = Math.max(across, (ballast[draw] as number) * (limit[draw] as number));
    }
    return Math.max(0, (1 - this.#sag) * top - across);
  }

  #resistance(draw: number, branch: number): number {
    const { droop, ballast } = this.#branches[branch] as DrawnBranch;
    return Math.max(leastResistance, (droop[draw] as number) + (ballast[draw] as number));
  }

  #begin(draw: number, branch: number): void {
    const slope = 1 / this.#resistance(draw, branch);
    this.#state[branch] = regulating;
    this.#slope[branch] = slope;
    this.#atZero[branch] = ((this.#branches[branch] as DrawnBranch).voltage[draw] as number) * slope;
    this.#addUp();
  }

  #limit(draw: number, branch: number): void {
    const one = this.#branches[branch] as DrawnBranch;
    const current = one.limit[draw] as number;
    const ballast = one.ballast[draw] as number;
    const beyond = one.beyond[draw] as number;
    const bus = (one.voltage[draw] as number) - this.#resistance(draw, branch) * current;
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

  #sum(draw: number, bus: number): number {
    let sum = this.#sumAtZero - this.#sumSlope * bus;
    if (this.#bent > 0) {
      for (let branch = 0; branch < this.#branches.length; branch += 1) {
        if (this.#isBent(branch)) sum += this.#onHyperbola(draw, branch, bus);
      }
    }
    return sum;
  }

  #solve(draw: number, load: number, low: number, high: number): number {
    if (this.#bent > 0) return this.#solveBent(draw, load, low, high);
    const bus = (this.#sumAtZero - load) / this.#sumSlope;
    return bus >= low ? Math.min(bus, high) : low;
  }

  /** From the low side the steps on a convex curve never go too far. */
  #solveBent(draw: number, load: number, low: number, high: number): number {
    let bus = low;
    for (;;) {
      let value = this.#sumAtZero - this.#sumSlope * bus - load;
      let slope = -this.#sumSlope;
      for (let branch = 0; branch < this.#branches.length; branch += 1) {
        if (!this.#isBent(branch)) continue;
        const current = this.#onHyperbola(draw, branch, bus);
        value += current;
        slope -= current / this.#root(draw, branch, bus);
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
  #onHyperbola(draw: number, branch: number, bus: number): number {
    return (2 * (this.#power[branch] as number)) / (bus + this.#root(draw, branch, bus));
  }

  #root(draw: number, branch: number, bus: number): number {
    const ballast = (this.#branches[branch] as DrawnBranch).ballast[draw] as number;
    return Math.sqrt(bus * bus + 4 * ballast * (this.#power[branch] as number));
  }

  #write(draw: number, load: number, bus: number, { values, draws }: WalkColumns): void {
    const { length } = this.#branches;
    let at = load * (length + 1) * draws + draw;
    for (let branch = 0; branch < length; branch += 1) {
      const current = this.#isBent(branch)
        ? this.#onHyperbola(draw, branch, bus)
        : (this.#atZero[branch] as number) - (this.#slope[branch] as number) * bus;
      // The end of a line is not met to the last digit.
      values[at] = current < 0 ? 0 : current;
      at += draws;
    }
    values[at] = bus;
  }
}
