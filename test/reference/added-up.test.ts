import { describe, expect, it } from 'vitest';
import { addedUp } from '../../src/arrangement/added-up.js';
import { madeSource } from '../arrangement/made-profile.js';

/** A resistor of 1000 Ω known to 0.1 Ω, by a standard of a name or by one of its own. */
function resistor(by: string | undefined) {
  const interval: readonly [number, number] = [999.8, 1000.2];
  const line = {
    name: 'the standard resistor',
    kind: 'B' as const,
    uncertainty: 0.1,
    degreesOfFreedom: Number.POSITIVE_INFINITY,
    shared: by,
  };
  return { value: 1000, interval, budget: [line], from: madeSource('R', 'real-limit'), note: '' };
}

/** Half of the 95 % interval of a normal distribution, in standard uncertainties. */
const coverage = 1.959964;

// Source: JCGM 100:2008, 5.2.2, the example of ten resistors that were all compared with one standard (from memory).
describe('ten resistors of 1000 Ω in series, each known to 0.1 Ω', () => {
  it('are known to 1 Ω where one standard was used for all, as its error goes into each of them', () => {
    const { value, high } = addedUp(Array.from({ length: 10 }, () => ({ taken: resistor('Rs'), times: 1 })));
    expect(value).toBe(10_000);
    expect((high - value) / coverage).toBeCloseTo(1, 5);
  });

  it('would be known to 0.32 Ω were they independent', () => {
    const { value, high } = addedUp(
      Array.from({ length: 10 }, () => ({ taken: resistor(undefined), times: 1 })),
    );
    expect((high - value) / coverage).toBeCloseTo(0.32, 2);
  });
});
