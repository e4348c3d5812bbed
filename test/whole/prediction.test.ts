import { beforeAll, describe, expect, it } from 'vitest';
import { buildParallel } from '../../src/arrangement/build-parallel.js';
import type { Band } from '../../src/arrangement/build.js';
import { type MeasuredGroup, measuredGroup } from './predicted-group.js';

/** With RAILPROOF_SEEDS=150 there are the 100 pairs that the promise is made for, and 50 groups of three. */
const seeds = Number(process.env['RAILPROOF_SEEDS'] ?? 3);

/** A module's share at the load at which it was measured, and the band in which it was to lie. */
interface Predicted {
  /** Of the ballasts. */
  readonly tolerance: number;
  readonly best: number;
  readonly low: number;
  readonly high: number;
  readonly measured: number;
}

/** From the records of each module alone and the ballasts that were bought, without a look at the group. */
function predicted({ profiles, ballast, load, shares }: MeasuredGroup): readonly Predicted[] {
  const { resistance, tolerance } = ballast;
  const { sharing } = buildParallel(profiles, { ballast: { kind: 'given', resistance }, tolerance, load });
  return sharing.currents.map((band, place) => {
    const at = (line: keyof Band): number => between(sharing.loads, band[line], load) / load;
    const measured = Number(shares[place]?.value);
    return { tolerance, best: at('best'), low: at('low'), high: at('high'), measured };
  });
}

function between(places: readonly number[], values: readonly number[], at: number): number {
  const above = places.findIndex((place) => place >= at);
  const [x0 = NaN, x1 = NaN] = places.slice(above - 1, above + 1);
  const [y0 = NaN, y1 = NaN] = values.slice(above - 1, above + 1);
  return y0 + ((y1 - y0) * (at - x0)) / (x1 - x0);
}

function isHit({ low, high, measured }: Predicted): boolean {
  return low <= measured && measured <= high;
}

describe('shares that are predicted from modules measured alone', () => {
  const groups: (readonly Predicted[])[] = [];

  beforeAll(async () => {
    for (let seed = 1; seed <= seeds; seed += 1) groups.push(predicted(await measuredGroup(seed)));
  }, 3_600_000);

  // Each of three shares has its own band: that all three are held at once is promised of none.
  it('hold at least nine of ten, be they of two modules or of three', () => {
    const missed = groups.flat().filter((share) => !isHit(share));
    // One in twenty is to be missed, so two of a few, as one is where the other is not, say nothing.
    expect(missed.length, JSON.stringify(missed)).toBeLessThanOrEqual(
      Math.max(2, 0.1 * groups.flat().length),
    );
  });

  it('hold what two modules show in at least nine pairs of ten', () => {
    const pairs = groups.filter((shares) => shares.length === 2);
    const missed = pairs.filter((shares) => !shares.every(isHit));
    expect(missed.length, JSON.stringify(missed)).toBeLessThanOrEqual(Math.max(1, 0.1 * pairs.length));
  });

  // What was seen: 0.02 to 0.034 with ballasts of 5 %, 0.004 to 0.008 with 1 %.
  it.each([
    [0.01, 0.01],
    [0.05, 0.04],
  ])('with ballasts of %d leave no more open than these and the records do', (tolerance, widest) => {
    const widths = groups
      .flat()
      .filter((share) => share.tolerance === tolerance)
      .map(({ low, high }) => high - low);
    expect(widths.length).toBeGreaterThan(0);
    expect(Math.max(...widths)).toBeLessThan(widest);
  });

  it('would not hold those of modules that were taken for one another', () => {
    const turned = groups.map((shares) =>
      shares.map((one, place) => ({
        ...one,
        measured: shares[(place + 1) % shares.length]?.measured ?? Number.NaN,
      })),
    );
    expect(turned.filter((shares) => shares.every(isHit)).length).toBeLessThanOrEqual(seeds / 2);
  });
});
