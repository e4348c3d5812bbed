import type { Volts } from '../quantity/quantity.js';
import { clearLatch } from './clear-latch.js';
import type { Points } from './point.js';
import { startUp } from './start-up.js';
import type { StepContext } from './step-kind.js';

/** Enough to see whether anything is there. */
const looks = 2;

/**
 * Whether the idle module gives its voltage, with the input off: an earlier step may have left it latched
 * with nobody there to cycle its input. Where a source feeds it that is done now. Where it gives none, the
 * journal says that there is nothing to do.
 */
export async function givesVoltage(context: StepContext, points: Points, least: Volts): Promise<boolean> {
  const { bench, clock, journal, signal } = context;
  await bench.load.inputOff();
  if (await isThere(points, least)) return true;
  if (bench.source !== undefined && (await clearLatch(context))) {
    await clock.sleep(startUp, signal);
    if (await isThere(points, least)) return true;
  }
  journal.append({ event: 'notice', text: 'the module gives no voltage; this step is left out' });
  return false;
}

async function isThere(points: Points, least: Volts): Promise<boolean> {
  const { outcome } = await points.take({
    phase: 'idle',
    set: {},
    dwell: 0,
    readings: looks,
    judge: ({ voltage }) => (voltage >= least ? 'held' : 'dropped'),
  });
  return outcome === 'held';
}
