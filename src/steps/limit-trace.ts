import * as z from '../libraries/zod.js';
import { count, quantity, quantityOrShare } from '../files/building-blocks.js';
import { formatQuantity, formatShare } from '../quantity/format-quantity.js';
import type { Seconds, Volts } from '../quantity/quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import { defineStep } from './define-step.js';
import { longestDwell } from './dwell.js';
import { TraceRisesError } from './step-error.js';
import { Trace } from './trace.js';

/** Each point works the module at its limit. */
const longestPoint: Seconds = 30;
const longestRecovery: Seconds = 600;
/** What a load needs at its terminals when its driver does not say. */
const usualLeastVoltage: Volts = 1;

export const limitTrace = defineStep({
  kind: 'limit-trace',
  summary:
    'constant-voltage points downwards from just below open circuit: how the module limits, and its short-circuit current',
  parameters: z.strictObject({
    from: quantityOrShare('voltage', 'the first and highest point, at the load', { above: 0 }).prefault(
      '98 % of open-circuit-voltage',
    ),
    to: quantityOrShare(
      'voltage',
      "the last and lowest point, at the load; the load's least voltage when left out",
      { least: 0 },
    ).exactOptional(),
    ceiling: quantityOrShare('current', 'the trace ends before the module gives more than this', {
      above: 0,
    }).prefault('200 % of rated-current'),
    points: count('how many points, both ends included', { least: 2, most: 1000 }).default(12),
    dwell: quantity('time', 'settling before the first reading of a point', {
      least: 0,
      most: longestDwell,
    }).prefault('300 ms'),
    readings: count('how many readings at a point, at least', { least: 2, most: 1000 }).default(5),
    watch: quantity('time', 'how long a point is watched: longer than a module takes to try again', {
      least: 0,
      most: longestPoint,
    }).prefault('2 s'),
    rest: quantity('time', 'how long the module rests between two points, the input off; 0 s for no rest', {
      least: 0,
      most: longestRecovery,
    }).prefault('1 s'),
    recovery: quantity('time', 'how long the module may take to come back', {
      above: 0,
      most: longestRecovery,
    }).prefault('10 s'),
  }),
  measures: [],
  needs: {
    liveModule: true,
    operator: 'never',
    operations: { load: ['voltage-mode', 'set-voltage'] },
  },
  references: ({ from, to, ceiling }) => ({ from, ceiling, ...(to === undefined ? {} : { to }) }),
  currents: [],
  describe: ({ points, from, to, watch }) =>
    `${points} points from ${formatShare(from, 'voltage')} down to ` +
    `${to === undefined ? "the load's least voltage" : formatShare(to, 'voltage')}, ` +
    `${formatQuantity(watch, 'time')} each: works the module at its limit`,
  duration: ({ points, dwell, readings, watch, rest }) =>
    points * (dwell + Math.max(readings * 0.1, watch) + rest),
  async perform(given, context) {
    const { known, bench } = context;
    const { leastVoltage = usualLeastVoltage } = bench.load.instrument.driver.ratings;
    const from = resolve(given.from, known);
    const to = given.to === undefined ? Math.min(leastVoltage, from) : resolve(given.to, known);
    if (to > from) throw new TraceRisesError(from, to);
    await new Trace({ ...given, from, to, ceiling: resolve(given.ceiling, known) }, context).run();
  },
});
