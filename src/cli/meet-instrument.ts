import { realClock } from '../clock/real-clock.js';
import { RailproofError } from '../errors/railproof-error.js';
import type { ConnectionAddress } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import { type Match, matchDrivers } from '../instrument/match.js';
import { connectors } from './connectors.js';
import { anyOf } from './drivers-match.js';
import { errorText } from './error-text.js';

/** What became of asking at an address who is there. */
export type Met = Match | { readonly kind: 'unreachable'; readonly reason: string };

/**
 * Asks the instrument at an address who it is, and what each family of drivers would ask that does no harm: nothing is
 * told and nothing switched. Broken off, and the line closed, when the signal says so; then it throws its reason.
 */
export async function meetInstrument(
  address: ConnectionAddress,
  drivers: readonly Driver[],
  signal: AbortSignal,
): Promise<Met> {
  try {
    const connection = await connectors(realClock)(address, anyOf(drivers), 'instrument');
    const hangUp = (): void => void connection.close();
    signal.addEventListener('abort', hangUp, { once: true });
    try {
      signal.throwIfAborted();
      const match = await matchDrivers({ drivers, connection, clock: realClock, signal });
      signal.throwIfAborted();
      return match;
    } finally {
      signal.removeEventListener('abort', hangUp);
      await connection.close();
    }
  } catch (error) {
    signal.throwIfAborted();
    if (!(error instanceof RailproofError)) throw error;
    return { kind: 'unreachable', reason: errorText(error) };
  }
}
