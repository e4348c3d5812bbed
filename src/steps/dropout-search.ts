import * as z from '../libraries/zod.js';
import { count, quantity, quantityOrShare } from '../files/building-blocks.js';
import { formatQuantity, formatShare } from '../quantity/format-quantity.js';
import type { Seconds } from '../quantity/quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import { defineStep } from './define-step.js';
import { longestDwell } from './dwell.js';
import { Search } from './search.js';

/** An overload heats the module more than anything that it is made for. */
const longestOverload: Seconds = 30;
const longestRecovery: Seconds = 600;

const parameters = z.strictObject({
  from: quantityOrShare('current', 'a current which the module is expected to hold', {
    above: 0,
  }).prefault('100 % of rated-current'),
  ceiling: quantityOrShare('current', 'the search goes no higher', { above: 0 }),
  resolution: quantity('current', 'how close the held and the dropped current shall come', {
    least: 0.001,
  }).prefault('10 mA'),
  sag: quantity('ratio', 'the module has dropped out when its voltage has fallen by this part', {
    above: 0,
    most: 0.5,
  }).prefault('5 %'),
  climb: count('how many steps of the coarse climb lead to the ceiling', { least: 2, most: 1000 }).default(
    10,
  ),
  dwell: quantity('time', 'settling before the first reading of a probe', {
    least: 0,
    most: longestDwell,
  }).prefault('300 ms'),
  readings: count('how many readings at a probe', { least: 2, most: 1000 }).default(5),
  watch: quantity('time', 'how long the first overload is watched, to see how the module limits', {
    least: 0,
    most: longestOverload,
  }).prefault('2.5 s'),
  recovery: quantity('time', 'how long the module may take to come back', {
    above: 0,
    most: longestRecovery,
  }).prefault('10 s'),
});

/** A coarse climb, some twelve probes between, and half of those followed by a recovery. */
const expectedProbes = 24;

export const dropoutSearch = defineStep({
  kind: 'dropout-search',
  summary: 'climbs until the module drops out, then closes in by halves; proves recovery after each dropout',
  parameters,
  measures: ['dropout-current'],
  needs: { liveModule: true, operator: 'never' },
  references: ({ from, ceiling }) => ({ from, ceiling }),
  currents: ['from', 'ceiling'],
  rises: { from: 'from', to: 'ceiling', mayBeLevel: false },
  describe: ({ from, ceiling, resolution }) =>
    `from ${formatShare(from, 'current')} up to ${formatShare(ceiling, 'current')}, to within ${formatQuantity(resolution, 'current')}`,
  duration: ({ dwell, readings, watch }) => expectedProbes * (dwell + readings * 0.1) + watch,
  async perform(given, context) {
    const search = new Search(
      { ...given, from: resolve(given.from, context.known), ceiling: resolve(given.ceiling, context.known) },
      context,
    );
    const bracket = await search.run();
    if (bracket.dropped !== undefined)
      context.known['dropout-current'] = (bracket.held + bracket.dropped) / 2;
  },
});
