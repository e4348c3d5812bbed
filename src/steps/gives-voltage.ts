import type { Points } from './point.js';
import type { Volts } from '../quantity/quantity.js';
import type { StepContext } from './step-kind.js';

/** Enough to see whether anything is there. */
const looks = 2;

/**
 * Whether the idle module gives its voltage, with the input off: an earlier step may have left it latched
 * with nobody there to cycle its input. Where it does not, the journal says that there is nothing to do.
 */
export async function givesVoltage(context: StepContext, points: Points, least: Volts): Promise<boolean> {
  await context.bench.load.inputOff();
  const { outcome } = await points.take({
    phase: 'idle',
    set: {},
    dwell: 0,
    readings: looks,
    judge: ({ voltage }) => (voltage >= least ? 'held' : 'dropped'),
  });
  if (outcome === 'held') return true;
  context.journal.append({
    event: 'notice',
    text: 'the module gives no voltage; this step is left out',
  });
  return false;
}
