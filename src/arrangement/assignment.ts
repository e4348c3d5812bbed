import type { Ohms } from '../quantity/quantity.js';
import type { Worth } from './best-groups.js';
import { worthOf } from './group-candidates.js';
import type { ModuleProfile } from './module-profile.js';
import type { PlacedGroup } from './places.js';
import type { Assignment } from './selection.js';

/** Groups spread over supplies, with the one ballast for all; 0 Ω for none. */
export interface Spread extends Worth {
  readonly supplies: readonly (readonly PlacedGroup[])[];
  readonly resistance: Ohms;
}

/** As it is handed out. */
export function assignmentOf(
  { supplies, resistance, limit, imbalance }: Spread,
  tolerance: number,
): Assignment {
  return {
    supplies: supplies.map((groups) => ({
      groups: groups.map(({ modules }) => {
        const worth = worthOf(modules, { tolerance }, resistance);
        return {
          modules: modules.map(({ name }) => name),
          recommended: worth.limit,
          imbalance: worth.imbalance,
        };
      }),
      recommended: Math.min(...groups.map((group) => group.limit)),
    })),
    recommended: limit,
    imbalance,
    ballast: resistance > 0 ? resistance : undefined,
  };
}

/**
 * What an assignment would be worth were its modules just as they were measured, nothing being uncertain but the
 * resistors: more than it may be relied on for.
 */
export function asMeasured({ supplies, resistance }: Spread, tolerance: number): Worth {
  const worths = supplies
    .flat()
    .map(({ modules }) => worthOf(modules.map(withoutDoubt), { tolerance }, resistance));
  return {
    limit: Math.min(...worths.map(({ limit }) => limit)),
    imbalance: Math.max(...worths.map(({ imbalance }) => imbalance)),
  };
}

/**
 * A recommendation rests on the lower end of what was measured, unless the label sets it: without doubt it would
 * be more by as much as the measured value is above that end, and no more than the label.
 */
function withoutDoubt(profile: ModuleProfile): ModuleProfile {
  const { openCircuit, droop, usable, recommended, label } = profile;
  const [low] = usable.interval;
  const freed = low > 0 ? recommended.current * (usable.value / low) : recommended.current;
  return {
    ...profile,
    openCircuit: { ...openCircuit, interval: [openCircuit.value, openCircuit.value] },
    droop: { ...droop, interval: [droop.value, droop.value] },
    recommended: {
      ...recommended,
      current: Math.max(recommended.current, Math.min(freed, label.current)),
    },
  };
}
