import * as z from '../libraries/zod.js';
import { quantity } from '../files/building-blocks.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Seconds } from '../quantity/quantity.js';
import { RunningMoments } from '../statistics/running-moments.js';
import { defineStep } from './define-step.js';
import { Points } from './point.js';

/** Samples in one point: enough for a spread, few enough that a drift shows between points. */
const samplesAtOnce = 5;
const betweenPoints = 0.5;
const day: Seconds = 24 * 3600;

export const openCircuit = defineStep({
  kind: 'open-circuit',
  summary: 'input off: the voltage of the idle module, and whether it drifts',
  parameters: z.strictObject({
    for: quantity('time', 'how long to look', { above: 0, most: day }).prefault('5 s'),
  }),
  measures: ['open-circuit-voltage'],
  needs: { liveModule: true, operator: 'never' },
  references: () => ({}),
  currents: [],
  describe: (parameters) => `reads the idle module for ${formatQuantity(parameters.for, 'time')}`,
  duration: (parameters) => parameters.for,
  async perform(parameters, context) {
    await context.bench.load.inputOff();
    const points = new Points(context);
    const end = context.clock.now() + parameters.for;
    const ofPoints = new RunningMoments();
    do {
      const { voltage } = await points.take({
        phase: 'idle',
        set: {},
        dwell: betweenPoints,
        readings: samplesAtOnce,
        judge: () => 'measured',
      });
      ofPoints.add(voltage.mean);
    } while (context.clock.now() < end);
    context.known['open-circuit-voltage'] = ofPoints.mean;
  },
});
