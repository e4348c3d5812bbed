import { describe, expect, it } from 'vitest';
import { currentWithin } from '../../src/circuit/dissipation-limit.js';
import { inGroup, inStack, lineOf, limitOf, voltageOf } from '../../src/circuit/supply-line.js';
import fc from '../property.js';

const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const line = fc
  .record({ voltage: number(10, 13), resistance: number(0, 2), limit: number(1, 6) })
  .map(lineOf);
const supply = fc.oneof(
  line,
  fc.tuple(line, line).map(inGroup),
  fc.tuple(fc.tuple(line, line).map(inGroup), line).map(inStack),
);

describe('the current that a heat limit allows', () => {
  it('is the power over the voltage left, where the voltage does not fall', () => {
    expect(currentWithin(lineOf({ voltage: 36, resistance: 0, limit: 5 }), 5, 25)).toBeCloseTo(25 / 31, 12);
  });

  it('is the limit of the supply where it never gets so hot', () => {
    expect(currentWithin(lineOf({ voltage: 12, resistance: 0.1, limit: 3 }), 11, 25)).toBe(3);
    expect(currentWithin(lineOf({ voltage: 12, resistance: 0.1, limit: 3 }), 13, 25)).toBe(3);
  });

  it('is not passed by one beyond at which it would be cooler again', () => {
    // 12 V behind 2 Ω at 0 V out: 18 W at 3 A is the most, 16 W are reached at 2 A and again at 4 A.
    expect(currentWithin(lineOf({ voltage: 12, resistance: 2, limit: 5 }), 0, 16)).toBeCloseTo(2, 9);
  });

  it('is met from below at every smaller current, and passed just beyond', () => {
    fc.assert(
      fc.property(supply, number(0, 30), number(1, 60), (found, output, most) => {
        const current = currentWithin(found, output, most);
        const heat = (at: number) => (voltageOf(found, at) - output) * at;
        for (let step = 0; step <= 200; step += 1) {
          expect(heat((current * step) / 200)).toBeLessThanOrEqual(most * (1 + 1e-9));
        }
        if (current < limitOf(found)) expect(heat(current)).toBeCloseTo(most, 6);
      }),
    );
  });
});
