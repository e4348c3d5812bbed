import type { Bench } from '../files/bench.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Ratio, Volts } from '../quantity/quantity.js';
import { valueOf } from './guards.js';
import type { Taken } from './sample.js';
import { WrongPlaceError } from './wrong-place-error.js';

/**
 * By so much the load may seem to have more than the module: the two are read one after the other. A module
 * that tries to start into an overload shows the one or the other a volt or so, and not both.
 */
const skew: Ratio = 0.2;
const leastSkew: Volts = 2;
/** An output that goes or comes while it is read explains one such sample, not so many looks in a row. */
const looks = 3;

/**
 * Leads only lose voltage, so the load never has more at its terminals than the module has at its own. A
 * meter at the module that reads less than the load, time and again, reads something else: a relay is stuck,
 * a lead is off. What it shows must not pass for a module that has dropped out.
 * @throws WrongPlaceError naming both readings.
 */
export async function checkAgainstLoad(
  { voltageFrom }: Pick<Bench, 'voltageFrom'>,
  taken: readonly Taken[],
  lookAgain: () => Promise<readonly Taken[]>,
): Promise<void> {
  if (voltageFrom !== 'meter-at-module') return;
  let seen = taken;
  for (let look = 0; look < looks; look += 1) {
    if (!contradicts(seen)) return;
    seen = await lookAgain();
  }
  if (!contradicts(seen)) return;
  const read = (of: string): string =>
    formatQuantity(valueOf(seen, of, 'voltage'), 'voltage', { significant: 4 });
  throw new WrongPlaceError(
    'probes-elsewhere',
    `the meter reads ${read('meter')} where the load has ${read('load')} at its terminals, which is never more than the module gives`,
    "a lead of the meter is off, its probes are not at the module, the scanner's relay is stuck and it does not say so, or the load repeats an old reading",
  );
}

function contradicts(taken: readonly Taken[]): boolean {
  const atLoad = valueOf(taken, 'load', 'voltage');
  return atLoad - valueOf(taken, 'meter', 'voltage') > Math.max(leastSkew, skew * atLoad);
}
