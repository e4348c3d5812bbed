import type { Evidence } from './evidence.js';
import {
  lossesInWords,
  lossModelOf,
  risesBudget,
  riseSeen,
  type Soaked,
  temperatureLimit,
} from './derating.js';
import { type Finding, measured } from './finding.js';
import { degrees } from './in-words.js';
import { currentAtRise } from './loss-model.js';
import { promised, promisedErrors } from './promised-errors.js';

/**
 * The current at which the module would settle at its limit of temperature, where a soak settled beyond it;
 * undefined where it stayed within, or nothing tells.
 *
 * With A = limit − ambient, I = I₀·√((A/rise − fixed)/(1 − fixed)); for each kelvin of the rise it changes by
 * −I₀²·A / (2·(1 − fixed)·rise²·I) (JCGM 100:2008, 5.1.3). What is uncertain of the soaked current counts
 * in proportion.
 */
export function thermalLimit({ header }: Evidence, soaked: Soaked | undefined): Finding | undefined {
  const limit = temperatureLimit(header.derating, soaked);
  if (soaked?.ambient === undefined || limit === undefined) return undefined;
  const seen = riseSeen(soaked);
  const allowed = limit - soaked.ambient;
  if (seen.rise <= allowed || seen.rise <= 0) return undefined;
  const model = lossModelOf(header.derating);
  const value = currentAtRise(allowed, seen, model);
  const perKelvin =
    value === 0 ? 0 : (seen.current ** 2 * allowed) / (2 * (1 - model.fixed) * seen.rise ** 2 * value);
  const load = promisedErrors(header, 'load', 'current');
  const share = value / seen.current;
  const within = value > 0 ? 'above that it settles' : 'it settles at any current';
  const settled = `${degrees(soaked.ambient + seen.rise)}, ${lossesInWords(model, value, soaked)}`;
  return measured(
    'usable-current',
    'current',
    value,
    [
      ...risesBudget(soaked, perKelvin),
      promised(`${load.of}, gain`, load.gain * value),
      promised(`${load.of}, offset`, load.offset * share),
      promised(`${load.of}, resolution`, load.resolution * share),
    ],
    { step: soaked.rise.step, note: `${within} beyond its limit of ${degrees(limit)}: at ${settled}` },
  );
}
