/** How an output stands to earth: tied to it, cut off from it, neither, or nobody can tell. */
export const earthRelations = ['bonded', 'isolated', 'leaky', 'undetermined'] as const;
export type EarthRelation = (typeof earthRelations)[number];

/** In Ω. */
export interface EarthThresholds {
  readonly bondedBelow: number;
  readonly isolatedAbove: number;
}

/**
 * The relation that an interval of the resistance from output to earth stands for. Only an interval that lies
 * on one side of a threshold says something: one that straddles it is `undetermined`. So is one that lies
 * further below zero than a bond is above it: no resistance is there, but a voltage in the ohmmeter's way.
 * @param interval lower and upper end, in Ω; the upper one is Infinity where the meter showed open.
 * @example earthRelation([46e3, 48e3], { bondedBelow: 10, isolatedAbove: 1e6 }); // => 'leaky'
 */
export function earthRelation(
  [low, high]: readonly [low: number, high: number],
  { bondedBelow, isolatedAbove }: EarthThresholds,
): EarthRelation {
  if (low >= isolatedAbove) return 'isolated';
  if (high <= bondedBelow && low >= -bondedBelow) return 'bonded';
  return low > bondedBelow && high < isolatedAbove ? 'leaky' : 'undetermined';
}
