import { UnsteadyLineError } from './step-error.js';
import type { StepContext } from './step-kind.js';

/** A disturbance may come again; so often in a row it is no disturbance. */
const mostInARow = 3;

/**
 * Takes a point until it was taken in one piece: one that was measured across a lost connection, or an answer
 * that did not come as it should, is no measurement, and is begun anew. The take itself says when it was
 * interrupted, having journalled it so.
 * @throws UnsteadyLineError at the third interruption in a row
 */
export async function uninterrupted<Seen>(
  { bench, journal }: Pick<StepContext, 'bench' | 'journal'>,
  take: () => Promise<Seen | 'interrupted'>,
): Promise<Seen> {
  for (let interrupted = 1; ; interrupted += 1) {
    const seen = await take();
    if (seen !== 'interrupted') return seen;
    if (interrupted === mostInARow) {
      throw new UnsteadyLineError({ takes: interrupted, last: bench.latestGap ?? 'nobody said why' });
    }
    journal.append({
      event: 'notice',
      text: 'the point was interrupted, so nothing is made of it; it is taken again',
    });
  }
}
