import type { Random } from './random.js';
import { stratifiedQuantiles } from './stratified-quantiles.js';
import { UnfitDataError } from './unfit-data-error.js';

/** How an error with mean 0 is distributed. */
export type Spread =
  | { readonly kind: 'normal'; readonly deviation: number }
  /** Student's t, scaled: what a type A evaluation leaves (JCGM 101:2008, 6.4.9). */
  | { readonly kind: 't'; readonly scale: number; readonly degreesOfFreedom: number }
  /** Anywhere within ± halfWidth alike (JCGM 101:2008, 6.4.2). */
  | { readonly kind: 'rectangular'; readonly halfWidth: number };

/** So many draws of any number of errors, each known by its name. */
export interface LatinHypercube {
  readonly draws: number;
  /**
   * Adds to each element of the column what the error of that name is worth in that draw. The same name gives
   * the same draws again, so an error that is shared moves all that it is added to the same way.
   * @param column as long as there are draws.
   */
  readonly add: (column: Float64Array, name: string, spread: Spread) => void;
}

/**
 * Latin hypercube sampling: each error's distribution is cut into as many strata of equal probability as there
 * are draws, and each stratum is drawn once, in an order of that error's own (McKay, Beckman & Conover,
 * Technometrics 21 (1979) 239–245). Within a stratum the middle is taken: with thousands of them it makes no
 * difference where. For the propagation of distributions (JCGM 101:2008, clause 7) it does what plain chance
 * does with fewer draws. The order of an error depends on the seed and its name alone, so the same records
 * give the same answer, in whatever order they are told.
 * @throws UnfitDataError for no draws, or a spread that is negative or no number.
 */
export function latinHypercube(draws: number, random: Random): LatinHypercube {
  if (!(Number.isInteger(draws) && draws > 0)) {
    throw new UnfitDataError('latinHypercube', `there are ${draws} draws`);
  }
  const tables = new Map<number, Float64Array>();
  const tableOf = (degreesOfFreedom: number): Float64Array => {
    const table = tables.get(degreesOfFreedom) ?? stratifiedQuantiles(draws, degreesOfFreedom);
    tables.set(degreesOfFreedom, table);
    return table;
  };
  return {
    draws,
    add: (column, name, spread) => {
      const size = sizeOf(spread);
      if (size === 0) return;
      const table = spread.kind === 'rectangular' ? undefined : tableOf(freedomOf(spread));
      const order = shuffled(draws, random.fork(name));
      for (let draw = 0; draw < draws; draw += 1) {
        const stratum = order[draw] ?? 0;
        const value = table === undefined ? (2 * stratum + 1) / draws - 1 : (table[stratum] ?? 0);
        column[draw] = (column[draw] ?? 0) + size * value;
      }
    },
  };
}

function sizeOf(spread: Spread): number {
  const size =
    spread.kind === 'normal' ? spread.deviation : spread.kind === 't' ? spread.scale : spread.halfWidth;
  if (!(size >= 0 && size < Infinity)) throw new UnfitDataError('latinHypercube', `the spread is ${size}`);
  return size;
}

function freedomOf(spread: Extract<Spread, { kind: 'normal' | 't' }>): number {
  return spread.kind === 'normal' ? Infinity : spread.degreesOfFreedom;
}

/** 0 to count − 1 in an order of chance (Fisher and Yates, as Durstenfeld has it). */
function shuffled(count: number, random: Random): Uint32Array {
  const order = Uint32Array.from({ length: count }, (_, index) => index);
  for (let last = count - 1; last > 0; last -= 1) {
    const chosen = Math.floor(random.uniform(0, last + 1));
    const kept = order[last] ?? 0;
    order[last] = order[chosen] ?? 0;
    order[chosen] = kept;
  }
  return order;
}
