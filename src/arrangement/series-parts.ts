import { amps, ratedAmperes } from '../analysis/in-words.js';
import { formatExact, formatQuantity } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';
import type { Part } from './build.js';
import { moduleParts } from './module-parts.js';
import type { ModuleProfile } from './module-profile.js';
import type { ReverseDiode } from './series-build.js';

/**
 * What is bought for a string: its modules, and a diode across each, alike ones on one line; numbered on after so
 * many modules of others.
 */
export function seriesParts(
  profiles: readonly ModuleProfile[],
  diodes: readonly ReverseDiode[],
  after = 0,
): readonly Part[] {
  const marked = diodes.map((diode, index) => ({ mark: `D${after + index + 1}`, diode }));
  const ratings = [...new Set(marked.map(({ diode }) => ratingOf(diode)))];
  return [
    ...moduleParts(profiles),
    ...ratings.map((rating): Part => {
      const alike = marked.filter(({ diode }) => ratingOf(diode) === rating);
      return {
        marks: alike.map(({ mark }) => mark),
        what: "rectifier diode across its module's output, cathode to the plus",
        ratings: rating.split(separator),
        why: whyOf(alike.map(({ diode }) => diode)),
      };
    }),
  ];
}

const separator = ', ';

function ratingOf({ rating: { current, voltage } }: ReverseDiode): string {
  return [`at least ${ratedAmperes(current)}`, `${volts(voltage)} reverse`].join(separator);
}

function whyOf(diodes: readonly ReverseDiode[]): string {
  const most = Math.max(...diodes.map(({ current }) => current));
  const voltage = Math.max(...diodes.map((diode) => diode.voltage));
  const heat = Math.max(...diodes.map((diode) => diode.heat));
  const pushed = diodes.some(({ bound }) => bound === 'least')
    ? `${amps(most)} or more (not all records show how much more)`
    : `up to ${amps(most)}`;
  return `when a module fails, the others push ${pushed} through its diode; without it the failed output is driven backwards by up to ${volts(voltage)}. That makes up to ${formatQuantity(heat, 'power', { significant: 2 })} of heat until the load is off: give it a heat sink, or a thermal switch that takes the load off`;
}

function volts(voltage: Volts): string {
  const { value, unit } = formatExact(voltage, 'voltage');
  return `${value} ${unit}`;
}
