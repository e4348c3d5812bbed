import type * as checked from '../../src/statistics/checked.js';
import { built } from './built.js';

export const { median } = await built<typeof checked>('statistics/checked.js');

/** Two things that are timed in turns, so that a machine that slows down slows both. */
export interface SideBySide {
  readonly ours: () => unknown;
  readonly rival: () => unknown;
  readonly rounds: number;
  /** Turns of each that are not counted, until files are in memory and code is compiled; one by default. */
  readonly unmeasured?: number;
}

/** Seconds, the median of all rounds; the ratio is the median of those of each round. */
export interface Timed {
  readonly ours: number;
  readonly rival: number;
  readonly ratio: number;
}

/** Times both in turns; who begins changes with each round. */
export async function timedSideBySide({ ours, rival, rounds, unmeasured = 1 }: SideBySide): Promise<Timed> {
  const taken: { ours: number; rival: number }[] = [];
  for (let round = -unmeasured; round < rounds; round += 1) {
    let one: { ours: number; rival: number };
    if (round % 2 === 0) {
      const first = await secondsOf(ours);
      one = { ours: first, rival: await secondsOf(rival) };
    } else {
      const first = await secondsOf(rival);
      one = { ours: await secondsOf(ours), rival: first };
    }
    if (round >= 0) taken.push(one);
  }
  return {
    ours: median(taken.map((one) => one.ours)),
    rival: median(taken.map((one) => one.rival)),
    ratio: median(taken.map((one) => one.ours / one.rival)),
  };
}

/** How long it takes, in s. What it comes to is kept, so that no compiler can leave the work out. */
export async function secondsOf(work: () => unknown): Promise<number> {
  const began = process.hrtime.bigint();
  kept = await work();
  return Number(process.hrtime.bigint() - began) / 1e9;
}

/** The last result. */
export let kept: unknown;
