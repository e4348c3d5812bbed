import { describe, expect, it } from 'vitest';

import { effectiveDegreesOfFreedom } from '../../src/statistics/effective-freedom.js';
import fc from '../property.js';
import { relativeError } from './relative-error.js';

const part = fc.record({
  uncertainty: fc.double({ min: 1e-6, max: 1e3, noNaN: true }),
  degreesOfFreedom: fc.double({ min: 1, max: 1e6, noNaN: true }),
});
const parts = fc.array(part, { minLength: 1, maxLength: 8 });

describe('effective degrees of freedom', () => {
  it('add up for parts of the same size', () => {
    expect(
      effectiveDegreesOfFreedom([
        { uncertainty: 1, degreesOfFreedom: 4 },
        { uncertainty: 1, degreesOfFreedom: 4 },
      ]),
    ).toBe(8);
  });

  it('lie between the fewest of any part and the sum of all', () => {
    fc.assert(
      fc.property(parts, (components) => {
        const freedoms = components.map(({ degreesOfFreedom }) => degreesOfFreedom);
        const effective = effectiveDegreesOfFreedom(components);
        expect(effective).toBeGreaterThanOrEqual(Math.min(...freedoms) * (1 - 1e-12));
        expect(effective).toBeLessThanOrEqual(
          freedoms.reduce((sum, freedom) => sum + freedom, 0) * (1 + 1e-12),
        );
      }),
    );
  });

  it('depend neither on the unit nor on the order, not even at picovolts', () => {
    fc.assert(
      fc.property(parts, (components) => {
        const small = [...components].reverse().map(({ uncertainty, degreesOfFreedom }) => ({
          uncertainty: uncertainty * 1e-100,
          degreesOfFreedom,
        }));
        expect(
          relativeError(effectiveDegreesOfFreedom(small), effectiveDegreesOfFreedom(components)),
        ).toBeLessThan(1e-10);
      }),
    );
  });

  it('are infinite where all is taken as known, or nothing is uncertain', () => {
    expect(effectiveDegreesOfFreedom([{ uncertainty: 2, degreesOfFreedom: Infinity }])).toBe(Infinity);
    expect(effectiveDegreesOfFreedom([{ uncertainty: 0, degreesOfFreedom: 3 }])).toBe(Infinity);
  });

  it('grow with a part that is known, and ignore one that is nothing', () => {
    const scatter = { uncertainty: 1, degreesOfFreedom: 4 };
    expect(effectiveDegreesOfFreedom([scatter, { uncertainty: 1, degreesOfFreedom: Infinity }])).toBe(16);
    expect(effectiveDegreesOfFreedom([scatter, { uncertainty: 0, degreesOfFreedom: 1 }])).toBe(4);
  });

  it('are refused for nothing, and for parts that are none', () => {
    expect(() => effectiveDegreesOfFreedom([])).toThrow(/there are no components/);
    expect(() => effectiveDegreesOfFreedom([{ uncertainty: -1, degreesOfFreedom: 3 }])).toThrow(/-1 with 3/);
    expect(() => effectiveDegreesOfFreedom([{ uncertainty: Number.NaN, degreesOfFreedom: 3 }])).toThrow(
      /NaN with 3/,
    );
    expect(() => effectiveDegreesOfFreedom([{ uncertainty: 1, degreesOfFreedom: 0 }])).toThrow(/1 with 0/);
  });
});
