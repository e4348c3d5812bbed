import type { Amperes, Volts } from '../quantity/quantity.js';
import { stepsOf } from './curve.js';
import type { Evidence, PointEvidence, StepEvidence } from './evidence.js';
import { type Finding, inWords } from './finding.js';

/**
 * How a module limits, as far as a constant-current load can show it: from the samples of an overload
 * that was watched, and from whether the module came back when it was over. One rule a style:
 *
 * - latch-off: after the overload the voltage stayed away.
 * - hiccup: the samples change between a current of the limit's size and next to none; or there was no
 *   current at any time and the module came back by itself.
 * - constant-power: the set current went on flowing, and the voltage fell in proportion: V·I as at the dropout.
 * - constant-current: the current stayed within a tenth of the dropout current, the voltage collapsed.
 * - foldback: a steady current clearly below the dropout current, the voltage collapsed.
 *
 * Where none fits, or a style's marks are mixed, it is `undetermined`.
 */
export function limitStyleFindings(
  evidence: Evidence,
  dropout: Amperes | undefined,
  openCircuit: Volts | undefined,
): readonly Finding[] {
  if (dropout === undefined || openCircuit === undefined) return [];
  for (const step of stepsOf(evidence, 'dropout-search')) {
    const overload = step.points.find((point) => point.phase === 'overload' && point.samples.length >= 3);
    if (overload === undefined) continue;
    const { style, because } = styleOf(step, overload, dropout, openCircuit);
    return [inWords('limit-style', style, { step: step.step, note: because })];
  }
  return [];
}

interface Verdict {
  readonly style:
    'latch-off' | 'hiccup' | 'constant-power' | 'constant-current' | 'foldback' | 'undetermined';
  readonly because: string;
}

const collapsed = 0.5;
const nothing = 0.05;
const limitSized = 0.4;

function styleOf(step: StepEvidence, overload: PointEvidence, dropout: Amperes, openCircuit: Volts): Verdict {
  const samples = overload.samples.filter(
    ({ voltage, current }) => !Number.isNaN(voltage) && !Number.isNaN(current),
  );
  const share = (is: (sample: (typeof samples)[number]) => boolean): number =>
    samples.filter(is).length / samples.length;
  const recovered = step.recoveries.at(0)?.outcome;
  const idle = share(({ current }) => current < nothing * dropout);
  const active = share(({ current }) => current > limitSized * dropout);
  const gone = share(({ voltage }) => voltage < collapsed * openCircuit);
  if (recovered === 'stayed-off') {
    return { style: 'latch-off', because: 'after the overload the voltage stayed away' };
  }
  if (idle > 0 && active > 0 && idle + active > 0.9) {
    return { style: 'hiccup', because: 'under overload it tries again and again' };
  }
  if (idle === 1 && recovered === 'came-back') {
    return { style: 'hiccup', because: 'under overload it gives nothing, and comes back by itself' };
  }
  const mean = overload.current.mean;
  const steady = overload.current.maximum - overload.current.minimum < 0.1 * dropout;
  if (!steady)
    return { style: 'undetermined', because: 'the overload current was neither steady nor in pulses' };
  if (gone === 0 && followsHyperbola(overload, dropout, openCircuit)) {
    return { style: 'constant-power', because: 'under overload the voltage falls as the current grows' };
  }
  if (gone < 1) return { style: 'undetermined', because: 'the voltage sagged and did not collapse' };
  if (Math.abs(mean - dropout) < 0.1 * dropout) {
    return { style: 'constant-current', because: 'under overload the current stays at the limit' };
  }
  if (mean > nothing * dropout && mean < 0.9 * dropout) {
    return {
      style: 'foldback',
      because: `under overload the current falls to ${Math.round((mean / dropout) * 100)} % of the limit`,
    };
  }
  return { style: 'undetermined', because: 'no rule fits the overload' };
}

/** Within a twentieth of the power at the dropout, with the set current flowing. */
function followsHyperbola(overload: PointEvidence, dropout: Amperes, openCircuit: Volts): boolean {
  const set = overload.set.current ?? Number.NaN;
  const power = overload.moduleVoltage.mean * overload.current.mean;
  const flows = Math.abs(overload.current.mean - set) < 0.05 * set;
  return flows && power < openCircuit * dropout * 1.05 && power > openCircuit * dropout * 0.85;
}
