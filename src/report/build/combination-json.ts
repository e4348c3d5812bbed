import type { ParallelBuild, ParallelWish } from '../../arrangement/parallel-build.js';
import type { SeriesBuild } from '../../arrangement/series-build.js';
import { circuitAsJson, commonAsJson, recommendationAsJson, resistorAsJson } from './json-parts.js';
import type { BallastWishWritten } from '../schema/ballast-wish-schema.js';
import type { Common } from '../schema/build-part-schemas.js';
import type { CombinationJson, ParallelJson, SeriesJson } from '../schema/combination-schema.js';
import { bandAsJson, estimateAsJson, valueAsJson, valuesAsJson } from './json-values.js';

/** What both ways of joining have alike. */
type Shared = Pick<ParallelJson, keyof Common | 'load' | 'usable' | 'recommended' | 'circuit'>;
/** What the one has for itself. */
type OwnOf<Json> = Omit<Json, keyof Shared | 'format' | 'arrangement'>;

/** The name and version of the format; the number changes when a reader would have to. */
export const combinationFormat = 'railproof/combination 1';

/**
 * Modules side by side or one upon the other, as one JSON object; `arrangement` tells which. Every number is
 * `{ value, unit }` (UCUM codes, a ratio in %), with `interval` and `coverage` where it has an uncertainty, and
 * null where there is none to give; an axis of a curve is `{ values, unit }`, what lies over it
 * `{ best, low, high, unit, coverage }`, lists in the order of the axis. Lists of modules are in the order of
 * `modules`, of a stack the lowest first; each module says of each of its numbers `from` which record it came.
 *
 * `standing` says whether it may be built, and why not; `outcome` is that, or `too-little` where the load asked
 * for is more than is recommended. What must not be built has no parts.
 */
export function combinationAsJson(build: ParallelBuild | SeriesBuild): CombinationJson {
  const format = combinationFormat;
  const shared = sharedAsJson(build);
  return build.kind === 'parallel'
    ? { format, arrangement: build.kind, ...shared, ...parallelAsJson(build) }
    : { format, arrangement: build.kind, ...shared, ...seriesAsJson(build) };
}

function sharedAsJson(build: ParallelBuild | SeriesBuild): Shared {
  return {
    ...commonAsJson(build),
    load: { ...valueAsJson(build.load.current, 'current'), from: build.load.from },
    usable: estimateAsJson(build.usable, 'current'),
    recommended: recommendationAsJson(build.recommended),
    circuit: circuitAsJson(build.circuit),
  };
}

function parallelAsJson(build: ParallelBuild): OwnOf<ParallelJson> {
  const { wish, atLoad, sharing, firstToSaturate, withoutBallast, failures, sumOfSingles } = build;
  return {
    wish: {
      ...ballastWishAsJson(wish),
      load: wish.load === undefined ? null : valueAsJson(wish.load, 'current'),
    },
    ballast: ballastAsJson(build),
    sharing: {
      busVoltage: estimateAsJson(atLoad.busVoltage, 'voltage'),
      currents: atLoad.currents.map((current) => estimateAsJson(current, 'current')),
      shares: atLoad.shares.map((share) => estimateAsJson(share, 'ratio')),
      imbalance: worstAsJson(atLoad.imbalance),
    },
    curves: {
      load: valuesAsJson(sharing.loads, 'current'),
      busVoltage: bandAsJson(sharing.busVoltage, 'voltage'),
      currents: sharing.currents.map((band) => bandAsJson(band, 'current')),
    },
    firstToSaturate: {
      module: firstToSaturate.module,
      load: estimateAsJson(firstToSaturate.load, 'current'),
      probability: valueAsJson(firstToSaturate.probability, 'ratio'),
      then: firstToSaturate.then,
    },
    sumOfSingles: {
      usable: valueAsJson(sumOfSingles.usable, 'current'),
      recommended: valueAsJson(sumOfSingles.recommended, 'current'),
    },
    withoutBallast: {
      load: valueAsJson(withoutBallast.load, 'current'),
      imbalance: estimateAsJson(withoutBallast.imbalance, 'ratio'),
      hog: withoutBallast.hog ?? null,
      failsAt: valueAsJson(withoutBallast.failsAt, 'current'),
      story: withoutBallast.story,
    },
    failures: failures.map(({ module, recommended, usable, rest, sentences }) => ({
      module,
      recommended: valueAsJson(recommended, 'current'),
      usable: valueAsJson(usable, 'current'),
      rest,
      sentences,
    })),
  };
}

/** What was asked of the ballasts: one of the two is null. */
export function ballastWishAsJson({
  ballast,
  tolerance,
}: Pick<ParallelWish, 'ballast' | 'tolerance'>): BallastWishWritten {
  return {
    ballast: ballast.kind === 'given' ? valueAsJson(ballast.resistance, 'resistance') : null,
    imbalance: ballast.kind === 'for-imbalance' ? valueAsJson(ballast.most, 'ratio') : null,
    tolerance: valueAsJson(tolerance, 'ratio'),
  };
}

/** `worst` is that of every tolerance at its worst together, and no limit of 95 %. */
function worstAsJson({
  value,
  low,
  high,
}: ParallelBuild['atLoad']['imbalance']): ParallelJson['sharing']['imbalance'] {
  return {
    ...valueAsJson(value, 'ratio'),
    least: valueAsJson(low, 'ratio'),
    worst: valueAsJson(high, 'ratio'),
  };
}

function ballastAsJson({ ballast }: ParallelBuild): ParallelJson['ballast'] {
  switch (ballast.kind) {
    case 'none':
      return { kind: ballast.kind };
    case 'impossible':
      return { kind: ballast.kind, why: ballast.why };
    case 'resistor':
      return { kind: ballast.kind, ...resistorAsJson(ballast) };
  }
}

function seriesAsJson(build: SeriesBuild): OwnOf<SeriesJson> {
  const { wish, weakest, rails, diodes, bonds, curve } = build;
  return {
    wish: { load: wish.load === undefined ? null : valueAsJson(wish.load, 'current') },
    openVoltage: estimateAsJson(build.openVoltage, 'voltage'),
    voltageAtLoad: estimateAsJson(build.voltageAtLoad, 'voltage'),
    weakest: { module: weakest.module, sure: weakest.sure, then: weakest.then },
    rails: rails.map(({ module, float, top, isolation, verdict }) => ({
      module,
      float: estimateAsJson(float, 'voltage'),
      top: estimateAsJson(top, 'voltage'),
      isolation: isolation === 'unknown' ? null : valueAsJson(isolation, 'voltage'),
      verdict,
    })),
    beyondTouchable: build.beyondTouchable,
    reverseDiodes: diodes.map(({ module, current, bound, voltage, heat, rating }) => ({
      module,
      current: { ...valueAsJson(current, 'current'), bound: bound ?? null },
      voltage: valueAsJson(voltage, 'voltage'),
      heat: valueAsJson(heat, 'power'),
      rating: {
        current: valueAsJson(rating.current, 'current'),
        voltage: valueAsJson(rating.voltage, 'voltage'),
      },
    })),
    bonds: bonds.map(({ module, shorts, volts, sentence }) => ({
      module,
      shorts,
      voltage: valueAsJson(volts, 'voltage'),
      sentence,
    })),
    curves: {
      load: valuesAsJson(curve.currents, 'current'),
      voltage: bandAsJson(curve.voltage, 'voltage'),
    },
  };
}
