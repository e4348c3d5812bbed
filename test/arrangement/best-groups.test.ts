import { describe, expect, it } from 'vitest';
import {
  bestPackings,
  type Candidate,
  isBetter,
  type Packing,
  type Worth,
} from '../../src/arrangement/best-groups.js';
import { choicesOf } from '../../src/arrangement/group-candidates.js';
import fc from '../property.js';

/** Every way to take so many groups, each with the smallest ballast that does for all of them. */
function everyWay(candidates: readonly Candidate[], count: number): readonly Packing[] {
  return choicesOf(candidates.length, count).flatMap((groups) => {
    const taken = groups.flatMap((group) => candidates[group] ?? []);
    const used = taken.reduce((bits, { members }) => bits | members, 0);
    const apart = taken.reduce((bits, { members }) => bits + members, 0) === used;
    const choices = candidates[0]?.worths.length ?? 0;
    const ballast = Array.from({ length: choices }, (_, index) => index).find((index) =>
      taken.every(({ worths }) => worths[index] !== undefined),
    );
    if (!apart || ballast === undefined) return [];
    const worths = taken.flatMap((each) => each.worths[ballast] ?? []);
    return [
      {
        groups,
        ballast,
        limit: Math.min(...worths.map(({ limit }) => limit)),
        imbalance: Math.max(...worths.map(({ imbalance }) => imbalance)),
      },
    ];
  });
}

const worthOf = (packing: Packing | undefined): Worth | undefined =>
  packing && { limit: packing.limit, imbalance: packing.imbalance };

// Few different values, so that there are many ties.
const worth: fc.Arbitrary<Worth | undefined> = fc.option(
  fc.record({
    limit: fc.integer({ min: 1, max: 6 }),
    imbalance: fc.integer({ min: 1, max: 4 }).map((tenths) => tenths / 10),
  }),
  { nil: undefined, freq: 3 },
);

interface Drawer {
  readonly candidates: readonly Candidate[];
  readonly count: number;
}

function drawers(choices: number): fc.Arbitrary<Drawer> {
  return fc
    .record({ size: fc.integer({ min: 1, max: 3 }), modules: fc.integer({ min: 2, max: 7 }) })
    .filter(({ size, modules }) => size <= modules)
    .chain(({ size, modules }) => {
      const groups = choicesOf(modules, size);
      return fc.record({
        candidates: fc
          .array(fc.array(worth, { minLength: choices, maxLength: choices }), {
            minLength: groups.length,
            maxLength: groups.length,
          })
          .map((all) =>
            groups.map((places, index) => ({
              members: places.reduce((bits, place) => bits | (1 << place), 0),
              worths: all[index] ?? [],
            })),
          ),
        count: fc.integer({ min: 1, max: Math.max(1, Math.min(3, Math.floor(modules / size))) }),
      });
    });
}

describe('the best groups of a drawer', () => {
  it.each([1, 3])(
    'are those that trying every way finds, and so are the next best: %d ballasts',
    (choices) => {
      fc.assert(
        fc.property(drawers(choices), ({ candidates, count }) => {
          const ways = everyWay(candidates, count).toSorted((one, other) =>
            isBetter(one, other) ? -1 : isBetter(other, one) ? 1 : 0,
          );
          const { best, next } = bestPackings(candidates, { count, isBuildable: () => true });
          expect(worthOf(best)).toEqual(worthOf(ways[0]));
          expect(worthOf(next)).toEqual(worthOf(ways[1]));
          for (const found of [best, next]) {
            if (found !== undefined) expect(ways).toContainEqual(found);
          }
          if (next !== undefined) expect(next.groups).not.toEqual(best?.groups);
        }),
        { numRuns: 400 },
      );
    },
  );

  it('are the best of those that can be built', () => {
    fc.assert(
      fc.property(drawers(2), fc.nat(4), ({ candidates, count }, kept) => {
        const isBuildable = ({ groups }: Packing): boolean =>
          groups.reduce((sum, group) => sum + group, 0) % 5 !== kept;
        const ways = everyWay(candidates, count)
          .filter(isBuildable)
          .toSorted((one, other) => (isBetter(one, other) ? -1 : isBetter(other, one) ? 1 : 0));
        const { best, next } = bestPackings(candidates, { count, isBuildable });
        expect(worthOf(best)).toEqual(worthOf(ways[0]));
        expect(worthOf(next)).toEqual(worthOf(ways[1]));
      }),
      { numRuns: 300 },
    );
  });

  it('of a drawer that holds too few are none', () => {
    const lone: Candidate = { members: 3, worths: [{ limit: 1, imbalance: 0 }] };
    const found = bestPackings([lone], { count: 2, isBuildable: () => true });
    expect(found).toEqual({ best: undefined, next: undefined });
    expect(bestPackings([], { count: 1, isBuildable: () => true }).best).toBeUndefined();
  });
});
