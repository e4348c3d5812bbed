import * as z from '../libraries/zod.js';
import { quantityOrShare } from '../files/building-blocks.js';
import { formatShare } from '../quantity/format-quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import { defineStep } from './define-step.js';
import { requireIsolation } from './isolation-proved.js';
import { climbDuration, climbParameters, climbThrough } from './place-climb.js';

export const stackCheck = defineStep({
  kind: 'stack-check',
  summary: "a series string: each module's voltage while the load climbs; refuses modules tied to earth",
  parameters: z.strictObject({
    ...climbParameters,
    from: quantityOrShare('current', 'the first point', { least: 0 }).prefault('0 A'),
    to: quantityOrShare('current', 'the last point', { above: 0 }),
  }),
  measures: [],
  needs: {
    liveModule: true,
    operator: 'never',
    circuits: ['series'],
    after: ['isolation-check'],
    taps: true,
  },
  asks: ({ prove }) => prove,
  references: ({ from, to }) => ({ from, to }),
  currents: ['from', 'to'],
  rises: { from: 'from', to: 'to', mayBeLevel: true },
  describe: ({ points, from, to }) =>
    `${points} points from ${formatShare(from, 'current')} to ${formatShare(to, 'current')}, each module's voltage at each`,
  duration: (given, reach) => climbDuration(given, reach),
  async perform(given, context) {
    requireIsolation(context);
    await climbThrough(context, {
      ...given,
      phase: 'stack',
      from: resolve(given.from, context.known),
      to: resolve(given.to, context.known),
      // The open voltages show it.
      proving: 0,
      // Whose voltage goes at the point that was not held shows at its own place only.
      again: true,
    });
  },
});
