import { describe, expect, it } from 'vitest';
import { lineOverCurrent, soundLine } from '../../src/analysis/sound-line.js';

describe('a sound line', () => {
  it('goes through the points where there are enough of them', () => {
    expect(soundLine([0, 1, 2], [1, 3, 5])).toMatchObject({ slope: 2, intercept: 1 });
    expect(lineOverCurrent([0, 1, 2, 3], [1, 3, 5, 7])?.slope).toBe(2);
  });

  it.each([
    ['no points', [], []],
    ['two points', [0, 1], [1, 2]],
    ['points at one place', [4, 4, 4, 4], [1, 2, 3, 4]],
    ['points closer to one place than numbers can tell', [0, 5e-324, 0, 0], [1, 2, 3, 4]],
  ])('is not there for %s', (_, x, y) => {
    expect(soundLine(x, y)).toBeUndefined();
  });

  it('is no finding with a single degree of freedom', () => {
    expect(lineOverCurrent([0, 1, 2], [1, 3, 5])).toBeUndefined();
  });

  it('does not hide that something else is wrong', () => {
    expect(() => soundLine([0, 1, 2], [1, 2])).toThrow();
  });
});
