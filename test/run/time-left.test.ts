import { expect, it } from 'vitest';
import { timeLeft } from '../../src/run/time-left.js';

const steps = [{ duration: 5 }, { duration: 20 }, { duration: 40 }];

it.each([
  ['before the first step', 0, 0, 65],
  ['in the middle of one', 2, 7, 53],
  ['in one that takes longer than was thought', 2, 90, 40],
  ['when the last one is over', 3, Infinity, 0],
])('the time left %s', (_, step, inStep, left) => {
  expect(timeLeft(steps, step, inStep)).toBe(left);
});
