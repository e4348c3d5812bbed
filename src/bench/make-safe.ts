import type { OpenBench } from './open-bench.js';

export type Safety =
  | { readonly kind: 'confirmed' }
  /** Nobody could read back that the load is off; `advice` is for the person at the bench. */
  | { readonly kind: 'unconfirmed'; readonly why: string; readonly advice: string };

/** Before each further attempt: at once, then after the time an adapter takes to come back. */
const pauses = [0, 1];

/**
 * Puts the load off and reads it back: first on the open connection, then on fresh ones. Nobody who listens
 * can stop it. Never rejects: whatever happens comes back as words.
 */
export function makeSafe(bench: OpenBench): Promise<Safety> {
  return bench.regardless(async () => {
    let failure = await failureOf(() => bench.load.makeSafe());
    for (const pause of pauses) {
      if (failure === undefined) break;
      failure = await failureOf(async () => {
        const load = await bench.reopenLoad(pause);
        await load.makeSafe();
      });
    }
    return failure === undefined ? { kind: 'confirmed' } : { kind: 'unconfirmed', why: failure, advice };
  });
}

async function failureOf(attempt: () => Promise<void>): Promise<string | undefined> {
  try {
    await attempt();
    return undefined;
  } catch (error) {
    return error instanceof Error ? error.message : String(error);
  }
}

const advice =
  'THE LOAD MAY STILL BE ON. Switch its input off at its front panel, or unplug the module, ' +
  'before you touch the leads.';
