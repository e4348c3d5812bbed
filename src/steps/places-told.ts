import type { Volts } from '../quantity/quantity.js';

/** What was read of the places at one time, each under the name of the module that is said to stand there. */
export interface ProofLook {
  /** Undefined with all of them plugged in. */
  readonly unplugged: string | undefined;
  readonly read: ReadonlyMap<string, Volts>;
}

/**
 * What the looks tell of a place: that it is its `own` module's; that `another` stands there, or one of
 * several; that it is the place of `none`, as it goes dead with no module; or that it is `untold`: it went
 * dead with its own module, and with `others` too, or was never alive.
 */
export type PlaceTold =
  | { readonly kind: 'own' }
  | { readonly kind: 'another'; readonly modules: readonly [string, ...string[]] }
  | { readonly kind: 'none' }
  | { readonly kind: 'untold'; readonly others: readonly string[] };

/**
 * Tells whose each place is. A module that is unplugged carries nothing, so a place that is alive without it
 * is not its own. A place that is dead without it may be: where it is alive at least once, or else it says
 * nothing. One look is not enough for that: next to a module that hogs, the others are dead with all plugged
 * in, and only the look without the hog shows that they live.
 * @param dead a place that reads no more than this is dead.
 */
export function tellPlaces(looks: readonly ProofLook[], dead: Volts): ReadonlyMap<string, PlaceTold> {
  const places = [...new Set(looks.flatMap(({ read }) => [...read.keys()]))];
  const seen = new Map(places.map((place) => [place, seenAt(place, looks, dead)]));
  const isSettledElsewhere = (module: string, place: string): boolean =>
    places.some((other) => {
      const { mayBeOf = [] } = seen.get(other) ?? {};
      return other !== place && mayBeOf.length === 1 && mayBeOf[0] === module;
    });
  const tell = (place: string): PlaceTold => {
    const { mayBeOf = [], aliveWithout = [] } = seen.get(place) ?? {};
    const [first, ...others] = mayBeOf.filter(
      (module) => module === place || !isSettledElsewhere(module, place),
    );
    if (aliveWithout.includes(place)) {
      return first === undefined ? { kind: 'none' } : { kind: 'another', modules: [first, ...others] };
    }
    return first === place && others.length === 0
      ? { kind: 'own' }
      : { kind: 'untold', others: mayBeOf.filter((module) => module !== place) };
  };
  return new Map(places.map((place) => [place, tell(place)]));
}

/** The modules without which the place was alive, and those whose place it may be. */
function seenAt(
  place: string,
  looks: readonly ProofLook[],
  dead: Volts,
): { readonly aliveWithout: readonly (string | undefined)[]; readonly mayBeOf: readonly string[] } {
  const here = looks.flatMap(({ unplugged, read }) => {
    const volts = read.get(place);
    return volts === undefined ? [] : [{ unplugged, alive: Math.abs(volts) > dead }];
  });
  const aliveWithout = here.filter(({ alive }) => alive).map(({ unplugged }) => unplugged);
  const mayBeOf =
    aliveWithout.length === 0
      ? []
      : here.flatMap(({ unplugged, alive }) => (alive || unplugged === undefined ? [] : [unplugged]));
  return { aliveWithout, mayBeOf };
}
