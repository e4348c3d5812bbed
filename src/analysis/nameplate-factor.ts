import type { Amperes } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { type Cap, highestRiseSeen, type Soaked, temperatureLimit } from './derating.js';
import { amps, degrees, ratedAmperes } from './in-words.js';

/**
 * Never above the nameplate; but where the procedure allows it after a soak, up to the current at which a
 * soak has settled below its limit of temperature. Undefined where the current stays below it anyway.
 * @param rated of what is connected, in A.
 * @param current above 0.
 */
export function nameplateFactor(
  { derating }: RunHeader,
  { rated, current, soaked }: { rated: Amperes; current: Amperes; soaked: Soaked | undefined },
): Cap | undefined {
  if (current <= rated) return undefined;
  const label = `the nameplate's ${ratedAmperes(rated)}`;
  const capped = (reason: string): Cap => ({
    name: 'nameplate',
    reason,
    current: rated,
    sets: 'the nameplate sets it',
  });
  if (derating.aboveNameplate === 'never') return capped(`never above ${label}`);
  const proof = proofOf(derating, soaked);
  if (typeof proof === 'string') return capped(`not above ${label}: ${proof}`);
  if (proof.current <= rated) {
    return capped(`not above ${label}: it was soaked at no more than ${amps(proof.current)}`);
  }
  const shown = `at ${amps(proof.current)} a soak settled below ${degrees(proof.limit)}`;
  if (proof.current >= current) {
    const reason = `above ${label}, as the procedure allows: ${shown}`;
    return { name: 'nameplate', reason, current, sets: undefined };
  }
  const reason = `above ${label} only as far as it was soaked: ${shown}`;
  return { name: 'soak', reason, current: proof.current, sets: 'the soaked current sets it' };
}

/** The current at which a soak settled below its limit, the upper end of its interval too; or why none counts. */
function proofOf(
  derating: RunHeader['derating'],
  soaked: Soaked | undefined,
): { readonly current: Amperes; readonly limit: number } | string {
  if (soaked === undefined) return 'no soak was run';
  if (!soaked.settled) return 'the soak did not settle';
  const limit = temperatureLimit(derating, soaked);
  if (limit === undefined) return 'no temperature limit was given for its soak';
  if (soaked.ambient === undefined) return 'nobody measured the air at its soak';
  const warmest = soaked.ambient + highestRiseSeen(soaked).rise;
  if (warmest > limit) return `its soak may have reached ${degrees(warmest)}, beyond ${degrees(limit)}`;
  return { current: soaked.current, limit };
}
