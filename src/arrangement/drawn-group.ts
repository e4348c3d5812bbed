import type { DrawnBranch, PastLimit } from '../circuit/drawn-branch.js';
import type { Ratio } from '../quantity/quantity.js';
import type { LatinHypercube } from '../statistics/latin-hypercube.js';
import { linesOf } from './added-up.js';
import type { LimitStyle, ModuleProfile, Taken } from './module-profile.js';
import type { WorstBallast } from './worst-form.js';

/** By how much the voltage has fallen where a module counts as dropped out: what the steps take where nothing else is said. */
export const usualSag: Ratio = 0.05;
/** Of where it drops out: what is usable up to less than that is set by something else than the limit. */
const clearlyBelow: Ratio = 0.97;

/** No errors at all: one draw, the best estimate. */
export const withoutErrors: LatinHypercube = { draws: 1, add: () => undefined };

/**
 * The branches of a group as they may be in truth, drawn from what their records leave open (JCGM 101:2008,
 * clause 6), so many times. Each line of a budget is an error of its own:
 *
 * - scatter with finite degrees of freedom as Student's t (6.4.9);
 * - everything else as normal. Most such lines come from a promise, and a promise alone would be rectangular
 *   (6.4.2); but what a record keeps of it is its standard uncertainty, and the intervals beside the findings are
 *   made of that by JCGM 100. Taken as normal, a band without any load is as wide as the finding's own interval.
 *   Where one promise outweighs all else, that is on the safe side: ± 1.96 standard uncertainties instead of the
 *   rectangle's ± 1.65;
 * - a line that modules share is drawn once and moves all of them alike;
 * - each ballast's tolerance as rectangular and its own.
 */
export function drawnGroup(
  profiles: readonly ModuleProfile[],
  ballast: WorstBallast | undefined,
  errors: LatinHypercube,
): readonly DrawnBranch[] {
  return profiles.map((profile) => drawnBranch(profile, ballast, errors));
}

function drawnBranch(
  profile: ModuleProfile,
  ballast: WorstBallast | undefined,
  errors: LatinHypercube,
): DrawnBranch {
  const { name, usable, dropout, shortCircuit } = profile;
  const drawn = (what: string, taken: Taken): Float64Array =>
    drawnNumber(`${what} of ${name}`, taken, errors);
  const voltage = drawn('open-circuit voltage', profile.openCircuit);
  const droop = drawn('droop', profile.droop);
  const limit = drawn('limit', dropout ?? usable);
  const past = pastLimitOf(profile.limitStyle?.word);
  const beyond = shortCircuit === undefined ? undefined : drawn('short-circuit current', shortCircuit);
  const bent = shaped(past, { voltage, droop, limit, shortCircuit: beyond });
  return {
    voltage,
    droop,
    ballast: drawnBallast(name, ballast, errors),
    past,
    ...bent,
    ceiling:
      dropout !== undefined && usable.value < clearlyBelow * dropout.value
        ? drawn('usable current', usable)
        : new Float64Array(errors.draws).fill(Number.POSITIVE_INFINITY),
  };
}

/** Nobody knows what one of unknown style does; that it leaves is the worst for the others. */
export function pastLimitOf(style: LimitStyle | undefined): PastLimit {
  switch (style) {
    case 'constant-current':
      return 'holds';
    case 'foldback':
      return 'folds';
    case 'constant-power':
      return 'keeps-power';
    case 'hiccup':
    case 'latch-off':
    case undefined:
      return 'leaves';
  }
}

/** Never below 0, whatever the scatter of a few readings allows. */
function drawnNumber(name: string, taken: Taken, errors: LatinHypercube): Float64Array {
  const column = new Float64Array(errors.draws).fill(taken.value);
  let own = 0;
  for (const [index, { shared, uncertainty, degreesOfFreedom }] of linesOf(taken).entries()) {
    const isNormal = degreesOfFreedom === Number.POSITIVE_INFINITY;
    // Independent normal errors add up to one.
    if (isNormal && shared === undefined) own = Math.hypot(own, uncertainty);
    else {
      errors.add(
        column,
        shared === undefined ? `${name}, line ${index}` : `shared: ${shared}`,
        isNormal
          ? { kind: 'normal', deviation: uncertainty }
          : { kind: 't', scale: uncertainty, degreesOfFreedom },
      );
    }
  }
  errors.add(column, name, { kind: 'normal', deviation: own });
  return column.map((value) => Math.max(0, value));
}

function drawnBallast(
  name: string,
  { resistance, tolerance }: WorstBallast = { resistance: 0, tolerance: 0 },
  errors: LatinHypercube,
): Float64Array {
  const column = new Float64Array(errors.draws).fill(resistance);
  errors.add(column, `ballast of ${name}`, { kind: 'rectangular', halfWidth: tolerance * resistance });
  return column;
}

interface Drawn {
  readonly voltage: Float64Array;
  readonly droop: Float64Array;
  /** Where it had dropped out. */
  readonly limit: Float64Array;
  readonly shortCircuit: Float64Array | undefined;
}

/** Where the regulated line ends, and what the curve beyond needs to know, as `DrawnBranch` wants it. */
function shaped(past: PastLimit, drawn: Drawn): Pick<DrawnBranch, 'limit' | 'beyond'> {
  const limit = Float64Array.from(drawn.limit);
  const beyond = new Float64Array(limit.length);
  for (const [draw, dropout] of limit.entries()) {
    const voltage = drawn.voltage[draw] ?? 0;
    const droop = drawn.droop[draw] ?? 0;
    const shortCircuit = drawn.shortCircuit?.[draw];
    const turn = turnOf(past, { voltage, droop, dropout, shortCircuit });
    limit[draw] = turn.current;
    beyond[draw] = turn.beyond;
  }
  return { limit, beyond };
}

interface OneDrawn {
  readonly voltage: number;
  readonly droop: number;
  readonly dropout: number;
  readonly shortCircuit: number | undefined;
}

/**
 * A module that switches off or folds back does so where it drops out. One whose voltage sinks through the sag
 * met its limit before: at constant current where the straight line from there to the short circuit, followed
 * back, meets the regulated line; at constant power where V·I on the regulated line is what it was at the sag.
 */
function turnOf(past: PastLimit, one: OneDrawn): { readonly current: number; readonly beyond: number } {
  const { voltage, droop, dropout, shortCircuit } = one;
  const sagged = (1 - usualSag) * voltage;
  const sinks = droop * dropout < usualSag * voltage;
  switch (past) {
    case 'leaves':
      return { current: dropout, beyond: 0 };
    case 'folds':
      return { current: dropout, beyond: Math.min(dropout, shortCircuit ?? 0) };
    case 'keeps-power': {
      const power = sagged * dropout;
      const root = Math.sqrt(Math.max(0, voltage * voltage - 4 * droop * power));
      return { current: sinks ? (2 * power) / (voltage + root) : dropout, beyond: 0 };
    }
    case 'holds': {
      if (shortCircuit === undefined || !(shortCircuit > dropout))
        return { current: dropout, beyond: endless };
      const slope = sagged / (shortCircuit - dropout);
      const current = (slope * shortCircuit - voltage) / (slope - droop);
      return { current: sinks && current > 0 ? Math.min(current, dropout) : dropout, beyond: slope };
    }
  }
}

const endless = Number.POSITIVE_INFINITY;
