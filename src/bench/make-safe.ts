import { messageOf } from '../errors/message-of.js';
import { formatAddress } from '../files/connection-address.js';
import type { Seconds } from '../quantity/quantity.js';
import { Audience } from './audience.js';
import { type BenchParts, type OpenBench, openBench, openInstrument } from './open-bench.js';
import { Source } from './source.js';

export type Safety =
  | { readonly kind: 'confirmed' }
  /** Nobody could read back that it is off; `advice` is for the person at the bench. */
  | {
      readonly kind: 'unconfirmed';
      readonly why: string;
      readonly advice: string;
      /** What the last attempt failed by. */
      readonly cause?: unknown;
    };

/** Before each attempt on a fresh connection: at once, then after the time an adapter takes to come back. */
const pauses = [0, 1];

/** For the person at the bench, wherever nobody could read back that the load is off. */
export const loadMayStillBeOn =
  'THE LOAD MAY STILL BE ON. Switch its input off at its front panel, or unplug the module, ' +
  'before you touch the leads.';

/** The same of the source. What it feeds does no harm while the load is off. */
export const sourceMayStillBeOn =
  'THE SOURCE MAY STILL BE ON. Switch its output off at its front panel, or unplug the module from it.';

/**
 * Puts the load off and reads it back: first on the open connection, then on fresh ones. Nobody who listens
 * can stop it. Never rejects: whatever happens comes back as words.
 */
export function makeSafe(bench: OpenBench): Promise<Safety> {
  const afresh = pauses.map((pause) => async (): Promise<void> => {
    const load = await bench.reopenLoad(pause);
    await load.makeSafe();
  });
  return bench.regardless(() => untilConfirmed([() => bench.load.makeSafe(), ...afresh], loadMayStillBeOn));
}

/**
 * The same for the source, where the bench has one: after the load, which waits for nobody. Never rejects.
 */
export async function makeSourceSafe(bench: OpenBench): Promise<Safety | undefined> {
  const { source } = bench;
  if (source === undefined) return undefined;
  const afresh = pauses.map((pause) => async (): Promise<void> => {
    const again = await bench.reopenSource(pause);
    await again.makeSafe();
  });
  return bench.regardless(() => untilConfirmed([() => source.makeSafe(), ...afresh], sourceMayStillBeOn));
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
  const safety = await untilConfirmed(attempts(), loadMayStillBeOn);
  return { safety, address };
}

/** The source of a bench that is not open, in the same way; undefined where there is none. Never rejects. */
export async function makeSourceSafeUnopened(
  parts: Pick<BenchParts, 'bench' | 'drivers' | 'connect' | 'clock'>,
): Promise<{ readonly safety: Safety; readonly address: string } | undefined> {
  const { source: place } = parts.bench.instruments;
  if (place === undefined) return undefined;
  let address = formatAddress(place.connection);
  const audience = new Audience(
    () => undefined,
    () => undefined,
  );
  const attempts = pauses.map((pause) => async (): Promise<void> => {
    await parts.clock.sleep(pause);
    const instrument = await openInstrument(parts, audience, 'source', { first: 'make-safe' });
    try {
      address = instrument.address;
      await new Source(instrument, place, parts.clock).makeSafe();
    } finally {
      await instrument.release().catch(() => undefined);
      await instrument.close();
    }
  });
  const safety = await untilConfirmed(attempts, sourceMayStillBeOn);
  return { safety, address };
}

/** The reason given is that of the last attempt. */
async function untilConfirmed(attempts: Iterable<() => Promise<void>>, advice: string): Promise<Safety> {
  let why = '';
  let cause: unknown;
  for (const attempt of attempts) {
    try {
      await attempt();
      return { kind: 'confirmed' };
    } catch (error) {
      cause = error;
      why = messageOf(error);
    }
  }
  return { kind: 'unconfirmed', why, advice, cause };
}
