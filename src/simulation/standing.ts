import type { LoadLaw } from '../circuit/load-law.js';
import type { Kelvins } from '../quantity/quantity.js';
import { curveOf, leastHeldVoltage } from './module-curve-of.js';
import { type Part, type RestingPoint, type SimulatedCircuit, restingPoint } from './resting-point.js';
import { delivers, staysAtItsLimit } from './virtual-module.js';
import { limitFactor } from './warming.js';

/** Which modules feed a circuit, by their places, and where it rests with them. */
export interface Standing {
  readonly members: ReadonlySet<number>;
  /** Those of the members that deliver; the others give their limit. */
  readonly delivering: ReadonlySet<number>;
  readonly point: RestingPoint;
}

/**
 * The cascade. Of the modules that are asked, one that is pushed past its limit and cannot stay there leaves,
 * the one furthest past it first; the rest must carry everything, so that the next may be pushed past its
 * limit, until those that are left stand. Who is left does not depend on the order in a group, where every
 * loss lowers the bus for all others.
 */
export function standingOf(
  circuit: SimulatedCircuit,
  rises: readonly Kelvins[],
  asked: ReadonlySet<number>,
  law: LoadLaw,
): Standing {
  const key = keyOf(circuit, rises, asked);
  const last = lastStanding.get(law);
  if (last?.circuit === circuit && last.key === key) return last.standing;
  const standing = cascade(circuit, rises, asked, law);
  lastStanding.set(law, { circuit, key, standing });
  return standing;
}

/** Asked again and again of one moment, so the last answer is kept. Of a rise only what it does to the limit counts. */
const lastStanding = new WeakMap<
  LoadLaw,
  { readonly circuit: SimulatedCircuit; readonly key: string; readonly standing: Standing }
>();

function keyOf({ modules }: SimulatedCircuit, rises: readonly Kelvins[], asked: ReadonlySet<number>): string {
  return modules
    .map((module, place) => (asked.has(place) ? limitFactor(module, rises[place] ?? 0) : 'out'))
    .join(' ');
}

function cascade(
  circuit: SimulatedCircuit,
  rises: readonly Kelvins[],
  asked: ReadonlySet<number>,
  law: LoadLaw,
): Standing {
  const members = new Set(asked);
  for (;;) {
    const point = restingPoint(circuit, partsOf(circuit, rises, members), law);
    const isDelivering = (place: number): boolean => {
      const module = circuit.modules[place];
      const voltage = point.modules[place]?.voltage ?? 0;
      return module !== undefined && delivers(module, rises[place] ?? 0, voltage);
    };
    const leaver = furthestPast(circuit, rises, members, point);
    if (leaver === undefined) {
      return { members, delivering: new Set([...members].filter(isDelivering)), point };
    }
    members.delete(leaver);
  }
}

function partsOf(
  { modules }: SimulatedCircuit,
  rises: readonly Kelvins[],
  members: ReadonlySet<number>,
): readonly Part[] {
  return modules.map((module, place) =>
    members.has(place)
      ? { kind: 'curve', curve: curveOf(module, rises[place] ?? 0), from: 'above' }
      : { kind: 'nothing' },
  );
}

/** Of the members that leave when pushed past their limit: the one whose output has sagged most below it. */
function furthestPast(
  { modules }: SimulatedCircuit,
  rises: readonly Kelvins[],
  members: ReadonlySet<number>,
  point: RestingPoint,
): number | undefined {
  let furthest: { readonly place: number; readonly past: number } | undefined;
  for (const [place, module] of modules.entries()) {
    if (!members.has(place) || staysAtItsLimit(module)) continue;
    const rise = rises[place] ?? 0;
    const voltage = point.modules[place]?.voltage ?? 0;
    if (delivers(module, rise, voltage)) continue;
    const past = leastHeldVoltage(module, rise) - voltage;
    if (furthest === undefined || past > furthest.past) furthest = { place, past };
  }
  return furthest?.place;
}
