import * as z from '../libraries/zod.js';
import { quantity } from '../files/building-blocks.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Seconds } from '../quantity/quantity.js';
import { defineStep } from './define-step.js';

const day: Seconds = 24 * 3600;

export const wait = defineStep({
  kind: 'wait',
  summary: 'waits, with the load as the step before left it: off',
  parameters: z.strictObject({ for: quantity('time', 'how long to wait', { least: 0, most: day }) }),
  measures: [],
  needs: { liveModule: false, operator: 'never' },
  references: () => ({}),
  currents: [],
  describe: (parameters) => `waits ${formatQuantity(parameters.for, 'time')}`,
  duration: (parameters) => parameters.for,
  async perform(parameters, { clock, signal, show }) {
    show({ note: 'waiting' });
    await clock.sleep(parameters.for, signal);
  },
});
