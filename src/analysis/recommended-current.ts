import { formatQuantity } from '../quantity/format-quantity.js';
import type { Evidence } from './evidence.js';
import type { Factor, Finding } from './finding.js';
import { gone } from './recovery.js';
import type { Usable } from './usable-current.js';

const because = {
  limit: 'the measured limit sets it',
  'highest-tried': 'the highest current that was tried sets it',
} as const;

/**
 * `recommended-current` for continuous use: the usable current's 95 % lower bound × margin × ambient
 * factor, and never above the nameplate. Each factor is a line with its reason.
 */
export function recommendedFindings(evidence: Evidence, usable: Usable | undefined): readonly Finding[] {
  const rated = evidence.header.modules[0]?.rated;
  if (usable === undefined || rated === undefined) return [];
  const { value, interval, step } = usable.finding;
  if (interval === null || typeof value !== 'number') return [];
  const { margin } = evidence.header.derating;
  const low = Math.max(0, interval[0]);
  const derated = low * margin;
  const failed = gone(evidence);
  const capped = failed ? 0 : Math.min(derated, rated.current);
  const factors: Factor[] = [
    {
      name: 'lower bound',
      factor: value > 0 ? low / value : 0,
      reason: `down to the lower end of its 95 % interval, ${formatQuantity(low, 'current', { significant: 4 })}`,
    },
    {
      name: 'margin',
      factor: margin,
      reason: 'asked for by the procedure: ageing, warmer days, and warming that no soak measured',
    },
    {
      name: 'ambient',
      factor: 1,
      reason: 'no derating over temperature was given; it holds for the surroundings of the test',
    },
  ];
  if (failed) {
    factors.push({
      name: 'failure',
      factor: 0,
      reason:
        'it gave no voltage again, even after its input was cycled: not to be used before it is known why',
    });
  } else if (derated > rated.current) {
    factors.push({
      name: 'nameplate',
      factor: rated.current / derated,
      reason: `never above the nameplate's ${formatQuantity(rated.current, 'current')}`,
    });
  }
  return [
    {
      name: 'recommended-current',
      value: capped,
      dimension: 'current',
      standardUncertainty: null,
      interval: null,
      step,
      ...(usable.setBy === 'highest-tried' && derated <= rated.current && !failed
        ? { bound: 'least' as const }
        : {}),
      note: failed
        ? 'its failure sets it'
        : derated > rated.current
          ? 'the nameplate sets it'
          : because[usable.setBy],
      budget: [],
      factors,
    },
  ];
}
