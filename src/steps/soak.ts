import * as z from '../libraries/zod.js';
import { count, quantity, quantityOrShare } from '../files/building-blocks.js';
import { formatQuantity, formatShare } from '../quantity/format-quantity.js';
import type { Seconds } from '../quantity/quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import { defineStep } from './define-step.js';
import { longestDwell } from './dwell.js';
import { Soak } from './soaking.js';

const day: Seconds = 24 * 3600;
/** Nothing is read between two looks, so nothing guards the module meanwhile. */
const longestBetween: Seconds = 60;
const longestWindow: Seconds = 3600;

export const soak = defineStep({
  kind: 'soak',
  summary: 'holds a current until the module has settled: how warm it gets, how slowly, and what it drifts',
  parameters: z.strictObject({
    current: quantityOrShare('current', 'what is held', { above: 0 }),
    for: quantity('time', 'how long at most', { above: 0, most: 7 * day }).prefault('2 h'),
    every: quantity('time', 'from one look to the next', { least: 1, most: longestBetween }).prefault('10 s'),
    dwell: quantity('time', 'settling before the first reading of a look', {
      least: 0,
      most: longestDwell,
    }).prefault('500 ms'),
    readings: count('how many readings at a look', { least: 2, most: 100 }).default(3),
    'settled-within': quantity(
      'temperature-difference',
      'settled when the temperature changes by less than this over the window',
      { above: 0 },
    ).prefault('0.5 K'),
    'voltage-within': quantity(
      'ratio',
      'where nothing measures the temperature: settled when the voltage changes by less than this part',
      { above: 0, most: 0.1 },
    ).prefault('0.02 %'),
    over: quantity('time', 'the window', { least: 10, most: longestWindow }).prefault('10 min'),
    sag: quantity('ratio', 'the module has dropped out when its voltage has fallen by this part', {
      above: 0,
      most: 0.5,
    }).prefault('5 %'),
    limit: quantity('temperature', 'the soak ends when the module gets warmer than this').exactOptional(),
  }),
  measures: [],
  needs: { liveModule: true, operator: 'never' },
  needsThermometer: ({ limit }) => limit !== undefined,
  references: ({ current }) => ({ current }),
  currents: ['current'],
  describe: (given) =>
    `${formatShare(given.current, 'current')} until settled, ${formatQuantity(given.for, 'time')} at most` +
    (given.limit === undefined ? '' : `, not above ${formatQuantity(given.limit, 'temperature')}`),
  duration: (given) => given.for,
  async perform({ for: longest, limit, ...given }, context) {
    const current = resolve(given.current, context.known);
    await new Soak(
      {
        ...given,
        current,
        longest,
        limit,
        settledWithin: given['settled-within'],
        voltageWithin: given['voltage-within'],
      },
      context,
    ).run();
  },
});
