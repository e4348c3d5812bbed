import type { Amperes, Ohms, Volts } from '../quantity/quantity.js';
import { mean } from '../statistics/checked.js';
import { stepsOf } from './curve.js';
import type { Evidence, PointEvidence, StepEvidence } from './evidence.js';
import { type Finding, inWords } from './finding.js';
import type { LimitTrace } from './limit-trace.js';
import { droopAlone, type Verdict } from './limit-verdict.js';

/**
 * `limit-style`: what the overload that a search watched speaks for, and what a trace at constant voltage
 * does (its rules stand with it). Where both speak they must agree; else it is `undetermined`, and the note
 * names both.
 *
 * Of the overload on a constant-current load, from its samples and from whether the module came back when
 * it was over; one rule a style:
 *
 * - latch-off: after the overload the voltage stayed away.
 * - hiccup: the samples change between a current of the limit's size and next to none; or there was no
 *   current at any time and the module came back by itself.
 * - constant-power: the set current went on flowing, and the voltage fell in proportion: V·I as at the
 *   dropout. Not where the droop alone explains the fall: then no limit was met yet.
 * - constant-current: the current stayed within a tenth of the dropout current, the voltage collapsed.
 * - foldback: a steady current clearly below the dropout current, the voltage collapsed.
 *
 * Where none fits, or a style's marks are mixed, it is `undetermined`.
 */
export function limitStyleFindings(
  evidence: Evidence,
  found: {
    readonly dropout: Amperes | undefined;
    readonly openCircuit: Volts | undefined;
    readonly droop: Ohms | undefined;
    readonly trace?: LimitTrace | undefined;
  },
): readonly Finding[] {
  const verdict = together(overloadVerdict(evidence, found), found.trace);
  return verdict === undefined
    ? []
    : [inWords('limit-style', verdict.style, { step: verdict.step, note: verdict.because })];
}

type Spoken = Verdict & { readonly step: number };

function together(overload: Spoken | undefined, trace: Spoken | undefined): Spoken | undefined {
  if (trace === undefined || overload === undefined) return trace ?? overload;
  if (trace.style === 'undetermined') return overload;
  if (overload.style === 'undetermined' || overload.style === trace.style) return trace;
  return {
    style: 'undetermined',
    step: trace.step,
    because:
      `at constant voltage it looks like ${trace.style} (${trace.because}), ` +
      `under overload like ${overload.style} (${overload.because})`,
  };
}

function overloadVerdict(
  evidence: Evidence,
  found: {
    readonly dropout: Amperes | undefined;
    readonly openCircuit: Volts | undefined;
    readonly droop: Ohms | undefined;
  },
): Spoken | undefined {
  const { dropout, openCircuit, droop = 0 } = found;
  if (dropout === undefined || openCircuit === undefined) return undefined;
  for (const step of stepsOf(evidence, 'dropout-search')) {
    const overload = overloadsOf(step).find(({ samples }) => samples.length >= fewestSamples);
    if (overload === undefined) continue;
    return { ...styleOf(step, overload, { dropout, openCircuit, droop }), step: step.step };
  }
  return undefined;
}

interface Module {
  readonly dropout: Amperes;
  readonly openCircuit: Volts;
  readonly droop: Ohms;
}

/** What was watched of an overload: the samples in which both voltage and current could be read. */
export interface Overload {
  readonly set: Amperes;
  readonly samples: PointEvidence['samples'];
}

export function overloadsOf({ points }: StepEvidence): readonly Overload[] {
  // One without an outcome was broken off: what ended it may be what its samples show.
  return points.filter(({ phase, outcome }) => phase === 'overload' && outcome !== undefined).map(overloadOf);
}

const fewestSamples = 3;
const collapsed = 0.5;
const nothing = 0.05;
const limitSized = 0.4;

function overloadOf({ set, samples }: PointEvidence): Overload {
  return {
    set: set.current ?? Number.NaN,
    samples: samples.filter(({ voltage, current }) => Number.isFinite(voltage) && Number.isFinite(current)),
  };
}

function styleOf(step: StepEvidence, overload: Overload, module: Module): Verdict {
  const { samples } = overload;
  const { dropout, openCircuit } = module;
  const share = (is: (sample: (typeof samples)[number]) => boolean): number =>
    samples.filter(is).length / samples.length;
  const recovered = step.recoveries.at(0)?.outcome;
  const idle = share(({ current }) => current < nothing * dropout);
  const active = share(({ current }) => current > limitSized * dropout);
  const gone = share(({ voltage }) => voltage < collapsed * openCircuit);
  if (recovered === 'stayed-off' && step.recoveries[1]?.outcome === 'stayed-off') {
    return { style: 'undetermined', because: 'it gave no voltage again, even after its input was cycled' };
  }
  if (recovered === 'stayed-off') {
    return { style: 'latch-off', because: 'after the overload the voltage stayed away' };
  }
  if (idle > 0 && active > 0 && idle + active > 0.9) {
    return { style: 'hiccup', because: 'under overload it tries again and again' };
  }
  if (idle === 1 && recovered === 'came-back') {
    return { style: 'hiccup', because: 'under overload it gives nothing, and comes back by itself' };
  }
  const currents = samples.map(({ current }) => current);
  const current = mean(currents);
  const steady = Math.max(...currents) - Math.min(...currents) < 0.1 * dropout;
  if (!steady)
    return { style: 'undetermined', because: 'the overload current was neither steady nor in pulses' };
  if (gone === 0) return withoutCollapse(overload, module, current);
  if (gone < 1)
    return { style: 'undetermined', because: 'the voltage collapsed for a part of the time only' };
  if (Math.abs(current - dropout) < 0.1 * dropout) {
    return { style: 'constant-current', because: 'under overload the current stays at the limit' };
  }
  if (current > nothing * dropout && current < 0.9 * dropout) {
    return {
      style: 'foldback',
      because: `under overload the current falls to ${Math.round((current / dropout) * 100)} % of the limit`,
    };
  }
  return { style: 'undetermined', because: 'no rule fits the overload' };
}

/**
 * The voltage sagged and stayed up, with the set current flowing or not. On the hyperbola means that the
 * power is within about a tenth of that at the dropout, which lies some per cent below V0·I.
 */
function withoutCollapse({ set, samples }: Overload, module: Module, current: Amperes): Verdict {
  const { dropout, openCircuit, droop } = module;
  const voltage = mean(samples.map((sample) => sample.voltage));
  const share = (voltage * current) / (openCircuit * dropout);
  const flows = Math.abs(current - set) < 0.05 * set;
  if (!flows || share >= 1.05 || share <= 0.85) {
    return { style: 'undetermined', because: 'the voltage sagged and did not collapse' };
  }
  if (droop * current > droopAlone * (openCircuit - voltage)) {
    return { style: 'undetermined', because: 'the voltage sags by droop alone: no limit was met yet' };
  }
  return { style: 'constant-power', because: 'under overload the power stays what it was at the limit' };
}
