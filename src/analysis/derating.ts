import type { Amperes, Celsius } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import type { Contribution } from '../statistics/uncertainty-budget.js';
import type { Finding } from './finding.js';
import { amps, givenPercent } from './in-words.js';
import type { LossModel, RiseSeen } from './loss-model.js';
import { promised } from './promised-errors.js';

/** What a soak showed, as far as a derating needs it. */
export interface Soaked {
  /** That flowed, of the whole group where there is one. */
  readonly current: Amperes;
  /** `temperature-rise` in K over the ambient, settled; predicted where the soak was cut short. */
  readonly rise: Finding;
  /** Whether it was watched until it had settled. */
  readonly settled: boolean;
  /** Of the air around it meanwhile; undefined where nobody measured it. */
  readonly ambient: Celsius | undefined;
  /** The soak's own limit of temperature; undefined where it had none. */
  readonly limit: Celsius | undefined;
}

/** Something that may lower the recommendation, or says why it does not. */
export interface Cap {
  readonly name: string;
  readonly reason: string;
  /** What it leaves of the current that it was given. */
  readonly current: Amperes;
  /** The note where it makes less of it. */
  readonly sets: string | undefined;
}

type Derating = RunHeader['derating'];

/** The lower one, where both the procedure and its soak name a limit. */
export function temperatureLimit(
  derating: Derating,
  soaked: Pick<Soaked, 'limit'> | undefined,
): Celsius | undefined {
  const limits = [derating.temperatureLimit, soaked?.limit].filter((limit) => limit !== undefined);
  return limits.length === 0 ? undefined : Math.min(...limits);
}

/** Nothing is taken as fixed unless the procedure says so: cautious upwards of the soaked current only. */
export function lossModelOf({ lossModel }: Derating): LossModel {
  return lossModel ?? { fixed: 0 };
}

/** The soaked current and its rise. */
export function riseSeen({ current, rise }: Soaked): RiseSeen {
  return { current, rise: Number(rise.value) };
}

/** The same with the upper end of the rise's interval, for whatever must not become too warm. */
export function highestRiseSeen({ current, rise }: Soaked): RiseSeen {
  return { current, rise: rise.interval?.[1] ?? Number(rise.value) };
}

/** The uncertainties of the rise as they count in a result that changes by `sensitivity` for each kelvin. */
export function risesBudget({ rise }: Soaked, sensitivity: number): readonly Contribution[] {
  if (rise.budget.length === 0) {
    return [promised('temperature-rise', (rise.standardUncertainty ?? 0) * sensitivity)];
  }
  return rise.budget.map(({ name, uncertainty, ...rest }) => ({
    ...rest,
    name: `temperature-rise, ${name}`,
    uncertainty: Math.abs(uncertainty * sensitivity),
  }));
}

/** `losses as the square of the current`, and which side that errs on for this current. */
export function lossesInWords({ fixed }: LossModel, current: Amperes, soaked: Soaked): string {
  const square = 'as the square of the current';
  const losses = fixed === 0 ? `losses ${square}` : `losses ${givenPercent(fixed)} fixed, the rest ${square}`;
  const from = `soaked at ${amps(soaked.current)}`;
  if (Math.abs(current / soaked.current - 1) < asSoaked) return from;
  if (current > soaked.current) return `${from}, ${losses}${fixed === 0 ? ', the cautious side here' : ''}`;
  return `${from}, ${losses}${fixed === 0 ? ', not the cautious side here: standing losses cool less' : ''}`;
}

/** Currents this close are the same for a temperature. */
const asSoaked = 0.005;
