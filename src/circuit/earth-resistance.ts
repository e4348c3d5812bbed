import { combine, type Contribution, interval, rectangular } from '../statistics/uncertainty-budget.js';
import type { RunningMoments } from '../statistics/running-moments.js';
import type { LeadLimits, OhmReadings } from './ohm-readings.js';

/** Half-widths of the error that the ohmmeter's maker promises: a part of the reading, the rest in Ω. */
export interface OhmmeterPromise {
  readonly ofReading: number;
  readonly fixed: number;
  readonly resolution?: number | undefined;
}

/** Of an output to earth, the leads taken off. */
export interface EarthResistance {
  /** In Ω; undefined where the meter showed nothing but open. */
  readonly value: number | undefined;
  readonly budget: readonly Contribution[];
  /** 95 %, lower end first; the upper end is Infinity where the meter showed open, were it only once. */
  readonly interval: readonly [low: number, high: number];
}

/**
 * The resistance from output to earth: the mean of the readings less the mean of the leads held together
 * before and after, with the scatter of both, how far the leads were from one proof to the other, and the
 * meter's promise, its half-widths taken as rectangular (JCGM 100:2008, 4.3.7). The meter's fixed error is in
 * both and would fall out, were it sure that both were read in the same range; so it stays.
 * @param leads the readings with the leads held together, one for each proof.
 * @returns undefined where the meter showed nothing.
 */
export function earthResistance(
  { values, open }: OhmReadings,
  leads: readonly OhmReadings[],
  promise: OhmmeterPromise,
  { openAbove }: Pick<LeadLimits, 'openAbove'>,
): EarthResistance | undefined {
  if (values.count === 0) {
    return open === 0 ? undefined : { value: undefined, budget: [], interval: [openAbove, Infinity] };
  }
  const found = leadsOf(leads.map((each) => each.values).filter(({ count }) => count > 0));
  const value = values.mean - found.mean;
  const budget: readonly Contribution[] = [
    scatter('spread of the readings', values),
    ...found.budget,
    typeB('meter resistance, gain', rectangular(promise.ofReading) * value),
    typeB('meter resistance, offset', rectangular(promise.fixed)),
    typeB('meter resistance, resolution', rectangular((promise.resolution ?? 0) / 2)),
  ];
  const [low, high] = interval(value, combine(budget));
  // A contact that comes and goes is somewhere between what it read and an open circuit.
  return { value, budget, interval: open > 0 ? [Math.min(low, openAbove), Infinity] : [low, high] };
}

function leadsOf(proofs: readonly RunningMoments[]): {
  readonly mean: number;
  readonly budget: readonly Contribution[];
} {
  if (proofs.length === 0) return { mean: 0, budget: [] };
  const means = proofs.map(({ mean }) => mean);
  const halfRange = (Math.max(...means) - Math.min(...means)) / 2;
  return {
    mean: means.reduce((sum, mean) => sum + mean, 0) / means.length,
    budget: [
      ...proofs.map((proof, index) =>
        scatter(`spread of the leads, proof ${index + 1}`, proof, 1 / proofs.length),
      ),
      typeB('leads from one proof to the next', rectangular(halfRange)),
    ],
  };
}

function scatter(name: string, moments: RunningMoments, sensitivity = 1): Contribution {
  return {
    name,
    kind: 'A',
    uncertainty: (moments.uncertaintyOfMean ?? 0) * sensitivity,
    degreesOfFreedom: Math.max(1, moments.count - 1),
  };
}

function typeB(name: string, uncertainty: number): Contribution {
  return { name, kind: 'B', uncertainty: Math.abs(uncertainty), degreesOfFreedom: Infinity };
}
