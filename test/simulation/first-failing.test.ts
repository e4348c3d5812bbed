import { expect, it } from 'vitest';
import { firstFailing } from '../../src/simulation/first-failing.js';
import fc from '../property.js';

it('the moment from which something fails is found to a microsecond, and it fails at that moment', () => {
  fc.assert(
    fc.property(fc.double({ min: 0.001, max: 3599, noNaN: true }), (turn) => {
      const holds = (at: number): boolean => at < turn;
      const found = firstFailing(holds, 0, 3600);
      expect(holds(found)).toBe(false);
      expect(found - turn).toBeLessThanOrEqual(1e-6);
    }),
  );
});
