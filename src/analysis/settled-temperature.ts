import type { Celsius, Kelvins, Ratio, Seconds } from '../quantity/quantity.js';
import { fitSettling, type SettlingFit, type SettlingOutcome } from '../statistics/settling-fit.js';
import { settledInterval } from '../statistics/settling-interval.js';
import { coverageFactor } from '../statistics/student-t.js';

/** Where a temperature goes. */
export interface SettledTemperature {
  readonly settled: Celsius;
  /** Standard uncertainty from the scatter about the curve. */
  readonly uncertainty: Kelvins;
  readonly degreesOfFreedom: number;
  /** 95 % for the settled value, from the scatter alone; lopsided where the soak was cut short. */
  readonly interval: readonly [number, number];
  /** How far it still was from there at the end. */
  readonly left: Kelvins;
  /** Undefined where no change could be seen any more. */
  readonly timeConstant: TimeConstant | undefined;
  /** How it gets there, from the first point that went into it. */
  readonly way: Way;
}

/** T(t) = settled + (start − settled)·exp(−(t − from)/timeConstant); the mean from `from` on without a change. */
export interface Way {
  readonly from: Seconds;
  readonly start: Celsius;
}

/** The temperature on its way, at a time from the way's beginning on. */
export function onTheWay({ settled, timeConstant, way }: SettledTemperature, t: Seconds): Celsius {
  if (timeConstant === undefined) return settled;
  return settled + (way.start - settled) * Math.exp((way.from - t) / timeConstant.value);
}

export interface TimeConstant {
  readonly value: Seconds;
  readonly uncertainty: Seconds;
  readonly degreesOfFreedom: number;
}

/** Parts of the points that are left out at the beginning, one after the other. */
const leftOut: readonly Ratio[] = [0, 0.25, 0.5];

/**
 * The temperature that a soak goes to, T(t) = T∞ + (T₀ − T∞)·exp(−t/τ), predicted where it was cut short;
 * undefined where the points do not tell: too few, still straight, or too little watched to call it
 * settled.
 *
 * A probe on a case lags behind what warms inside, and its curve begins flat. So where the whole is no
 * settling, or its residuals hang together more than chance lets them, the beginning is left out: the lag
 * has died away in the rest. What still hangs together (a thermometer of few digits that changes slowly)
 * widens the uncertainties by √((1 + r)/(1 − r)), r being the correlation of neighbouring residuals (the
 * usual correction for a first-order dependence; from memory).
 * @param enough the time that must have been watched for no change to mean anything.
 */
export function settledTemperature(
  times: readonly Seconds[],
  temperatures: readonly Celsius[],
  enough: Seconds,
): SettledTemperature | undefined {
  let best: Curve | undefined;
  for (const part of leftOut) {
    const first = Math.floor(times.length * part);
    const t = times.slice(first);
    const y = temperatures.slice(first);
    const outcome = fitSettling(t, y, { startTime: t[0] ?? 0 });
    if (outcome.kind === 'settling') {
      const closer = best === undefined || outcome.residualCorrelation < best.fit.residualCorrelation;
      if (closer) best = { t, y, fit: outcome };
      if (outcome.residualCorrelation <= byChance / Math.sqrt(outcome.points)) break;
      continue;
    }
    if (best !== undefined) break;
    if (outcome.kind === 'already-settled') {
      const watched = (t.at(-1) ?? 0) - (t[0] ?? 0);
      return watched < enough ? undefined : fromMean(outcome, t[0] ?? 0);
    }
    if (outcome.why === 'straight' || outcome.why === 'too-few-points') return undefined;
  }
  return best === undefined ? undefined : fromCurve(best);
}

/** Standard deviations of the correlation of residuals that do not hang together, 1/√n. */
const byChance = 2;

interface Curve {
  readonly t: readonly Seconds[];
  readonly y: readonly Celsius[];
  readonly fit: SettlingFit;
}

function fromCurve({ t, y, fit }: Curve): SettledTemperature | undefined {
  const [low, high] = settledInterval(t, y, fit);
  if (!Number.isFinite(low) || !Number.isFinite(high)) return undefined;
  const wider = dependence(fit.residualCorrelation);
  const { settled, degreesOfFreedom, timeConstant, start, startTime } = fit;
  const passed = (t.at(-1) ?? startTime) - startTime;
  return {
    settled,
    uncertainty: fit.settledUncertainty * wider,
    degreesOfFreedom,
    interval: [settled - wider * (settled - low), settled + wider * (high - settled)],
    left: Math.abs(start - settled) * Math.exp(-passed / timeConstant),
    timeConstant: {
      value: timeConstant,
      uncertainty: fit.timeConstantUncertainty * wider,
      degreesOfFreedom,
    },
    way: { from: startTime, start },
  };
}

function fromMean(
  { mean, uncertainty, degreesOfFreedom }: Extract<SettlingOutcome, { kind: 'already-settled' }>,
  from: Seconds,
): SettledTemperature {
  const expanded = coverageFactor(degreesOfFreedom) * uncertainty;
  return {
    settled: mean,
    uncertainty,
    degreesOfFreedom,
    interval: [mean - expanded, mean + expanded],
    left: 0,
    timeConstant: undefined,
    way: { from, start: mean },
  };
}

const mostDependent = 0.99;

function dependence(correlation: number): number {
  const r = Math.min(mostDependent, Math.max(0, correlation));
  return Math.sqrt((1 + r) / (1 - r));
}
