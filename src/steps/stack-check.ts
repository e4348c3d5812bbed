import { z } from 'zod';
import { quantityOrShare } from '../files/building-blocks.js';
import { formatShare } from '../quantity/format-quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import { defineStep } from './define-step.js';
import { requireIsolation } from './isolation-proved.js';
import { climb, climbDuration, climbParameters } from './place-climb.js';
import { passThrough } from './place-passes.js';
import { Points } from './point.js';
import { provePlaces } from './prove-places.js';

const rounding = 1e-9;

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
    const points = new Points(context);
    const from = resolve(given.from, context.known);
    const to = resolve(given.to, context.known);
    let reached = Number.POSITIVE_INFINITY;
    await passThrough(context, async (pass) => {
      if (given.prove) await provePlaces(context, points, pass, { ...given, current: 0 });
      const climbed = await climb(context, points, pass, {
        ...given,
        phase: 'stack',
        from,
        to,
        // The point that was not held is looked at on every pass: whose voltage goes shows at its own place only.
        below: reached * (1 + rounding),
      });
      reached = Math.min(reached, climbed.dropped ?? Number.POSITIVE_INFINITY);
      return reached > from ? 'go-on' : 'enough';
    });
  },
});
