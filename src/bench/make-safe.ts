import { formatAddress } from '../files/connection-address.js';
import type { Seconds } from '../quantity/quantity.js';
import { type BenchParts, type OpenBench, openBench } from './open-bench.js';

export type Safety =
  | { readonly kind: 'confirmed' }
  /** Nobody could read back that the load is off; `advice` is for the person at the bench. */
  | { readonly kind: 'unconfirmed'; readonly why: string; readonly advice: string };

/** Before each attempt on a fresh connection: at once, then after the time an adapter takes to come back. */
const pauses = [0, 1];

/** For the person at the bench, wherever nobody could read back that the load is off. */
export const loadMayStillBeOn =
  'THE LOAD MAY STILL BE ON. Switch its input off at its front panel, or unplug the module, ' +
  'before you touch the leads.';

/**
 * Puts the load off and reads it back: first on the open connection, then on fresh ones. Nobody who listens
 * can stop it. Never rejects: whatever happens comes back as words.
 */
export function makeSafe(bench: OpenBench): Promise<Safety> {
  const afresh = pauses.map((pause) => async (): Promise<void> => {
    const load = await bench.reopenLoad(pause);
    await load.makeSafe();
  });
  return bench.regardless(() => untilConfirmed([() => bench.load.makeSafe(), ...afresh]));
}

/**
 * The same for a bench that is not open, of which nothing is known: on each connection the load is told what
 * makes it safe before anything is asked of it. The meter is left alone: it may not answer. Never rejects.
 * It is tried once after each pause, for as long as there are any.
 */
export async function makeSafeUnopened(
  parts: Pick<BenchParts, 'bench' | 'drivers' | 'connect' | 'clock'>,
  patience: Iterable<Seconds> = pauses,
): Promise<{ readonly safety: Safety; readonly address: string }> {
  let address = formatAddress(parts.bench.instruments.load.connection);
  const attempt = (pause: Seconds) => async (): Promise<void> => {
    await parts.clock.sleep(pause);
    const bench = await openBench({
      ...parts,
      drivers: { load: parts.drivers.load },
      onInput: () => undefined,
      onNotice: () => undefined,
      first: 'make-safe',
    });
    try {
      address = bench.load.address;
      await bench.load.makeSafe();
    } finally {
      await bench.close();
    }
  };
  const attempts = function* (): Generator<() => Promise<void>> {
    for (const pause of patience) yield attempt(pause);
  };
  const safety = await untilConfirmed(attempts());
  return { safety, address };
}

/** The reason given is that of the last attempt. */
async function untilConfirmed(attempts: Iterable<() => Promise<void>>): Promise<Safety> {
  let why = '';
  for (const attempt of attempts) {
    try {
      await attempt();
      return { kind: 'confirmed' };
    } catch (error) {
      why = error instanceof Error ? error.message : String(error);
    }
  }
  return { kind: 'unconfirmed', why, advice: loadMayStillBeOn };
}
