import { describe, expect, it } from 'vitest';
import { asGroupModule, ballastFor, recommendedWith } from '../../src/arrangement/ballast-choice.js';
import type { ModuleProfile } from '../../src/arrangement/module-profile.js';
import type { ParallelWish } from '../../src/arrangement/parallel-build.js';
import { worstSharing } from '../../src/circuit/worst-sharing.js';
import { madeProfile } from './made-profile.js';

const tolerance = 0.01;
const wish = (most: number): ParallelWish => ({
  ballast: { kind: 'for-imbalance', most },
  tolerance,
  load: undefined,
});

/** Pairs that lie ever further apart, and the imbalances that are wished of them. */
const pairs = Array.from({ length: 30 }, (_, step): readonly ModuleProfile[] => [
  madeProfile('K1', { openCircuit: 15.21, droop: 0.018 }),
  madeProfile('K2', { openCircuit: 15.21 - 0.002 * step, droop: 0.021 }),
]);
const wished = pairs.flatMap((pair) => [0.1, 0.2, 0.5].map((most) => ({ pair, most })));

function chosen(pair: readonly ModuleProfile[], most: number, load: number | undefined): number {
  const taken = ballastFor(pair, wish(most), load);
  if (taken.kind === 'impossible') throw new Error(taken.why);
  return taken.kind === 'none' ? 0 : taken.resistance;
}

describe('the ballast for a load that is asked for', () => {
  it('carries the very load that the group is recommended for when none is asked for, and any just below', () => {
    const short = wished.flatMap(({ pair, most }) => {
      const { limit } = recommendedWith(pair, chosen(pair, most, undefined), tolerance);
      return [1, 0.999, 0.995].flatMap((part) => {
        const load = part * limit;
        const ballast = chosen(pair, most, load);
        const within =
          worstSharing({ modules: pair.map(asGroupModule), load, ballast, tolerance }).imbalance <= most;
        return within && recommendedWith(pair, ballast, tolerance).limit >= load ? [] : [{ load, ballast }];
      });
    });
    expect(wished).toHaveLength(90);
    expect(short).toEqual([]);
  });

  it('is the one for the imbalance alone where none carries the load', () => {
    const [pair = []] = pairs;
    const { limit } = recommendedWith(pair, chosen(pair, 0.1, undefined), tolerance);
    const ballast = chosen(pair, 0.1, 1.2 * limit);
    expect(recommendedWith(pair, ballast, tolerance).limit).toBeLessThan(1.2 * limit);
    const modules = pair.map(asGroupModule);
    expect(worstSharing({ modules, load: 1.2 * limit, ballast, tolerance }).imbalance).toBeLessThanOrEqual(
      0.1,
    );
  });
});
