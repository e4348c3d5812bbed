import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes } from '../quantity/quantity.js';
import { capacitorLifeFindings } from './capacitor-life.js';
import type { Cap, Soaked } from './derating.js';
import { ambientFactor, marginFactor } from './derating-factors.js';
import type { Evidence } from './evidence.js';
import type { Factor, Finding } from './finding.js';
import { nameplateFactor } from './nameplate-factor.js';
import type { OwnLabels } from './own-labels.js';
import { gone } from './recovery.js';
import { temperatureFactor } from './temperature-factor.js';
import { ratedOf } from './rated.js';
import type { Usable } from './usable-current.js';

const because = {
  limit: 'the measured limit sets it',
  temperature: 'the limit of temperature sets it',
  'highest-tried': 'the highest current that was tried sets it',
} as const;

/**
 * `recommended-current` for continuous use: the usable current's 95 % lower bound × margin × ambient
 * factor, not above the nameplate (unless the procedure says so and a soak proved it), and so that it stays
 * within its limit of temperature. Each factor is a line with its reason; their product with the usable
 * current is the recommendation. Where a soak was run, `capacitor-life-ratio` says what it is good for.
 */
export function recommendedFindings(
  evidence: Evidence,
  usable: Usable | undefined,
  soaked?: Soaked,
  ownLabels?: OwnLabels,
): readonly Finding[] {
  const { header } = evidence;
  const rated = ratedOf(header).current;
  if (usable === undefined) return [];
  const { value, interval, step } = usable.finding;
  if (interval === null || typeof value !== 'number') return [];
  const low = Math.max(0, interval[0]);
  const factors: Factor[] = [
    {
      name: 'lower bound',
      factor: value > 0 ? low / value : 0,
      reason: `down to the lower end of its 95 % interval, ${formatQuantity(low, 'current', { significant: 4 })}`,
    },
    marginFactor(header, soaked),
    ambientFactor(header),
  ];
  const derated = factors.slice(1).reduce((current, { factor }) => current * factor, low);
  let recommended = derated;
  let sets: string | undefined = low > 0 && derated === 0 ? 'air so warm allows no load' : undefined;
  for (const cap of caps(evidence, { rated, soaked, ownLabels })) {
    const capped = cap(recommended);
    if (capped === undefined) continue;
    const { name, reason, current } = capped;
    factors.push({ name, reason, factor: recommended > 0 ? current / recommended : 0 });
    recommended = current;
    sets = capped.sets ?? sets;
  }
  return [
    {
      name: 'recommended-current',
      value: recommended,
      dimension: 'current',
      standardUncertainty: null,
      interval: null,
      step,
      ...(usable.setBy === 'highest-tried' && sets === undefined ? { bound: 'least' as const } : {}),
      note: sets ?? because[usable.setBy],
      budget: [],
      factors,
    },
    ...capacitorLifeFindings(header, soaked, { recommended, rated }),
  ];
}

/** What may still lower the current, one after the other; each is given what those before it left. */
function caps(
  evidence: Evidence,
  {
    rated,
    soaked,
    ownLabels,
  }: { rated: Amperes; soaked: Soaked | undefined; ownLabels: OwnLabels | undefined },
): readonly ((current: Amperes) => Cap | undefined)[] {
  if (gone(evidence)) return [() => failure];
  const { header } = evidence;
  return [
    (current) => (current > 0 ? nameplateFactor(header, { rated, current, soaked }) : undefined),
    // Where the procedure allows more than the labels, a soak has shown what each module bears.
    (current) =>
      header.derating.aboveNameplate === 'never' || soaked === undefined ? ownLabels?.(current) : undefined,
    (current) => (current > 0 ? temperatureFactor(header, { current, soaked }) : undefined),
  ];
}

const failure: Cap = {
  name: 'failure',
  reason: 'it gave no voltage again, even after its input was cycled: not to be used before it is known why',
  current: 0,
  sets: 'its failure sets it',
};
