import { RailproofError } from '../errors/railproof-error.js';
import type { OpenBench } from './open-bench.js';

export type Safety =
  | { readonly kind: 'confirmed' }
  /** Nobody could read back that the load is off; `advice` is for the person at the bench. */
  | { readonly kind: 'unconfirmed'; readonly why: string; readonly advice: string };

const attempts = 3;

/**
 * Puts the load off and reads it back: first on the open connection, then on a fresh one.
 * Never rejects: whatever happens comes back as words.
 */
export async function makeSafe(bench: OpenBench): Promise<Safety> {
  let why = '';
  let load = bench.load;
  for (let attempt = 1; attempt <= attempts; attempt += 1) {
    try {
      if (attempt > 1) load = await bench.reopenLoad();
      await load.makeSafe();
      return { kind: 'confirmed' };
    } catch (error) {
      why = error instanceof RailproofError ? error.message : String(error);
    }
  }
  return {
    kind: 'unconfirmed',
    why,
    advice:
      'THE LOAD MAY STILL BE ON. Switch its input off at its front panel, or unplug the module, ' +
      'before you touch the leads.',
  };
}
