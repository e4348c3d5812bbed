import { StandardError } from './errors.js';

export type UnitSymbol = 'V' | 'A' | 'W' | 'OHM' | 'S' | 'HZ' | 'CEL';

/** IEEE 488.2, 7.7.3.3: the multipliers, and that case does not matter. */
const multipliers: Readonly<Record<string, number>> = {
  EX: 1e18,
  PE: 1e15,
  T: 1e12,
  G: 1e9,
  MA: 1e6,
  K: 1e3,
  '': 1,
  M: 1e-3,
  U: 1e-6,
  N: 1e-9,
  P: 1e-12,
  F: 1e-15,
  A: 1e-18,
};

/** Of ohms and hertz M is a million: the one exception that the standard makes. */
const mega: ReadonlySet<string> = new Set<UnitSymbol>(['OHM', 'HZ']);

/**
 * What a number with this suffix is multiplied by to be in the unit. The unit alone, a multiplier before it, or
 * nothing; a multiplier alone is no suffix.
 * @throws StandardError -131
 */
export function factorOf(suffix: string, unit: UnitSymbol): number {
  if (suffix === '') return 1;
  if (!suffix.endsWith(unit)) throw new StandardError(-131);
  const multiplier = suffix.slice(0, -unit.length);
  if (multiplier === 'M' && mega.has(unit)) return 1e6;
  const factor = multipliers[multiplier];
  if (factor === undefined) throw new StandardError(-131);
  return factor;
}
