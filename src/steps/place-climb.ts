import { count, quantity } from '../files/building-blocks.js';
import type { Amperes, Ratio, Seconds } from '../quantity/quantity.js';
import { longestDwell } from './dwell.js';
import { holds } from './holding.js';
import { openCircuitVoltage } from './known-voltage.js';
import type { Pass } from './place-passes.js';
import type { Points } from './point.js';
import { comeBack } from './recover.js';
import { ModuleStaysOffError } from './step-error.js';
import type { StepContext } from './step-kind.js';

/** How long what did not hold a point may take to come back. */
const patience: Seconds = 10;

/** What a climb through the places of a circuit is told in a procedure, whatever the circuit. */
export const climbParameters = {
  points: count('how many points, both ends included', { least: 2, most: 1000 }).default(11),
  dwell: quantity('time', 'settling before the first reading of a point', {
    least: 0,
    most: longestDwell,
  }).prefault('500 ms'),
  readings: count('how many readings at a point, of each place', { least: 2, most: 1000 }).default(5),
  sag: quantity(
    'ratio',
    'it ends where the voltage of the whole has fallen by this part of the open-circuit voltage',
    { above: 0, most: 0.5 },
  ).prefault('10 %'),
};

export interface Climb {
  readonly phase: 'share' | 'stack';
  readonly from: Amperes;
  readonly to: Amperes;
  readonly points: number;
  readonly dwell: Seconds;
  readonly readings: number;
  readonly sag: Ratio;
  /** Set-points from here on are left out: an earlier pass saw that they are not held. */
  readonly below: Amperes;
  readonly hold?: { readonly for: Seconds; readonly every: Seconds };
}

/**
 * Climbs through the same set-points on each pass, every place that the pass reaches read at each. Where the
 * whole no longer holds, the load goes off, the voltage must come back, and the first set-point is taken once
 * more: a module that has latched off while others go on shows there.
 */
export async function climb(
  context: StepContext,
  points: Points,
  { taps, of }: Pass,
  plan: Climb,
): Promise<{ readonly dropped: Amperes | undefined }> {
  const { load } = context.bench;
  const voltage = openCircuitVoltage(context);
  const take = (current: Amperes, phase: Climb['phase'] | 'proof', dwell = plan.dwell) =>
    points.take({
      phase,
      set: { current },
      ...(of === undefined ? {} : { of }),
      dwell,
      readings: plan.readings,
      wanted: { taps },
      judge: phase === 'proof' ? () => 'measured' : holds(voltage, plan.sag, current),
    });
  await load.unload();
  await load.inputOn();
  let dropped: Amperes | undefined;
  for (const current of setPoints(plan)) {
    if (current >= plan.below) break;
    const { outcome } = await take(current, plan.phase);
    if (outcome === 'held') {
      context.tried.held = Math.max(current, context.tried.held ?? current);
      continue;
    }
    dropped = current;
    context.tried.dropped = Math.min(current, context.tried.dropped ?? current);
    context.journal.append({
      event: 'notice',
      text: 'the circuit did not hold this point; it goes no higher',
    });
    const back = await comeBack(context, points, voltage * (1 - plan.sag), patience);
    if (back === 'stayed-off') throw new ModuleStaysOffError(false);
    await load.unload();
    await load.inputOn();
    await take(plan.from, 'proof');
    break;
  }
  if (dropped === undefined && plan.hold !== undefined) await holdLast(context, plan.hold, take, plan);
  await load.unload();
  await load.inputOff();
  return { dropped };
}

async function holdLast(
  { clock }: StepContext,
  hold: NonNullable<Climb['hold']>,
  take: (current: Amperes, phase: Climb['phase'], dwell: Seconds) => Promise<unknown>,
  { to, below, phase }: Climb,
): Promise<void> {
  const end = clock.now() + hold.for;
  while (to < below && clock.now() < end) await take(to, phase, hold.every);
}

function setPoints({ from, to, points }: Climb): readonly Amperes[] {
  return Array.from({ length: points }, (_, index) =>
    // The last one exactly: rounding must not carry it beyond what the bench allows.
    index === points - 1 ? to : from + ((to - from) * index) / (points - 1),
  );
}
