import type { Celsius, Kelvins, Ratio } from '../quantity/quantity.js';
import { combine, type Contribution, rectangular } from '../statistics/uncertainty-budget.js';
import type { Soaked } from './derating.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { amps, degrees } from './in-words.js';
import { oncePerEvidence } from './once-per-evidence.js';
import { promised, promisedErrors } from './promised-errors.js';
import type { SettledTemperature, TimeConstant } from './settled-temperature.js';
import { type SoakSeen, soaksSeen } from './soak-seen.js';
import { driftFindings } from './thermal-drift.js';

/** Settled: what is still to come is no more than this part of the rise, as after three and a half time constants. */
const unrisen: Ratio = 0.03;
/** An idle module is a little warmer than its air; how much is a judgement, as a half-width. */
const idleWarmth: Kelvins = 2;
/** The same after a step that has worked it. */
const warmthLeft: Kelvins = 5;

/**
 * `temperature-rise` above the ambient, `thermal-time-constant` and `thermal-drift`, of the soak at the
 * highest current; see `settledTemperature` for how the first two come about.
 *
 * The ambient is the bench file's, or else the temperature before anything flowed: then an offset of the
 * thermometer drops out of the rise, and instead it is uncertain how much warmer than its air the idle
 * module was. Where the points do not tell where the temperature goes, the rise that was read at the end is
 * a least value.
 */
export function soakFindings(evidence: Evidence): readonly Finding[] {
  const seen = governingSoak(evidence);
  if (seen === undefined) return [];
  const rise = riseOf(evidence, seen);
  return [
    ...(rise === undefined ? [] : [rise.finding]),
    ...(seen.settling?.timeConstant === undefined
      ? []
      : [timeConstantFinding(seen.settling.timeConstant, seen)]),
    ...driftFindings(evidence, seen),
  ];
}

/** What a derating needs of the soak; undefined where none shows where the temperature goes. */
export function soakedOf(evidence: Evidence): Soaked | undefined {
  const seen = governingSoak(evidence);
  const rise = seen === undefined ? undefined : riseOf(evidence, seen);
  if (seen === undefined || rise === undefined || rise.finding.bound !== undefined) return undefined;
  return {
    current: seen.current,
    rise: rise.finding,
    settled: rise.settled,
    ambient: rise.ambient,
    limit: seen.limit,
  };
}

/** The one at the highest current among those that tell where the temperature goes, or else among all. */
export const governingSoak = oncePerEvidence(governing);

function governing(evidence: Evidence): SoakSeen | undefined {
  return [...soaksSeen(evidence)].sort(
    (one, other) =>
      Number(other.settling !== undefined) - Number(one.settling !== undefined) ||
      other.current - one.current ||
      other.step - one.step,
  )[0];
}

interface Rise {
  readonly finding: Finding;
  readonly settled: boolean;
  readonly ambient: Celsius;
}

function riseOf(evidence: Evidence, seen: SoakSeen): Rise | undefined {
  const ambient = ambientOfSoak(evidence, seen);
  const last = seen.temperatures.at(-1);
  if (ambient === undefined || last === undefined) return undefined;
  const { settling, step } = seen;
  const to = settling?.settled ?? last;
  const rise = to - ambient.temperature;
  const others = [...thermometerBudget(evidence, to, rise, ambient.from), ...ambient.budget];
  const settled = settling !== undefined && settling.left <= unrisen * Math.abs(rise);
  const note = [
    `${settling === undefined ? `${degrees(to)} were read` : `it settles at ${degrees(to)}`} in air of ` +
      `${degrees(ambient.temperature)}, at ${amps(seen.current)}`,
    ...reachedNote(settling, settled, rise),
    ...(seen.limit !== undefined && to > seen.limit ? [`above its limit of ${degrees(seen.limit)}`] : []),
    ...ambient.note,
  ].join('; ');
  if (settling === undefined) {
    const finding = measured('temperature-rise', 'temperature-difference', rise, others, { step, note });
    return { finding: { ...finding, bound: 'least' }, settled, ambient: ambient.temperature };
  }
  const scatter: Contribution = {
    name: 'curve of settling',
    kind: 'A',
    uncertainty: settling.uncertainty,
    degreesOfFreedom: settling.degreesOfFreedom,
  };
  const finding = measured('temperature-rise', 'temperature-difference', rise, [scatter, ...others], {
    step,
    note,
  });
  return {
    finding: { ...finding, interval: lopsided(rise, settling, others) },
    settled,
    ambient: ambient.temperature,
  };
}

/** What the curve leaves open on each side, and everything else on both. */
function lopsided(
  rise: Kelvins,
  { settled, interval: [low, high] }: SettledTemperature,
  others: readonly Contribution[],
): readonly [number, number] {
  const { expanded } = combine(others);
  return [rise - Math.hypot(settled - low, expanded), rise + Math.hypot(high - settled, expanded)];
}

/** The air that a rise is counted from, and who says so. */
export interface Ambient {
  readonly temperature: Celsius;
  readonly from: 'bench' | 'start';
  readonly budget: readonly Contribution[];
  readonly note: readonly string[];
}

export function ambientOfSoak({ header, steps }: Evidence, seen: SoakSeen): Ambient | undefined {
  const given = header.bench.ambient;
  if (given !== undefined) {
    const budget = [promised('ambient', rectangular(given.uncertainty))];
    return { temperature: given.temperature, from: 'bench', budget, note: [] };
  }
  if (seen.start === undefined) return undefined;
  const worked = steps.some(
    ({ step, points }) =>
      step < seen.step && points.some(({ current }) => current.count > 0 && current.mean > 0.05),
  );
  const { mean, uncertainty, degreesOfFreedom } = seen.start;
  return {
    temperature: mean,
    from: 'start',
    budget: [
      { name: 'temperature before the load', kind: 'A', uncertainty, degreesOfFreedom },
      promised('how much warmer than its air it was', rectangular(worked ? warmthLeft : idleWarmth)),
    ],
    note: [
      worked
        ? 'the air was not measured: the temperature before the soak counts for it, though the steps before had warmed the module'
        : 'the air was not measured: the temperature before the load counts for it',
    ],
  };
}

function thermometerBudget(
  { header }: Evidence,
  to: Celsius,
  rise: Kelvins,
  from: Ambient['from'],
): readonly Contribution[] {
  const { of, gain, offset, resolution } = promisedErrors(header, 'thermometer', 'temperature');
  return from === 'start'
    ? [promised(`${of}, gain`, gain * rise), promised(`${of}, resolution`, resolution * Math.SQRT2)]
    : [
        promised(`${of}, gain`, gain * to),
        promised(`${of}, offset`, offset),
        promised(`${of}, resolution`, resolution),
      ];
}

function reachedNote(
  settling: SettledTemperature | undefined,
  settled: boolean,
  rise: Kelvins,
): readonly string[] {
  if (settling === undefined) return ['still on its way, and too early to tell where to'];
  if (settled) return settling.timeConstant === undefined ? ['no change was seen any more'] : [];
  const reached = Math.max(0, Math.floor((1 - settling.left / Math.abs(rise)) * 100));
  return [`predicted, not reached: the soak saw ${reached} % of it`];
}

/** Never below zero: even on the scale of its logarithm. */
function timeConstantFinding(
  { value, uncertainty, degreesOfFreedom }: TimeConstant,
  { step }: SoakSeen,
): Finding {
  const budget: Contribution = { name: 'curve of settling', kind: 'A', uncertainty, degreesOfFreedom };
  const finding = measured('thermal-time-constant', 'time', value, [budget], { step });
  const factor = Math.exp(combine([budget]).expanded / value);
  return { ...finding, interval: [value / factor, value * factor] };
}
