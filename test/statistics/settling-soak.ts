import { fitSettling, type SettlingFit, type SettlingOutcome } from '../../src/statistics/settling-fit.js';
import { normalScatter } from './normal-scatter.js';

export interface Soak {
  readonly t: readonly number[];
  readonly y: readonly number[];
}

/** A module that goes from 21 °C to 56 °C with a time constant of 600 s, watched for some time constants. */
export function soak(timeConstants: number, seed: number, { noise = 0.1, points = 100 } = {}): Soak {
  const scatter = normalScatter(seed);
  const t = Array.from({ length: points }, (_, index) => (600 * timeConstants * index) / (points - 1));
  return { t, y: t.map((time) => 56 - 35 * Math.exp(-time / 600) + noise * scatter()) };
}

export function settlingOf(t: ArrayLike<number>, y: ArrayLike<number>): SettlingFit {
  return asSettling(fitSettling(t, y));
}

export function asSettling(outcome: SettlingOutcome): SettlingFit {
  if (outcome.kind !== 'settling') throw new Error(`no settling: ${JSON.stringify(outcome)}`);
  return outcome;
}
