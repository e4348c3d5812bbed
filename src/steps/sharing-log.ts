import * as z from '../libraries/zod.js';
import { quantity, quantityOrShare } from '../files/building-blocks.js';
import { formatQuantity, formatShare } from '../quantity/format-quantity.js';
import type { Seconds } from '../quantity/quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import { defineStep } from './define-step.js';
import { climbDuration, climbParameters, climbThrough } from './place-climb.js';

const day: Seconds = 24 * 3600;
/** Nothing is read between two looks, so nothing guards the group meanwhile. */
const longestBetween: Seconds = 60;
/** Of the smallest label: the more the better it is read across a ballast, and any of them must carry it alone. */
const provingShare = 0.6;

export const sharingLog = defineStep({
  kind: 'sharing-log',
  summary: "total load stepped or held: each module's current from the voltage across its ballast",
  parameters: z.strictObject({
    ...climbParameters,
    from: quantityOrShare('current', 'the first point', { above: 0 }).prefault('10 % of rated-current'),
    to: quantityOrShare('current', 'the last point', { above: 0 }),
    imbalance: quantity('ratio', 'how unequal the currents may be, (largest − smallest) over their mean', {
      above: 0,
      most: 2,
    }).prefault('10 %'),
    tolerance: quantity('ratio', 'of the resistors from which a ballast would be chosen', {
      least: 0,
      most: 0.2,
    }).prefault('1 %'),
    hold: quantity('time', 'how long the last point is held and looked at, to see the shares move', {
      least: 0,
      most: day,
    }).prefault('0 s'),
    every: quantity('time', 'one look each so often while it is held', {
      above: 0,
      most: longestBetween,
    }).prefault('10 s'),
  }),
  measures: [],
  needs: { liveModule: true, operator: 'never', circuits: ['parallel'], taps: true },
  asks: ({ prove }) => prove,
  references: ({ from, to }) => ({ from, to }),
  currents: ['from', 'to'],
  rises: { from: 'from', to: 'to', mayBeLevel: true },
  describe: ({ points, from, to, hold }) =>
    `${points} points from ${formatShare(from, 'current')} to ${formatShare(to, 'current')}, each module's current at each` +
    (hold > 0 ? `, held for ${formatQuantity(hold, 'time')}` : ''),
  duration: (given, reach) => climbDuration(given, reach) + reach.passes * given.hold,
  perform(given, context) {
    const { modules } = context.underTest;
    return climbThrough(context, {
      ...given,
      phase: 'share',
      from: resolve(given.from, context.known),
      to: resolve(given.to, context.known),
      proving: provingShare * Math.min(...modules.map(({ rated }) => rated.current)),
      again: false,
      hold: { for: given.hold, every: given.every },
    });
  },
});
