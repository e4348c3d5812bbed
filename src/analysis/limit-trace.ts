import type { Amperes, Ohms, Volts } from '../quantity/quantity.js';
import { mean } from '../statistics/checked.js';
import { stepsOf } from './curve.js';
import type { Evidence, PointEvidence, StepEvidence } from './evidence.js';
import { volts } from './in-words.js';
import { droopAlone, type Verdict } from './limit-verdict.js';

/** What the points of a trace at constant voltage speak for. */
export interface LimitTrace extends Verdict {
  readonly step: number;
  /** All that could be read, in the order in which they were taken. */
  readonly points: readonly TracedAt[];
  /** Past the limit, all of them steady, from the highest voltage down; empty where the module gives up instead. */
  readonly limited: readonly TracedPoint[];
}

/** A point of the limit curve. */
export interface TracedPoint {
  /** At the module; what the load held where the module gave nothing steady. */
  readonly voltage: Volts;
  /** The mean; the largest seen where it gave something at times only, 0 where it never did. */
  readonly current: Amperes;
}

/** What the module gave in the samples of a point: at all times, at some, at none. */
type Gives = 'all' | 'some' | 'none';

interface Traced extends TracedPoint {
  readonly gives: Gives;
  /** How many samples there were, and in how many of them it gave what it was asked for. */
  readonly samples: number;
  readonly giving: number;
}

/** A point of a trace, and whether it still lies on the regulated line. */
export interface TracedAt extends Traced {
  readonly isRegulated: boolean;
}

/** Held at a voltage and found below this part of it, the module gives nothing. */
const gone = 0.5;
/** A fall by less than this is regulation, whatever the droop is. */
const regulating = 0.01;
const fewestPoints = 3;
/** The trace must come down to this part of the open-circuit voltage, to tell a limit that holds from one that gives up. */
const deep = 0.5;
/** Of the largest current: steadier than this it is the same. */
const same = 0.1;
/** Of the largest current: what rises by less on the way down does not rise. */
const wobble = 0.03;

/**
 * How a module limits, by a trace downwards at constant voltage. One rule a style, of the points past the
 * regulated line:
 *
 * - latch-off: the voltage stayed away after a point.
 * - constant-power: the current rises as the voltage falls, V·I within a tenth, over a tenth of the
 *   open-circuit voltage or more; below that it may give up.
 * - hiccup: at some voltage and below it gives current at times and none at others, or none at all and
 *   comes back by itself when the load is off, which must have been seen.
 * - constant-current: a steady current, within a tenth, down to below half the open-circuit voltage.
 * - foldback: a steady current that falls with the voltage, by more than a tenth, as far down.
 *
 * `undetermined` where none fits. Undefined where nothing was traced, or nothing is known to compare with.
 */
export function limitTraceOf(
  evidence: Evidence,
  found: { readonly openCircuit: Volts | undefined; readonly droop: Ohms | undefined },
): LimitTrace | undefined {
  const { openCircuit, droop = 0 } = found;
  if (openCircuit === undefined) return undefined;
  for (const step of stepsOf(evidence, 'limit-trace')) {
    const points = step.points
      .flatMap(tracedPoint)
      .map((point) => ({ ...point, isRegulated: isRegulated(point, { openCircuit, droop }) }));
    if (points.length === 0) continue;
    const beyond = points.filter((point) => !point.isRegulated);
    const verdict = afterOverload(step) ?? styleOf(beyond, openCircuit, step);
    const holds = beyond.every(({ gives }) => gives === 'all');
    return { ...verdict, step: step.step, points, limited: holds ? beyond : [] };
  }
  return undefined;
}

function tracedPoint({ phase, outcome, set, samples }: PointEvidence): readonly Traced[] {
  // One without an outcome was broken off: what ended it may be what its samples show.
  if (phase !== 'trace' || outcome === undefined || set.voltage === undefined) return [];
  const least = gone * set.voltage;
  const whole = samples.filter(({ voltage, current }) => Number.isFinite(voltage + current));
  const giving = whole.filter(({ voltage }) => voltage >= least);
  if (whole.length === 0) return [];
  const counted = { samples: whole.length, giving: giving.length };
  const currents = whole.map(({ current }) => current);
  if (giving.length === 0) return [{ ...counted, gives: 'none', voltage: set.voltage, current: 0 }];
  if (giving.length < whole.length) {
    return [{ ...counted, gives: 'some', voltage: set.voltage, current: Math.max(...currents) }];
  }
  const voltage = mean(whole.map((sample) => sample.voltage));
  return [{ ...counted, gives: 'all', voltage, current: mean(currents) }];
}

function isRegulated(
  { gives, voltage, current }: Traced,
  { openCircuit, droop }: { readonly openCircuit: Volts; readonly droop: Ohms },
): boolean {
  const fall = openCircuit - voltage;
  return gives === 'all' && (fall <= regulating * openCircuit || droopAlone * fall <= droop * current);
}

/** What its recoveries say alone. */
function afterOverload({ recoveries }: StepEvidence): Verdict | undefined {
  const stayed = recoveries.findIndex(({ outcome }) => outcome === 'stayed-off');
  if (stayed < 0) return undefined;
  return recoveries[stayed + 1]?.outcome === 'stayed-off'
    ? { style: 'undetermined', because: 'it gave no voltage again, even after its input was cycled' }
    : { style: 'latch-off', because: 'held at a lower voltage it switched itself off and stayed off' };
}

function styleOf(beyond: readonly Traced[], openCircuit: Volts, { recoveries }: StepEvidence): Verdict {
  const giving = beyond.filter(({ gives }) => gives === 'all');
  const [highest] = giving;
  const lowest = giving.at(-1);
  const failing = beyond.find(({ gives }) => gives !== 'all');
  const below = failing === undefined ? '' : volts(failing.voltage);
  if (isConstantPower(giving, openCircuit)) {
    const ends = failing === undefined ? '' : `, and gives up at ${below}`;
    return { style: 'constant-power', because: `its power stays the same as its voltage falls${ends}` };
  }
  if (failing !== undefined) {
    const triesAgain = beyond.some(({ gives }) => gives === 'some');
    if (!triesAgain && recoveries.length === 0) {
      return {
        style: 'undetermined',
        because: `held at ${below} it gave nothing, and the run ended before it could come back`,
      };
    }
    return {
      style: 'hiccup',
      because: triesAgain
        ? `held at ${below} and below it tries again and again: no steady current flows into a short`
        : `held at ${below} and below it gives nothing, and comes back by itself`,
    };
  }
  if (highest === undefined || lowest === undefined || giving.length < fewestPoints) {
    return { style: 'undetermined', because: 'the trace met no limit' };
  }
  if (lowest.voltage > deep * openCircuit) {
    return { style: 'undetermined', because: `the trace ended at ${volts(lowest.voltage)}` };
  }
  const most = Math.max(...giving.map(({ current }) => current));
  const least = Math.min(...giving.map(({ current }) => current));
  if (most - least < same * most) {
    return {
      style: 'constant-current',
      because: `the current stays the same down to ${volts(lowest.voltage)}`,
    };
  }
  if (lowest.current < (1 - same) * most && neverRises(giving, wobble * most)) {
    const part = Math.round((lowest.current / most) * 100);
    return {
      style: 'foldback',
      because: `the current falls with the voltage, to ${part} % at ${volts(lowest.voltage)}`,
    };
  }
  return { style: 'undetermined', because: 'the current neither stays nor falls as the voltage does' };
}

function isConstantPower(giving: readonly Traced[], openCircuit: Volts): boolean {
  const [highest] = giving;
  const lowest = giving.at(-1);
  if (highest === undefined || lowest === undefined || giving.length < fewestPoints) return false;
  const powers = giving.map(({ voltage, current }) => voltage * current);
  const most = Math.max(...powers);
  return (
    highest.voltage - lowest.voltage >= 0.1 * openCircuit &&
    lowest.current > (1 + same / 2) * highest.current &&
    most - Math.min(...powers) < same * most
  );
}

function neverRises(points: readonly Traced[], slack: Amperes): boolean {
  return points.every(({ current }, index) => {
    const before = points[index - 1];
    return before === undefined || current <= before.current + slack;
  });
}
