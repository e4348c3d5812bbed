import { expect, it } from 'vitest';
import { timesLonger } from '../../src/analysis/ten-kelvin-rule.js';

it.each([
  [0, 1],
  [10, 2],
  [30, 8],
  [-10, 0.5],
])('what is cooler by %d K lives %d times as long', (cooler, times) => {
  expect(timesLonger(cooler)).toBe(times);
});
