import { UnfitWishError } from './arrangement-error.js';
import type { ModuleProfile } from './module-profile.js';
import type { ParallelWish } from './parallel-build.js';

/** @throws UnfitWishError for what can't be worked out, whatever the records say. */
export function requireSense(profiles: readonly ModuleProfile[], wish: ParallelWish): void {
  if (profiles.length < 2) {
    throw new UnfitWishError(
      `A group needs two modules at least, and there ${profiles.length === 1 ? 'is one' : 'is none'}`,
      'Name the records of two or more modules.',
    );
  }
  const twice = profiles.find(({ name }, index) => profiles.findIndex((one) => one.name === name) < index);
  if (twice !== undefined) {
    throw new UnfitWishError(
      `${twice.name} stands in two places`,
      'Name each module once; two modules that go by one name must get names of their own.',
    );
  }
  requireSharing(wish);
  if (wish.load !== undefined && !(wish.load > 0 && wish.load < Infinity)) {
    throw new UnfitWishError(
      `A load of ${wish.load} A is none`,
      'Ask for a current above 0 A, or leave the load out to see what the group is recommended for.',
    );
  }
}

/** @throws UnfitWishError for a ballast, an imbalance or a tolerance that is none. */
export function requireSharing({ ballast, tolerance }: Pick<ParallelWish, 'ballast' | 'tolerance'>): void {
  if (ballast.kind === 'given' && !(ballast.resistance > 0 && ballast.resistance < Infinity)) {
    throw new UnfitWishError(
      `A ballast of ${ballast.resistance} Ω is none`,
      'Leave the ballast out to have one chosen, and to see what happens without.',
    );
  }
  if (ballast.kind === 'for-imbalance' && !(ballast.most > 0 && ballast.most < 1)) {
    throw new UnfitWishError(
      ballast.most >= 1
        ? `With an imbalance of ${asPercent(ballast.most)} one of two modules idles, so nothing is shared`
        : `An imbalance of ${asPercent(ballast.most)} can't be had: no two modules and no two resistors are alike`,
      'Ask for an imbalance above 0 % and below 100 %, such as 10 %.',
    );
  }
  if (!(tolerance >= 0 && tolerance < 1)) {
    throw new UnfitWishError(
      `A resistor of ± ${asPercent(tolerance)} is none`,
      'Give the tolerance of the resistors that are at hand, such as 5 %.',
    );
  }
}

function asPercent(ratio: number): string {
  return `${Number((100 * ratio).toPrecision(6))} %`;
}
