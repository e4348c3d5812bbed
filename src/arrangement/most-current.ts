import type { Amperes } from '../quantity/quantity.js';
import type { ModuleProfile } from './module-profile.js';

/**
 * The most that a module gives anywhere on its curve, by its records: at its knee, past it, or into a short
 * circuit. Known where records went to its limit, and into a short circuit where its style lets that be more.
 */
export function mostCurrentOf({ usable, dropout, shortCircuit, limitStyle }: ModuleProfile): {
  readonly current: Amperes;
  readonly isKnown: boolean;
} {
  const ends = [usable, dropout, shortCircuit].flatMap((taken) => taken?.interval[1] ?? []);
  const growsBeyond = limitStyle?.word === 'constant-current' || limitStyle?.word === 'constant-power';
  return {
    current: Math.max(...ends),
    isKnown:
      limitStyle !== undefined && dropout !== undefined && !(growsBeyond && shortCircuit === undefined),
  };
}
