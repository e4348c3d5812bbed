import * as z from '../libraries/zod.js';
import { count, quantity, quantityOrShare } from '../files/building-blocks.js';
import { formatShare } from '../quantity/format-quantity.js';
import type { Amperes, QuantityOrShare, Seconds } from '../quantity/quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import { defineStep } from './define-step.js';
import { longestDwell } from './dwell.js';
import { holds } from './holding.js';
import { openCircuitVoltage } from './known-voltage.js';
import { Points } from './point.js';
import { comeBack } from './recover.js';
import { ModuleStaysOffError } from './step-error.js';
import type { StepContext } from './step-kind.js';

const readingTime = 0.1;
/** How long a module that did not hold a point may take to come back. */
const patience: Seconds = 10;

export const loadRamp = defineStep({
  kind: 'load-ramp',
  summary:
    'constant-current points upwards, and back down where asked: droop, regulation, lead resistance, steadiness',
  parameters: z.strictObject({
    from: quantityOrShare('current', 'the first point', { least: 0 }).prefault('0 A'),
    to: quantityOrShare('current', 'the last point', { above: 0 }),
    points: count('how many points, both ends included', { least: 2, most: 10_000 }).default(21),
    dwell: quantity('time', 'settling before the first reading of a point', {
      least: 0,
      most: longestDwell,
    }).prefault('500 ms'),
    readings: count('how many readings at a point', { least: 2, most: 10_000 }).default(5),
    sag: quantity(
      'ratio',
      'the ramp ends where the voltage has fallen by this part of the open-circuit voltage',
      {
        above: 0,
        most: 0.5,
      },
    ).prefault('20 %'),
    back: z
      .boolean()
      .default(false)
      .describe('whether the same points are taken again downwards, so that warming does not pass for droop'),
  }),
  measures: [],
  needs: { liveModule: true, operator: 'never' },
  references: ({ from, to }) => ({ from, to }),
  currents: ['from', 'to'],
  rises: { from: 'from', to: 'to', mayBeLevel: true },
  describe: ({ points, from, to, back }) =>
    `${points} points from ${formatShare(from, 'current')} to ${formatShare(to, 'current')}${back ? ' and back' : ''}`,
  duration: ({ points, dwell, readings, back }) => (back ? 2 : 1) * points * (dwell + readings * readingTime),
  async perform(parameters, context) {
    const { load } = context.bench;
    const voltage = openCircuitVoltage(context);
    const least = voltage * (1 - parameters.sag);
    await load.unload();
    await load.inputOn();
    const points = new Points(context);
    for (const { phase, current } of pointsOf(parameters, context)) {
      const { outcome } = await points.take({
        phase,
        set: { current },
        dwell: parameters.dwell,
        readings: parameters.readings,
        judge: holds(voltage, parameters.sag, current),
      });
      if (outcome === 'dropped') {
        context.tried.dropped = Math.min(current, context.tried.dropped ?? current);
        context.journal.append({
          event: 'notice',
          text: 'the module did not hold this point; the ramp ends here',
        });
        const back = await comeBack(context, points, least, patience);
        if (back === 'stayed-off') throw new ModuleStaysOffError(false);
        await load.unload();
        return;
      }
      context.tried.held = Math.max(current, context.tried.held ?? current);
    }
    await load.unload();
    await load.inputOff();
  },
});

interface RampPoint {
  readonly phase: 'ramp' | 'down';
  readonly current: Amperes;
}

/**
 * Upwards, and then the same downwards, the highest twice: so each current is met as long before the turning
 * as after it.
 */
function pointsOf(
  given: {
    readonly from: QuantityOrShare;
    readonly to: QuantityOrShare;
    readonly points: number;
    readonly back: boolean;
  },
  { known }: StepContext,
): readonly RampPoint[] {
  const from = resolve(given.from, known);
  const to = resolve(given.to, known);
  const up = Array.from({ length: given.points }, (_, index): RampPoint => {
    const share = index / (given.points - 1);
    // The last one exactly: rounding must not carry it beyond what the bench allows.
    return { phase: 'ramp', current: share === 1 ? to : from + (to - from) * share };
  });
  const down = up.map(({ current }): RampPoint => ({ phase: 'down', current })).reverse();
  return given.back ? [...up, ...down] : up;
}
