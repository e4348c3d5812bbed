import type { Amperes } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import {
  type Cap,
  highestRiseSeen,
  lossesInWords,
  lossModelOf,
  type Soaked,
  temperatureLimit,
} from './derating.js';
import { amps, degrees, kelvins } from './in-words.js';
import { currentAtRise, riseAt } from './loss-model.js';

/**
 * Brings the current down to where the air that is expected (or else that of the test) and the soak's rise,
 * the upper end of its interval carried over to that current, stay within the limit of temperature.
 * Undefined where there is neither soak nor limit.
 * @param current what the other factors leave of it, above 0.
 */
export function temperatureFactor(
  { derating }: RunHeader,
  { current, soaked }: { current: Amperes; soaked: Soaked | undefined },
): Cap | undefined {
  const limit = temperatureLimit(derating, soaked);
  const unchanged = (reason: string): Cap => ({ name: 'temperature', reason, current, sets: undefined });
  if (soaked === undefined) {
    return limit === undefined
      ? undefined
      : unchanged(`no soak was run: nothing shows that it stays below ${degrees(limit)}`);
  }
  const seen = highestRiseSeen(soaked);
  const rose = `a rise of at most ${kelvins(seen.rise)} at ${amps(soaked.current)}`;
  if (limit === undefined) return unchanged(`no limit of temperature was given to hold against ${rose}`);
  const air = derating.ambient?.expected ?? soaked.ambient;
  if (air === undefined) {
    return unchanged(`nobody measured the air, so ${rose} can't be held against ${degrees(limit)}`);
  }
  const model = lossModelOf(derating);
  const rise = riseAt(current, seen, model);
  const sum = `${degrees(air)} and at most ${kelvins(rise)} at ${amps(current)} make ${degrees(air + rise)}`;
  if (air + rise <= limit) {
    return unchanged(`${sum}, within ${degrees(limit)}; ${lossesInWords(model, current, soaked)}`);
  }
  const fitting = Math.min(current, currentAtRise(limit - air, seen, model));
  const way =
    fitting > 0
      ? `${amps(fitting)} stays within ${degrees(limit)}`
      : `no current stays within ${degrees(limit)}`;
  return {
    name: 'temperature',
    reason: `${sum}; ${way}; ${lossesInWords(model, fitting, soaked)}`,
    current: fitting,
    sets: 'the limit of temperature sets it',
  };
}
