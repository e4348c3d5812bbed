import type { Driver } from '../files/driver.js';
import type { Pace } from './trial-proposal.js';
import type { TrialResult } from './trial-result.js';

/** An operation that switches on, what must have been understood before it is tried, and what says that it is on. */
export interface Switching {
  readonly on: string;
  readonly off: string;
  readonly state: string;
  /** Told right before, so that nothing flows. */
  readonly first: readonly string[];
  /** In plain words, what is asked of whoever agrees. */
  readonly question: string;
}

const switchings: Readonly<Partial<Record<Driver['role'], Switching>>> = {
  load: {
    ...{ on: 'input-on', off: 'input-off', state: 'input-state' },
    first: ['current-mode', 'set-current'],
    question:
      'The input can be switched on once, set to 0 A, to try input-on and to see what it says of itself; it is ' +
      'switched off at once, and that is read back. A load that has misunderstood may draw all the current it ' +
      'can: there must be nothing on its terminals, or a module that may be shorted.',
  },
  source: {
    ...{ on: 'output-on', off: 'output-off', state: 'output-state' },
    first: ['set-voltage'],
    question:
      'The output can be switched on once, set to 0 V, to try output-on and to see what it says of itself; it is ' +
      'switched off at once, and that is read back. A source that has misunderstood may give all the voltage it ' +
      'can: there must be nothing on its terminals.',
  },
};

/**
 * What there is to switch on, where all that must go before has been understood, and it is known how long the
 * instrument must be left alone after each of them: what sets it to nothing must not come too soon.
 */
export function switchingOf(
  driver: Driver,
  results: readonly TrialResult[],
  { afterOperations }: Pick<Pace, 'afterOperations'>,
): Switching | undefined {
  const switching = switchings[driver.role];
  if (switching === undefined) return undefined;
  const ready = [...switching.first, switching.off].every((operation) => {
    const told = results.filter(({ part, name }) => part === 'operation' && name === operation);
    const isDeaf = afterOperations.some((each) => each.operation === operation && each.pause === undefined);
    return (
      !isDeaf &&
      told.length > 0 &&
      told.every(({ verdict }) => verdict === 'understood' || verdict === 'unclear')
    );
  });
  return ready ? switching : undefined;
}
