import type { Amperes, Ohms, Ratio, Volts } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import type { UncertainPart } from '../statistics/effective-freedom.js';
import { mean } from '../statistics/checked.js';
import {
  type CombinedStandard,
  combineStandard,
  type Contribution,
  expandedFor,
  rectangular,
} from '../statistics/uncertainty-budget.js';
import { stepsOf } from './curve.js';
import type { Evidence, PointEvidence } from './evidence.js';
import { believedStep, type PlaceLook, placeLooks, type PlaceRead } from './place-looks.js';
import { promised, promisedErrors } from './promised-errors.js';
import { scaled, scatterOf, scatterOfMean, together } from './scatter.js';

/** One module's current at one look: the voltage across its ballast over the ballast's measured value. */
export interface ModuleCurrent {
  readonly module: string;
  /** In the circuit, from 1. */
  readonly place: number;
  readonly current: Amperes;
  readonly volts: Volts;
  readonly ballast: Ohms;
  /** Standard uncertainty of the ballast, as a share of it. */
  readonly ballastUncertainty: Ratio;
  /** Of the common output at the same point. */
  readonly bus: Volts;
  /** Of the mean of the readings, as a current. */
  readonly scatter: UncertainPart;
  /** What may have moved between the passes that this look was put together from, as a current. */
  readonly drift: Amperes;
}

/** A look at a parallel group, with the current of each place that was read. */
export interface GroupLook extends PlaceLook {
  readonly currents: readonly ModuleCurrent[];
  /** The load's current, over all passes. */
  readonly total: Amperes;
  readonly totalScatter: UncertainPart;
}

/** All looks of a group at its places in a record, in order; none where the circuit is no group. */
export function groupLooks(evidence: Evidence): readonly GroupLook[] {
  const { header } = evidence;
  if (header.circuit !== 'parallel') return [];
  return stepsOf(evidence, 'sharing-log').flatMap((step) =>
    placeLooks(header, believedStep(evidence, step))
      .filter(({ points }) => points.every(({ current }) => current.count > 0))
      .map((look) => withCurrents(header, look)),
  );
}

function withCurrents(header: RunHeader, look: PlaceLook): GroupLook {
  const total = mean(look.points.map(({ current }) => current.mean));
  const moved = movement(look.points, total);
  // Field by field: a spread at the head of a literal costs more than all the rest, once for each look and module.
  return {
    step: look.step,
    kind: look.kind,
    without: look.without,
    set: look.set,
    time: look.time,
    outcome: look.outcome,
    places: look.places,
    points: look.points,
    total,
    totalScatter: scatterOfMean(look.points.map(({ current }) => current)),
    currents: header.modules.flatMap(({ name }, index) => {
      const read = look.places.get(name);
      const ballast = header.bench.places?.[index]?.ballast;
      if (read === undefined || ballast === undefined || read.point.moduleVoltage.count === 0) return [];
      return [currentOf({ module: name, place: index + 1 }, read, ballast, moved)];
    }),
  };
}

function currentOf(
  where: Pick<ModuleCurrent, 'module' | 'place'>,
  { volts, point }: PlaceRead,
  ballast: { readonly resistance: Ohms; readonly uncertainty: Ohms },
  moved: Movement,
): ModuleCurrent {
  const { resistance } = ballast;
  const current = volts.mean / resistance;
  return {
    module: where.module,
    place: where.place,
    current,
    volts: volts.mean,
    ballast: resistance,
    ballastUncertainty: rectangular(ballast.uncertainty) / resistance,
    bus: point.moduleVoltage.mean,
    scatter: scaled(scatterOf(volts), 1 / resistance),
    drift: Math.hypot(current * moved.load, moved.bus / resistance),
  };
}

/** Standard uncertainties: of the load's current as a share of it, of the common output in V. */
interface Movement {
  readonly load: Ratio;
  readonly bus: Volts;
}

const still: Movement = { load: 0, bus: 0 };

/**
 * What moved between the passes of a look, taken as rectangular over the width that was seen. More current
 * is shared by all alike. A change of the common output comes from a module whose own voltage changed, and
 * no more than what it makes across the ballast can have gone astray.
 */
function movement(points: readonly PointEvidence[], total: Amperes): Movement {
  if (points.length < 2 || total <= 0) return still;
  const voltages = points.flatMap(({ moduleVoltage }) =>
    moduleVoltage.count > 0 ? [moduleVoltage.mean] : [],
  );
  return {
    load: rectangular(width(points.map(({ current }) => current.mean)) / 2) / total,
    bus: voltages.length < 2 ? 0 : rectangular(width(voltages) / 2),
  };
}

function width(values: readonly number[]): number {
  return Math.max(...values) - Math.min(...values);
}

/** The post of the meter that reads a place: its own where it has one, else the one there is for all. */
export function meterOf({ instruments }: RunHeader, place: number): string {
  const own = `meter-${place}`;
  return instruments.some(({ role }) => role === own) ? own : 'meter';
}

/** How much of each module's current, in the order of the look's currents, and of the load's goes into a result. */
export interface Weights {
  readonly modules: readonly number[];
  readonly load?: number;
  /** Whether the ballasts may all be off alike, as those are that one ohmmeter measured. */
  readonly ballastsAlike?: boolean;
}

/** The part of a look that goes into a budget. */
type Carried = Pick<GroupLook, 'currents' | 'total' | 'totalScatter'>;

/**
 * The budget of Σ wₖ·Iₖ + w·I_load at a look (JCGM 100:2008, 5.2.2, where one error goes into several
 * quantities): what one instrument does to all that it read is added up with its signs before it is squared.
 * So the gain of a meter that reads every place drops out of a share, its offset nearly does, and those of
 * meters of the places' own stay. Scatter, last digits and ballasts are each place's own.
 */
export function budgetOf(
  header: RunHeader,
  { currents, total, totalScatter }: Carried,
  { modules: weights, load = 0, ballastsAlike = false }: Weights,
): readonly Contribution[] {
  const weighted = currents.map((each, index) => {
    const weight = weights[index] ?? 0;
    const meter = meterOf(header, each.place);
    return { meter, current: weight * each.current, perVolt: weight / each.ballast };
  });
  const meters = [...new Set(weighted.map(({ meter }) => meter))];
  const scatter = together([
    ...currents.map((each, index) => scaled(each.scatter, weights[index] ?? 0)),
    scaled(totalScatter, load),
  ]);
  const drift = Math.hypot(...currents.map((each, index) => (weights[index] ?? 0) * each.drift));
  const byBallast = currents.map(
    (each, index) => (weights[index] ?? 0) * each.current * each.ballastUncertainty,
  );
  return [
    {
      name: 'scatter of the readings',
      kind: 'A',
      uncertainty: scatter.uncertainty,
      degreesOfFreedom: scatter.degreesOfFreedom,
    },
    ...meters.flatMap((meter) => {
      const errors = promisedErrors(header, meter, 'voltage');
      const its = weighted.filter((each) => each.meter === meter);
      const perVolt = its.map((each) => each.perVolt);
      return [
        promised(`${errors.of}, gain`, errors.gain * sum(its.map(({ current }) => current))),
        promised(`${errors.of}, offset`, errors.offset * sum(perVolt)),
        promised(`${errors.of}, resolution`, errors.resolution * Math.hypot(...perVolt)),
      ];
    }),
    ...(ballastsAlike
      ? [promised('ballasts, all alike', sum(byBallast))]
      : byBallast.map((uncertainty, index) =>
          promised(`ballast of ${currents[index]?.module ?? ''}`, uncertainty),
        )),
    ...(drift === 0 ? [] : [promised('drift between the passes', drift)]),
    ...(load === 0 ? [] : loadBudget(header, total, load)),
  ];
}

/**
 * How far off the current of one module may be, by its place among the look's currents. Nobody else's current
 * goes into it, so the others are left out: a look at a group costs in proportion to its modules.
 */
export function ownUncertainty(
  header: RunHeader,
  { currents, total, totalScatter }: GroupLook,
  index: number,
): CombinedStandard {
  const alone = { currents: currents.slice(index, index + 1), total, totalScatter };
  return combineStandard(budgetOf(header, alone, { modules: [1] }));
}

/** The same as half-width of its interval, 95 %. */
export function expandedCurrent(header: RunHeader, look: GroupLook, index: number): Amperes {
  return expandedFor(ownUncertainty(header, look, index), 0.95);
}

function loadBudget(header: RunHeader, total: Amperes, weight: number): readonly Contribution[] {
  const errors = promisedErrors(header, 'load', 'current');
  return [
    promised(`${errors.of}, gain`, errors.gain * total * weight),
    promised(`${errors.of}, offset`, errors.offset * weight),
    promised(`${errors.of}, resolution`, errors.resolution * weight),
  ];
}

function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0);
}
