import type { LoadLaw } from '../circuit/load-law.js';
import type { ModuleCurve } from '../circuit/module-curve.js';
import type { SimulatedModule } from '../files/simulation-section.js';
import type { Amperes, Kelvins, Ratio } from '../quantity/quantity.js';
import { curveOf } from './module-curve-of.js';
import { type ModulePoint, type Part, type SimulatedCircuit, restingPoint } from './resting-point.js';
import { delivers } from './virtual-module.js';
import { limitFactor } from './warming.js';

/** Yes or no for each module, in the order of the circuit. */
export type Which = readonly boolean[];

/** Which modules feed a circuit, and which of these deliver; the others of them give their limit. */
export interface Standing {
  readonly members: Which;
  readonly delivering: Which;
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
  asked: Which,
  law: LoadLaw,
): Standing {
  const members = [...asked];
  for (;;) {
    const points = pointsOf(circuit, rises, members, law);
    const delivering = circuit.modules.map(
      (module, place) =>
        members[place] === true && within(module, rises[place] ?? 0, points[place] ?? nowhere),
    );
    let furthest: { readonly place: number; readonly past: Amperes } | undefined;
    for (const [place, module] of circuit.modules.entries()) {
      if (members[place] !== true || delivering[place] === true || staysAtItsLimit(module)) continue;
      const past = (points[place]?.current ?? 0) - limitOf(module, rises[place] ?? 0);
      if (furthest === undefined || past > furthest.past) furthest = { place, past };
    }
    if (furthest === undefined) return { members, delivering };
    members[furthest.place] = false;
  }
}

/** Whether it goes on giving its limit when pushed past it; all others let go of what they feed. */
export function staysAtItsLimit({ limit }: SimulatedModule): boolean {
  return limit.style === 'constant-current';
}

const nowhere: ModulePoint = { voltage: 0, current: 0, through: 0 };

function limitOf(module: SimulatedModule, rise: Kelvins): Amperes {
  return module.limit.current * limitFactor(module, rise);
}

/** Past its limit there is no staying: whether it gets there shows best in what would be asked of it without. */
function isAllOrNothing({ limit }: SimulatedModule): boolean {
  return limit.style !== 'constant-current' && limit.style !== 'constant-power';
}

function within(module: SimulatedModule, rise: Kelvins, { voltage, current }: ModulePoint): boolean {
  return isAllOrNothing(module)
    ? current <= limitOf(module, rise) * (1 + 1e-12)
    : delivers(module, rise, voltage);
}

/** A limit that nothing reaches. */
const WITHOUT_LIMIT: Ratio = 1e6;

function askedCurveOf(module: SimulatedModule, rise: Kelvins): ModuleCurve {
  if (!isAllOrNothing(module)) return curveOf(module, rise);
  const { openCircuitVoltage, droopResistance, limit } = module;
  return {
    openCircuitVoltage,
    droopResistance,
    limit: { style: 'constant-current', current: WITHOUT_LIMIT * limit.current },
  };
}

interface Solved {
  /** Of those whose limit has a part in it. */
  readonly limits: readonly (Amperes | undefined)[];
  readonly points: readonly ModulePoint[];
}

/** For each load the last answer for each choice of members: a search for a moment asks again and again. */
const solved = new WeakMap<LoadLaw, { circuit: SimulatedCircuit; byMembers: Map<string, Solved> }>();

function pointsOf(
  circuit: SimulatedCircuit,
  rises: readonly Kelvins[],
  members: Which,
  law: LoadLaw,
): readonly ModulePoint[] {
  let known = solved.get(law);
  if (known?.circuit !== circuit) {
    known = { circuit, byMembers: new Map() };
    solved.set(law, known);
  }
  const key = members.map((is) => (is ? '1' : '0')).join('');
  const limits = circuit.modules.map((module, place) =>
    members[place] === true && !isAllOrNothing(module) ? limitOf(module, rises[place] ?? 0) : undefined,
  );
  const last = known.byMembers.get(key);
  if (last !== undefined && limits.every((limit, place) => limit === last.limits[place])) return last.points;
  const parts = circuit.modules.map((module, place): Part =>
    members[place] === true
      ? { kind: 'curve', curve: askedCurveOf(module, rises[place] ?? 0), from: 'above' }
      : { kind: 'nothing' },
  );
  const points = restingPoint(circuit, parts, law).modules;
  known.byMembers.set(key, { limits, points });
  return points;
}
