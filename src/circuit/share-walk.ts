import { BusSum, type WalkColumns } from './bus-sum.js';
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
  readonly #sum: BusSum;
  readonly #corners: CornerQueue;

  constructor(branches: readonly DrawnBranch[], sag: number) {
    this.#branches = branches;
    this.#sag = sag;
    this.#sum = new BusSum(branches);
    this.#corners = new CornerQueue(3 * branches.length);
  }

  /** Walks one draw up to its end. */
  climb(draw: number, onCorner?: (corner: WalkCorner) => void): WalkEnd {
    const sum = this.#sum;
    const corners = this.#corners;
    const floor = this.#setOut(draw);
    let peak = 0;
    let unlimited = this.#branches.length;
    let first = -1;
    let firstLoad = Number.POSITIVE_INFINITY;
    let ceiling = Number.POSITIVE_INFINITY;
    let last = -1;
    for (let corner = 0; corner < corners.length && last < 0; corner += 1) {
      peak = Math.max(peak, sum.at(Math.max(floor, corners.busOf(corner))));
      if (corners.busOf(corner) < floor) break;
      const branch = corners.branchOf(corner);
      const kind = corners.kindOf(corner);
      if (kind === begins) {
        sum.begin(branch);
      } else if (kind === atLimit) {
        if (first < 0) {
          first = branch;
          firstLoad = peak;
        }
        sum.limit(branch);
        unlimited -= 1;
        if (unlimited === 0) last = branch;
      } else if (sum.isRegulating(branch)) {
        ceiling = Math.min(ceiling, peak);
      }
      onCorner?.({ kind: kinds[kind], branch, load: peak });
    }
    onCorner?.({ kind: 'ends', branch: last, load: peak });
    return { first, firstLoad: Math.min(firstLoad, peak), end: peak, ceiling };
  }

  /**
   * The currents and the bus of one draw, up to the highest load; NaN at loads that the group does not hold.
   * @param loads rising, 0 at least.
   */
  currentsAt(draw: number, loads: ArrayLike<number>, into: WalkColumns): void {
    const sum = this.#sum;
    const corners = this.#corners;
    const floor = this.#setOut(draw);
    let unlimited = this.#branches.length;
    let met = 0;
    let high = corners.busOf(0);
    for (let corner = 0; corner < corners.length && met < loads.length && unlimited > 0; corner += 1) {
      const low = Math.max(floor, corners.busOf(corner));
      const most = sum.at(low);
      const from = met;
      while (met < loads.length && (loads[met] as number) <= most) met += 1;
      if (met > from) sum.write({ loads, from, to: met, low, high }, into);
      if (corners.busOf(corner) < floor) break;
      high = low;
      const kind = corners.kindOf(corner);
      if (kind === begins) sum.begin(corners.branchOf(corner));
      else if (kind === atLimit) {
        sum.limit(corners.branchOf(corner));
        unlimited -= 1;
      }
    }
    const row = (this.#branches.length + 1) * into.draws;
    for (let at = met * row + draw; at < loads.length * row; at += into.draws) into.values[at] = Number.NaN;
  }

  /** Nothing gives yet, and all corners of this draw stand in order. How low the bus may come. */
  #setOut(draw: number): number {
    const corners = this.#corners;
    this.#sum.setOut(draw);
    corners.clear();
    let highest = 0;
    let across = 0;
    for (let branch = 0; branch < this.#branches.length; branch += 1) {
      const { voltage, limit, ballast, ceiling } = this.#branches[branch] as DrawnBranch;
      const top = voltage[draw] as number;
      const most = limit[draw] as number;
      const used = ceiling[draw] as number;
      const resistance = this.#sum.resistanceOf(branch);
      corners.insert(top, branch, begins);
      if (used < most) corners.insert(top - resistance * used, branch, atCeiling);
      corners.insert(top - resistance * most, branch, atLimit);
      highest = Math.max(highest, top);
      across = Math.max(across, (ballast[draw] as number) * most);
    }
    return Math.max(0, (1 - this.#sag) * highest - across);
  }
}
