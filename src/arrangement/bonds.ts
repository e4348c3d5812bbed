import { listed } from '../quantity/listed.js';
import { railVolts } from './rails.js';
import type { BondCase, Rail } from './series-build.js';

/**
 * What a bond of each 0 V to earth would short while the string's own 0 V is earthed: all modules below it, through
 * the two bonds. So one point of a string may be earthed and no second one.
 */
export function bondsOf(rails: readonly Rail[]): readonly BondCase[] {
  return rails.map(({ module, float }, below) => {
    const shorts = rails.slice(0, below).map((rail) => rail.module);
    const sentence =
      below === 0
        ? `The 0 V of ${module} is that of the string: a bond there earths the string, and then no other point of it may be earthed.`
        : `A second bond, at the 0 V of ${module}, would short ${listed(shorts)} (${railVolts(float.value)}) through earth.`;
    return { module, shorts, volts: float.value, sentence };
  });
}
