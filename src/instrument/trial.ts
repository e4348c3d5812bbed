import { isProven, type TrialResult, TrialWalk, type TrialWalkParts } from './trial-walk.js';

export type { TrialResult };

export interface TrialParts extends TrialWalkParts {
  /** Aborted when the person wants the walk to end; it still ends as it should. */
  readonly signal?: AbortSignal;
}

/**
 * Walks through a driver message by message and tells what the instrument makes of each, with the input kept
 * off. It is made safe first. Until it has said that it is off nothing else is told, and it must say so again
 * after each message: the driver on trial may be wrong in any word. Nothing that switches on is sent, and
 * nothing is set that draws current or shorts. At the end, and when it is broken off, a load is put into
 * constant current at 0 A, made safe and asked whether it is off: that proof is then the last result. A
 * meter has nothing to prove. When the identity is not answered the walk ends, since nothing that came later
 * could be told apart. The connection is left open.
 * @throws ConnectionLostError
 */
export async function* tryDriver(parts: TrialParts): AsyncGenerator<TrialResult, void, undefined> {
  const trial = new TrialWalk(parts);
  let left: 'unknown' | 'changed' | 'at-rest' = 'unknown';
  try {
    await trial.makeSafe();
    const identity = await trial.identity();
    yield identity;
    if (identity.verdict === 'silent') return;
    const before = await trial.proofThatItIsOff();
    if (before) yield before;
    if (!isProven(before)) return;
    left = 'changed';
    for await (const result of trial.messages()) {
      yield result;
      if (parts.signal?.aborted === true) break;
      const still = result.verdict === 'not-sent' ? undefined : await trial.proofThatItIsOff();
      if (isProven(still)) continue;
      await trial.makeSafe();
      if (still) yield still;
      break;
    }
    yield* trial.ending();
    left = 'at-rest';
  } finally {
    if (left === 'unknown') await trial.makeSafe().catch(() => undefined);
    if (left === 'changed') await trial.endUnheard();
  }
}
