import type { Seconds, Volts } from '../quantity/quantity.js';
import { clearLatch } from './clear-latch.js';
import type { Points } from './point.js';
import { ModuleStaysOffError } from './step-error.js';
import type { StepContext } from './step-kind.js';

export type CameBack = 'came-back' | 'came-back-after-cycling' | 'stayed-off';

const lookEvery: Seconds = 0.02;

/**
 * Takes the load off after an overload and waits for the voltage to be back. A module that stays off has
 * latched: where a source feeds it, or someone can act, its input is cycled, and the wait begins again.
 * @throws ModuleStaysOffError when it stays off after that too.
 */
export async function comeBack(
  context: StepContext,
  points: Points,
  least: Volts,
  patience: Seconds,
): Promise<CameBack> {
  const { bench, journal, clock, step } = context;
  const { gaps } = bench;
  const unloaded = clock.now();
  await bench.load.inputOff();
  const byItself = await waitForVoltage(points, unloaded, least, patience);
  if (byItself.back) {
    journal.append({
      event: 'recovery',
      step,
      outcome: 'came-back',
      after: byItself.after,
      within: byItself.within,
      ...(bench.gaps === gaps ? {} : { untimed: true }),
    });
    return 'came-back';
  }
  journal.append({ event: 'recovery', step, outcome: 'stayed-off', after: patience, within: patience });
  if (!(await clearLatch(context))) return 'stayed-off';
  const cycled = await waitForVoltage(points, clock.now(), least, patience);
  const outcome = cycled.back ? 'came-back-after-cycling' : 'stayed-off';
  journal.append({ event: 'recovery', step, outcome, after: cycled.after, within: cycled.within });
  if (!cycled.back) throw new ModuleStaysOffError(true);
  return outcome;
}

/** The voltage was still away `after` seconds and back `within` seconds from the start. */
async function waitForVoltage(
  points: Points,
  start: Seconds,
  least: Volts,
  patience: Seconds,
): Promise<{ back: boolean; after: Seconds; within: Seconds }> {
  const { outcome, before, last } = await points.take({
    phase: 'recovery',
    set: {},
    dwell: 0,
    readings: Number.POSITIVE_INFINITY,
    every: lookEvery,
    judge: ({ voltage }) => (voltage >= least ? 'held' : 'dropped'),
    until: ({ t }, judged) => judged === 'held' || t - start > patience,
  });
  return { back: outcome === 'held', after: (before ?? start) - start, within: last - start };
}
