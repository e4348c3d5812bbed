import type { Kelvins, Ratio } from '../quantity/quantity.js';

/**
 * How many times longer an electrolytic capacitor lives when it is cooler by this much: 2^(ΔT/10). Below 1
 * where it is warmer. It compares two temperatures of one part and says nothing of a lifetime in hours.
 *
 * Source: the makers' rule that life doubles for each 10 °C less, L = L0·2^((T0 − T)/10); worked values are
 * checked in test/reference/derating.test.ts. An Arrhenius law has the same factor at an activation energy
 * of some 0.6 eV near 45 °C and 0.8 eV near 100 °C, so the rule is not for large differences.
 * @example timesLonger(10); // => 2
 */
export function timesLonger(cooler: Kelvins): Ratio {
  return 2 ** (cooler / 10);
}
