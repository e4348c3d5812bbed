import { imbalanceOf } from '../circuit/imbalance.js';
import { worstSharing } from '../circuit/worst-sharing.js';
import type { Amperes } from '../quantity/quantity.js';
import { asGroupModule } from './ballast-choice.js';
import type { Estimate } from './build.js';
import { drawnImbalance } from './group-draws.js';
import type { ModuleProfile } from './module-profile.js';
import { type KnownGroup, around } from './share-band.js';
import type { WorstBallast } from './worst-form.js';

/** Its upper end is the worst case of all intervals and tolerances, in which no module can give more than all. */
export function imbalanceAt(
  profiles: readonly ModuleProfile[],
  { drawn }: Pick<KnownGroup, 'drawn'>,
  at: {
    readonly load: Amperes;
    readonly ballast: WorstBallast | undefined;
    readonly currents: readonly Amperes[];
  },
): Estimate {
  const { load, ballast } = at;
  const value = imbalanceOf(at.currents);
  if (load <= 0) return { value, low: value, high: value };
  const worst = worstSharing({
    modules: profiles.map(asGroupModule),
    load,
    ballast: ballast?.resistance ?? 0,
    tolerance: ballast?.tolerance ?? 0,
  }).imbalance;
  const estimate = around(value, drawnImbalance(drawn, load));
  return { ...estimate, high: Math.max(estimate.high, Math.min(worst, profiles.length)) };
}
