import { smallest, usualCost } from '../circuit/ballast.js';
import { preferredFrom } from '../circuit/preferred-values.js';
import { worstSharing } from '../circuit/worst-sharing.js';
import type { Ohms } from '../quantity/quantity.js';
import { asGroupModule, recommendedWith } from './ballast-choice.js';
import type { Candidate, Worth } from './best-groups.js';
import type { ModuleProfile } from './module-profile.js';
import type { SelectionWish } from './selection.js';

/** Larger ones cost too much of any voltage that these supplies have. */
const largest: Ohms = 100;

type Wish = Pick<SelectionWish, 'group' | 'ballast' | 'tolerance'>;

/** The ballasts that a wish leaves to choose from, the smallest first; 0 Ω for none. */
export function ballastsFor({ group, ballast }: Wish): readonly Ohms[] {
  if (group === 1) return [0];
  if (ballast.kind === 'given') return [ballast.resistance];
  return [0, ...preferredFrom(smallest, largest, 'E12')];
}

/** All groups of a size, and what each is worth with each ballast; of modules in a row, by rising lowest one. */
export function candidatesOf(
  modules: readonly ModuleProfile[],
  wish: Wish,
  ballasts: readonly Ohms[],
): readonly Candidate[] {
  return choicesOf(modules.length, wish.group).map((places) => {
    const group = places.flatMap((place) => modules[place] ?? []);
    return {
      members: places.reduce((bits, place) => bits | (1 << place), 0),
      worths: worthsOf(group, wish, ballasts),
    };
  });
}

/**
 * The largest current that no module can be brought above its recommendation by, and how unevenly they may
 * share there, in the worst case that the records allow; undefined for a ballast that does not do. Which do is
 * what `smallestBallast` would say: it is within the imbalance, and costs no more than a tenth of the voltage.
 */
function worthsOf(
  group: readonly ModuleProfile[],
  wish: Wish,
  ballasts: readonly Ohms[],
): readonly (Worth | undefined)[] {
  const lowest = Math.min(...group.map(({ openCircuit }) => openCircuit.value));
  const worths: (Worth | undefined)[] = [];
  for (const ballast of ballasts) {
    const worth = worthOf(group, wish, ballast);
    const isChosen = group.length > 1 && wish.ballast.kind === 'for-imbalance';
    if (isChosen && (ballast * worth.limit) / group.length > usualCost * lowest) break;
    const does = !isChosen || wish.ballast.most >= worth.imbalance;
    worths.push(does ? worth : undefined);
  }
  return worths;
}

/** Of one group with one ballast. */
export function worthOf(
  group: readonly ModuleProfile[],
  { tolerance }: Pick<SelectionWish, 'tolerance'>,
  ballast: Ohms,
): Worth {
  const [first, ...others] = group;
  if (first === undefined) throw new RangeError('a group of no modules');
  if (others.length === 0) return { limit: first.recommended.current, imbalance: 0 };
  const { limit } = recommendedWith(group, ballast, tolerance);
  const modules = group.map(asGroupModule);
  return { limit, imbalance: worstSharing({ modules, load: limit, ballast, tolerance }).imbalance };
}

/** All ways to take so many of a row, each rising, in the order of a dictionary. */
export function choicesOf(length: number, size: number, from = 0): readonly (readonly number[])[] {
  if (size === 0) return [[]];
  const ways: (readonly number[])[] = [];
  for (let first = from; first <= length - size; first += 1) {
    for (const rest of choicesOf(length, size - 1, first + 1)) ways.push([first, ...rest]);
  }
  return ways;
}

/** How many ways there are: C(n, k). */
export function choose(length: number, size: number): number {
  let ways = 1;
  for (let each = 1; each <= size; each += 1) ways = (ways * (length - size + each)) / each;
  return Math.round(ways);
}
