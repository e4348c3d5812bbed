import type { Amperes } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { lossesInWords, lossModelOf, risesBudget, riseSeen, type Soaked } from './derating.js';
import { type Finding, measured } from './finding.js';
import { kelvins, ratedAmperes } from './in-words.js';
import { riseAt } from './loss-model.js';
import { timesLonger } from './ten-kelvin-rule.js';

/**
 * `capacitor-life-ratio`: how many times longer electrolytics live at the recommended current than at the
 * nameplate's, in the same air, as if they warmed like the place where the soak measured. It rests on the
 * rises that the soak gives; the loss model and the rule themselves carry no uncertainty here.
 *
 * With ratio = 2^(ΔT/10) and ΔT in proportion to the soaked rise, each kelvin of that rise changes it by
 * ratio·ln 2/10·ΔT/rise (JCGM 100:2008, 5.1.3).
 */
export function capacitorLifeFindings(
  { derating }: RunHeader,
  soaked: Soaked | undefined,
  currents: { readonly recommended: Amperes; readonly rated: Amperes },
): readonly Finding[] {
  const { recommended, rated } = currents;
  if (soaked === undefined || recommended <= 0) return [];
  const seen = riseSeen(soaked);
  if (!(seen.rise > 0)) return [];
  const model = lossModelOf(derating);
  const cooler = riseAt(rated, seen, model) - riseAt(recommended, seen, model);
  const value = timesLonger(cooler);
  const perKelvin = (value * (Math.LN2 / 10) * cooler) / seen.rise;
  const how = `${kelvins(Math.abs(cooler))} ${cooler < 0 ? 'warmer' : 'cooler'}`;
  return [
    measured('capacitor-life-ratio', 'ratio', value, risesBudget(soaked, perKelvin), {
      step: soaked.rise.step,
      note:
        `electrolytics at the recommended current, ${how} than at the nameplate's ${ratedAmperes(rated)}, by the ` +
        `ten-kelvin rule; ${lossesInWords(model, recommended, soaked)}; a ratio for the same ambient, not a lifetime`,
    }),
  ];
}
