import type { Amperes, Ohms, Volts } from '../quantity/quantity.js';
import { mean } from '../statistics/checked.js';
import type { RunHeader } from '../record/run-header.js';
import type { LineFit } from '../statistics/line-fit.js';
import { type Contribution, combine } from '../statistics/uncertainty-budget.js';
import { type GroupLook, meterOf, type ModuleCurrent, ownUncertainty } from './module-currents.js';
import { promised, promisedErrors } from './promised-errors.js';
import type { Saturated } from './saturation.js';
import { soundLine } from './sound-line.js';

/** One module of a group as the group itself shows it: V = V0 − R·I at its terminals, before its ballast. */
export interface ModuleLine {
  readonly module: string;
  readonly ballast: Ohms;
  /** Expanded uncertainties of what may differ between the modules; what is common to all is left out. */
  readonly openCircuit: { readonly value: Volts; readonly expanded: Volts };
  readonly droop: { readonly value: Ohms; readonly expanded: Ohms };
}

/** A module that carries less than this part of the most it ever carried is about idle. */
const idle = 0.03;
/** A current must be this many standard uncertainties to be one. */
const clearly = 3;

/**
 * The straight line of each module that carried enough for one: its terminal voltage (the common output and
 * what its ballast loses) over its own current, from every look in which it was below its limit and not
 * idle, those with another module unplugged among them. What the bus voltage's instrument does is the same
 * for all modules and unbalances none, and so is the gain of a meter that reads all places.
 */
export function moduleLines(
  header: RunHeader,
  looks: readonly GroupLook[],
  saturated: Saturated | undefined,
): ReadonlyMap<string, ModuleLine> {
  const fits = header.modules.flatMap(({ name }, index): Fitted[] => {
    const below = saturated?.module === name ? saturated.total : Number.POSITIVE_INFINITY;
    const points = carryingPoints(header, looks, { name, below });
    const first = points[0];
    const fit = soundLine(
      points.map(({ current }) => current),
      points.map(({ bus, volts }) => bus + volts),
    );
    return first === undefined || fit === undefined ? [] : [{ module: name, place: index + 1, first, fit }];
  });
  const stepDown = fits.map(({ fit, first }) => -fit.slope / first.ballast);
  return new Map(
    fits.map((fitted, index) => {
      // An offset of the common meter moves every line's start by droop/ballast: only the difference counts.
      const apart = (stepDown[index] ?? 0) - mean(stepDown);
      return [fitted.module, lineOf(header, fitted, apart)];
    }),
  );
}

interface Fitted {
  readonly module: string;
  readonly place: number;
  readonly first: ModuleCurrent;
  readonly fit: LineFit;
}

function carryingPoints(
  header: RunHeader,
  looks: readonly GroupLook[],
  { name, below }: { readonly name: string; readonly below: Amperes },
): readonly ModuleCurrent[] {
  const all = looks
    .filter(({ kind, outcome, time, total }) => {
      return kind !== 'after' && outcome !== 'dropped' && time === 0 && total < below;
    })
    .flatMap((look) => {
      const index = look.currents.findIndex(({ module }) => module === name);
      const each = look.currents[index];
      if (each === undefined || look.without === name) return [];
      const { standardUncertainty } = ownUncertainty(header, look, index);
      return each.current > clearly * standardUncertainty ? [each] : [];
    });
  const most = all.reduce((largest, { current }) => Math.max(largest, current), 0);
  return all.filter(({ current }) => current > idle * most);
}

function lineOf(header: RunHeader, { module, place, first, fit }: Fitted, apart: number): ModuleLine {
  const droop = -fit.slope;
  const { ballast, ballastUncertainty } = first;
  const meter = meterOf(header, place);
  const errors = promisedErrors(header, meter, 'voltage');
  const isOwn = meter !== 'meter';
  const scatter = Math.max(fit.residualDeviation, errors.resolution);
  const byScatter = (share: number): Contribution => ({
    name: 'scatter about the line',
    kind: 'A',
    uncertainty: scatter * share,
    degreesOfFreedom: fit.degreesOfFreedom,
  });
  const openCircuit = [
    byScatter(Math.sqrt(1 / fit.points + fit.meanX ** 2 / fit.spreadX)),
    promised(`${errors.of}, offset`, errors.offset * (isOwn ? 1 + droop / ballast : apart)),
  ];
  const slope = [
    byScatter(1 / Math.sqrt(fit.spreadX)),
    promised('its ballast', droop * ballastUncertainty),
    ...(isOwn ? [promised(`${errors.of}, gain`, errors.gain * droop)] : []),
  ];
  return {
    module,
    ballast,
    openCircuit: { value: fit.intercept, expanded: combine(openCircuit).expanded },
    droop: { value: droop, expanded: combine(slope).expanded },
  };
}
