import * as z from '../libraries/zod.js';
import type { Clock } from '../clock/clock.js';
import { count, quantity } from '../files/building-blocks.js';
import type { Amperes, Ratio, Seconds } from '../quantity/quantity.js';
import { handTime } from './ask-to-do.js';
import { longestDwell } from './dwell.js';
import { holds } from './holding.js';
import { openCircuitVoltage } from './known-voltage.js';
import { type Pass, passThrough } from './place-passes.js';
import { Points } from './point.js';
import { comeBack } from './recover.js';
import { provePlaces } from './prove-places.js';
import { startUp } from './start-up.js';
import { ModuleStaysOffError } from './step-error.js';
import type { Reach, StepContext } from './step-kind.js';

const readingTime: Seconds = 0.1;
/** The load's voltage and current, besides the places. */
const usuallyRead = 2;
/** Set-points are reckoned, and the same one must be found again. */
const rounding: Ratio = 1e-9;
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
  prove: z
    .boolean()
    .default(true)
    .describe('whether each module is unplugged once, to show which place is its own'),
};

/** How long a climb takes, its proofs and all that is done by hand included; roughly. */
export function climbDuration(
  { points, dwell, readings, prove }: ClimbGiven,
  { modules, passes }: Reach,
): Seconds {
  const places = passes === 1 ? modules : 1;
  const look = dwell + readings * (usuallyRead + places) * readingTime;
  const proofs = prove ? modules * (look + 2 * handTime + startUp) + passes * look : 0;
  const moves = passes === 1 ? 0 : (passes + 1) * handTime;
  return passes * points * look + proofs + moves;
}

type ClimbGiven = Pick<Climb, 'points' | 'dwell' | 'readings'> & { readonly prove: boolean };

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

/** A climb through all passes, and the proof before each where it is asked for. */
export interface ClimbWanted extends Omit<Climb, 'below'> {
  readonly prove: boolean;
  /** In a group, what the proof is made with. */
  readonly proving: Amperes;
  /** Whether the point that was not held is taken on the later passes too, or they end below it. */
  readonly again: boolean;
}

/**
 * Climbs as far on each pass as the passes before it have seen the whole hold. A pass after the first
 * set-point was dropped would show nothing.
 */
export async function climbThrough(context: StepContext, wanted: ClimbWanted): Promise<void> {
  const points = new Points(context);
  let reached = Number.POSITIVE_INFINITY;
  await passThrough(context, async (pass) => {
    if (wanted.prove) await provePlaces(context, points, pass, { ...wanted, current: wanted.proving });
    const below = wanted.again ? reached * (1 + rounding) : reached;
    const { dropped } = await climb(context, points, pass, { ...wanted, below });
    reached = Math.min(reached, dropped ?? Number.POSITIVE_INFINITY);
    return reached > wanted.from ? 'go-on' : 'enough';
  });
}

/**
 * Climbs through the same set-points on each pass, every place that the pass reaches read at each, and holds
 * the last one where it is told to. Where the whole no longer holds, be it on the way or while it is held, the
 * load goes off, the voltage must come back, and the first set-point is taken once more: a module that has
 * latched off while others go on shows there.
 */
async function climb(
  context: StepContext,
  points: Points,
  { taps, of }: Pass,
  plan: Climb,
): Promise<{ readonly dropped: Amperes | undefined }> {
  const { bench, clock, journal, tried } = context;
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
  await bench.load.unload();
  await bench.load.inputOn();
  let dropped: Amperes | undefined;
  for (const { current, dwell } of setPoints(plan, clock)) {
    const { outcome } = await take(current, plan.phase, dwell);
    if (outcome === 'held') {
      tried.held = Math.max(current, tried.held ?? current);
      continue;
    }
    dropped = current;
    tried.dropped = Math.min(current, tried.dropped ?? current);
    journal.append({ event: 'notice', text: 'the circuit did not hold this point; it goes no higher' });
    const back = await comeBack(context, points, voltage * (1 - plan.sag), patience);
    if (back === 'stayed-off') throw new ModuleStaysOffError(false);
    await bench.load.unload();
    await bench.load.inputOn();
    await take(plan.from, 'proof');
    break;
  }
  await bench.load.unload();
  await bench.load.inputOff();
  return { dropped };
}

/** The way up, as far as an earlier pass saw it held; then the last one again and again while it shall be held. */
function* setPoints(
  { from, to, points, dwell, below, hold }: Climb,
  clock: Clock,
): Generator<{ readonly current: Amperes; readonly dwell: Seconds }> {
  for (let index = 0; index < points; index += 1) {
    // The last one exactly: rounding must not carry it beyond what the bench allows.
    const current = index === points - 1 ? to : from + ((to - from) * index) / (points - 1);
    if (current >= below) return;
    yield { current, dwell };
  }
  if (hold === undefined) return;
  for (const end = clock.now() + hold.for; clock.now() < end;) {
    yield { current: to, dwell: Math.min(hold.every, end - clock.now()) };
  }
}
