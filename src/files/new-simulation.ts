import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import type { ModuleLimit } from './simulation-section.js';
import { comment, written } from './written-yaml.js';

/** The module that a simulated bench is to try things on: as its label has it, and how it limits. */
export interface TriedOn {
  readonly name: string;
  readonly voltage: Volts;
  readonly current: Amperes;
  readonly style: ModuleLimit['style'];
}

/** A module made up from a label: a little above its voltage, soft by half a per cent, good for 130 % of its current. */
const above = { voltage: 1.01, droop: 0.005, limit: 1.3 } as const;

/** The section of a bench file that says what is really there. */
export function simulatedText({ name, voltage, current, style }: TriedOn): string {
  const open = formatQuantity(rounded(above.voltage * voltage), 'voltage');
  const droop = formatQuantity(rounded((above.droop * voltage) / current), 'resistance');
  const limit = formatQuantity(rounded(above.limit * current), 'current');
  return (
    comment(
      'What is really there, as the instruments are simulated: change it, and see whether a run finds it out. ' +
        '`railproof schema bench` lists what else may be said, faults too.',
    ) +
    `simulation:
  seed: 7
  leads: 35 mΩ
  modules:
    - name: ${written(name)}
      open-circuit-voltage: ${open}
      droop-resistance: ${droop}
${comment('style: constant-current, foldback, constant-power, hiccup or latch-off', '      ')}      limit: { style: ${style}, current: ${limit} }
      noise: 1 mV
      rated-current: ${formatQuantity(current, 'current')}
      thermal: { rise-at-rated: 35 K, time-constant: 12 min, ambient: 23 °C, limit-per-kelvin: -0.2 % }
`
  );
}

function rounded(value: number): number {
  return Number(value.toPrecision(4));
}
