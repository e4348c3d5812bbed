/**
 * How unevenly modules share: the spread between the largest and the smallest current, as a share of their
 * mean. 0 when they are equal, and where nothing flows at all.
 */
export function imbalanceOf(currents: readonly number[]): number {
  if (currents.length === 0) return 0;
  const mean = currents.reduce((sum, current) => sum + current, 0) / currents.length;
  const spread = Math.max(...currents) - Math.min(...currents);
  return spread === 0 ? 0 : spread / mean;
}
