import { describe, expect, it } from 'vitest';
import { attemptBegins, attempting, nextAttempt } from '../../src/simulation/retry.js';
import fc from '../property.js';

describe('a module that keeps trying', () => {
  it.each([
    [10, true],
    [10.05, true],
    [10.2, false],
    [10.79, false],
    [10.8, true],
    [810.01, true],
  ])('tripped at 10 s with a period of 800 ms, at %d s tries: %s', (at, trying) => {
    expect(attempting(10, 0.8, at)).toBe(trying);
  });

  it('begins its next attempt within a period, and only then', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 1e5, noNaN: true }),
        fc.double({ min: 0.1, max: 5, noNaN: true }),
        fc.double({ min: 0, max: 1e5, noNaN: true }),
        (since, period, later) => {
          const at = since + later;
          const next = nextAttempt(since, period, at);
          expect(next).toBeGreaterThan(at - 1e-6);
          expect(next - at).toBeLessThanOrEqual(period + 1e-6);
          expect(attempting(since, period, next)).toBe(true);
          expect(attemptBegins(since, period, next)).toBe(true);
          expect(attemptBegins(since, period, next + period / 3)).toBe(false);
        },
      ),
    );
  });

  it('does not count the trip itself as a new attempt', () => {
    expect(attemptBegins(10, 0.8, 10)).toBe(false);
    expect(attempting(10, 0.8, 10)).toBe(true);
  });
});
