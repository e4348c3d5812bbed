import { formatQuantity } from '../quantity/format-quantity.js';
import { railVoltages } from '../circuit/rail-voltages.js';
import type { Volts } from '../quantity/quantity.js';
import { addedUp } from './added-up.js';
import type { ModuleProfile } from './module-profile.js';
import type { Rail } from './series-build.js';

/** What a rail's top reaches at its highest is what its isolation must bear. */
type Place = Pick<Rail, 'top' | 'isolation'>;

/** What stands in a string, as far as its voltages go. */
export type Stacked = Pick<ModuleProfile, 'name' | 'openCircuit' | 'outputIsolation'>;

/**
 * Where each output of a string stands with no load, the lowest first: Σ of the open-circuit voltages below it,
 * and with its own. The string's 0 V is taken to be earthed, at that point and no other, so each output's
 * isolation to earth has to bear what its upper end stands at, taken at the upper end of its interval.
 */
export function railsOf(profiles: readonly Stacked[]): readonly Rail[] {
  const floats = railVoltages(profiles.map(({ openCircuit }) => openCircuit.value));
  return profiles.map((profile, below) => {
    const upTo = (end: number) =>
      addedUp(profiles.slice(0, end).map(({ openCircuit }) => ({ taken: openCircuit, times: 1 })));
    const { name: module, outputIsolation: isolation } = profile;
    const float = { ...upTo(below), value: floats[below] ?? 0 };
    const top = upTo(below + 1);
    return {
      module,
      float,
      top,
      isolation,
      verdict: below === 0 ? 'not-needed' : verdictOn({ top, isolation }),
    };
  });
}

/** Of what does not lie at the 0 V. */
export function verdictOn({ top, isolation }: Place): Rail['verdict'] {
  if (isolation === 'unknown') return 'unknown';
  return top.high <= isolation ? 'within' : 'beyond';
}

/** The highest that anything on the string can stand at. */
export function highestOf(rails: readonly Rail[]): Volts {
  return Math.max(0, ...rails.map(({ top }) => top.high));
}

/** How a sentence writes what a rail stands at. */
export function railVolts(voltage: Volts): string {
  return formatQuantity(voltage, 'voltage', { significant: 4 });
}

/** The same of the highest that it may be, never rounded down: what is beyond a limit is written beyond it. */
export function railVoltsAtMost(voltage: Volts): string {
  if (voltage === 0) return railVolts(voltage);
  const step = 10 ** (Math.floor(Math.log10(voltage)) - 3);
  // A whole number of steps is not made one more by what dividing loses.
  return railVolts(Math.ceil(voltage / step - 1e-9) * step);
}
