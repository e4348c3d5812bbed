import { PacedClock, paceFor } from '../../clock/paced-clock.js';
import { realClock } from '../../clock/real-clock.js';
import { spokenTime } from '../../quantity/spoken-time.js';
import { timeLeft } from '../../run/time-left.js';
import type { LoadedPlan } from '../load-plan.js';
import { say } from '../say.js';
import type { Streams } from '../streams.js';
import { type World, worldOf } from '../wiring.js';

/** The bench of a run that is looked at: time that is virtual passes no quicker than one can follow, and that is said. */
export async function watchedWorld(
  { plan, resumed }: LoadedPlan,
  { stderr }: Pick<Streams, 'stderr'>,
): Promise<World> {
  const planned = timeLeft(plan.steps, resumed?.from.steps ?? 0, Infinity);
  const pace = paceFor(planned);
  const world = await worldOf(plan.bench, plan.drivers, (began) => new PacedClock(began, pace, realClock));
  if (world.clock instanceof PacedClock) {
    const real =
      pace === 1 ? 'take as long as at a real bench' : `pass in about ${spokenTime(planned / pace)}`;
    say(
      stderr,
      `No real bench: about ${spokenTime(planned)} of its time ${real}, so that they can be watched.`,
    );
  }
  return world;
}
