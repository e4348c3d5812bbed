import { expect, it } from 'vitest';
import { clockTime, spokenTime } from '../../src/quantity/spoken-time.js';
import fc from '../property.js';

it.each([
  [0, 'under 1 s', '0:00'],
  [0.4, 'under 1 s', '0:00'],
  [48.2, '48 s', '0:48'],
  [59.6, '1 min', '1:00'],
  [125, '2 min 5 s', '2:05'],
  [3599.7, '1 h', '1:00:00'],
  [3800, '1 h 3 min', '1:03:20'],
  [86_400, '24 h', '24:00:00'],
])('%s s is said as "%s", and stands on a clock as "%s"', (seconds, said, shown) => {
  expect(spokenTime(seconds)).toBe(said);
  expect(clockTime(seconds)).toBe(shown);
});

it('never says sixty of anything', () => {
  fc.assert(
    fc.property(fc.double({ min: 0, max: 1e6, noNaN: true }), (seconds) => {
      expect(`${spokenTime(seconds)} ${clockTime(seconds)}`).not.toMatch(/\b60 (s|min)\b|:60\b/);
    }),
  );
});
