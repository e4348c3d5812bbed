import { expect, it } from 'vitest';
import { type Bound, type Measured, reached } from './figure.js';

function measured(ratio: number, bound: Bound): Measured {
  const amount = { value: 1, unit: 's' };
  return {
    kind: 'measured',
    name: 'a',
    what: 'a',
    ours: amount,
    rival: { ...amount, what: 'b' },
    ratio,
    bound,
  };
}

it.each([
  [1.6, { atMost: 1.6 }, true],
  [1.61, { atMost: 1.6 }, false],
  [0.7, { atLeast: 0.7 }, true],
  [0.69, { atLeast: 0.7 }, false],
  [Number.NaN, { atMost: 3 }, false],
  [Number.NaN, { atLeast: 3 }, false],
  [11, 'none' as const, true],
] as const)('a ratio of %d under the bound %j is reached: %s', (ratio, bound, expected) => {
  expect(reached(measured(ratio, bound))).toBe(expected);
});
