import * as z from '../libraries/zod.js';
import { count, quantity, quantityOrShare } from '../files/building-blocks.js';
import { formatQuantity, formatShare } from '../quantity/format-quantity.js';
import type { Amperes, QuantityOrShare, Ratio, Seconds } from '../quantity/quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import { defineStep } from './define-step.js';
import { longestDwell } from './dwell.js';
import { givesVoltage } from './gives-voltage.js';
import { holds } from './holding.js';
import { openCircuitVoltage } from './known-voltage.js';
import { Points } from './point.js';
import { comeBack } from './recover.js';
import type { StepContext } from './step-kind.js';

/** An overload heats the module more than anything that it is made for. */
const longestOverload: Seconds = 30;
const longestRecovery: Seconds = 600;
/** Of the dropout current, or else of the nameplate's. */
const usualOverload: Ratio = 1.3;
const watchInterval: Seconds = 0.05;
/** Fewer do not tell that the voltage dropped. */
const fewestLooks = 3;
const goldenShare = (Math.sqrt(5) - 1) / 2;

export const recoveryCheck = defineStep({
  kind: 'recovery-check',
  summary: 'overloads the module, takes the load off and times its coming back; several times',
  parameters: z.strictObject({
    overload: quantityOrShare(
      'current',
      'more than the module holds; 130 % of its dropout current when left out, or else of its rated current, as far as the bench allows',
      { above: 0 },
    ).exactOptional(),
    for: quantity('time', 'how long an overload lasts; up to half as long again, each time differently', {
      above: 0,
      most: longestOverload,
    }).prefault('2 s'),
    dwell: quantity('time', 'settling of an overload before the first look at it', {
      least: 0,
      most: longestDwell,
    }).prefault('300 ms'),
    times: count('how many overloads', { least: 1, most: 100 }).default(3),
    rest: quantity('time', 'how long the module rests between two overloads', {
      least: 0,
      most: longestRecovery,
    }).prefault('5 s'),
    sag: quantity(
      'ratio',
      'the module is overloaded, and not yet back, with its voltage lower by this part',
      {
        above: 0,
        most: 0.5,
      },
    ).prefault('5 %'),
    recovery: quantity('time', 'how long the module may take to come back', {
      above: 0,
      most: longestRecovery,
    }).prefault('10 s'),
  }),
  measures: [],
  needs: { liveModule: true, operator: 'never' },
  references: ({ overload }) => (overload === undefined ? {} : { overload }),
  currents: ['overload'],
  describe: ({ overload, for: lasting, times }) =>
    `${times} ${times === 1 ? 'overload' : 'overloads'} of ` +
    `${overload === undefined ? 'what it does not hold' : formatShare(overload, 'current')}, ` +
    `${formatQuantity(lasting, 'time')} each: works the module beyond its limit`,
  duration: ({ for: lasting, times, rest }) => times * (1.25 * lasting + rest + 1),
  async perform({ for: lasting, dwell, times, rest, sag, recovery, ...given }, context) {
    const { bench, clock, journal, signal, tried } = context;
    const points = new Points(context);
    const openCircuit = openCircuitVoltage(context);
    const least = openCircuit * (1 - sag);
    const current = overloadOf(given.overload, context);
    if (!(await givesVoltage(context, points, least))) return;
    for (let time = 0; time < times; time += 1) {
      if (time > 0) await clock.sleep(rest, signal);
      await bench.load.unload();
      await bench.load.inputOn();
      const dropped = await overload(context, points, {
        current,
        dwell,
        lasting: lasting * (1 + ((time * goldenShare) % 1) / 2),
        judge: holds(openCircuit, sag, current),
      });
      if (!dropped) {
        tried.held = Math.max(current, tried.held ?? current);
        const held = formatQuantity(current, 'current', { significant: 3 });
        journal.append({
          event: 'notice',
          text: `no overload was reached: the module held ${held}; there is nothing to recover from`,
        });
        break;
      }
      tried.dropped = Math.min(current, tried.dropped ?? current);
      // One that latches has shown all there is; nobody need cycle its input again and again.
      if ((await comeBack(context, points, least, recovery)) !== 'came-back') break;
    }
    await bench.load.unload();
    await bench.load.inputOff();
  },
});

/** What was asked for, or what the module is likely not to hold within what the bench allows. */
function overloadOf(asked: QuantityOrShare | undefined, { known, limits, underTest }: StepContext): Amperes {
  if (asked !== undefined) return resolve(asked, known);
  const voltage = known['open-circuit-voltage'] ?? underTest.rated.voltage;
  const holding = known['dropout-current'] ?? underTest.rated.current;
  return Math.min(usualOverload * holding, limits.current.value, limits.power.value / voltage);
}

/**
 * One overload, and whether it was one: the voltage dropped at some time of it. A module that tries again
 * may look alive at the very end. Its end moves through what may be the period of such a module; else
 * each overload would end at the same moment of it, and all recoveries would be alike.
 */
async function overload(
  { clock, signal }: StepContext,
  points: Points,
  given: { current: Amperes; dwell: Seconds; lasting: Seconds; judge: ReturnType<typeof holds> },
): Promise<boolean> {
  const { current, dwell, judge } = given;
  let end = clock.now();
  const { outcome, last } = await points.take(() => {
    let before = clock.now();
    let looks = 0;
    let dropped = false;
    end = before + given.lasting;
    return {
      phase: 'overload',
      set: { current },
      dwell,
      readings: Number.POSITIVE_INFINITY,
      every: watchInterval,
      judge: (seen) => {
        dropped ||= judge(seen) === 'dropped';
        return dropped ? 'dropped' : 'held';
      },
      until: ({ t }) => {
        const next = t + (t - before);
        before = t;
        looks += 1;
        return looks >= fewestLooks && next > end;
      },
    };
  });
  await clock.sleep(Math.max(0, end - last), signal);
  return outcome === 'dropped';
}
