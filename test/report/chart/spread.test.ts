import { describe, expect, it } from 'vitest';
import { spread } from '../../../src/report/chart/spread.js';
import fc from '../../property.js';

describe('labels along an edge', () => {
  it('stand where they want to when there is room', () => {
    expect(spread([10, 200, 90], 16, [0, 240])).toEqual([10, 200, 90]);
  });

  it('share what they must give way', () => {
    expect(spread([100, 100], 16, [0, 240])).toEqual([92, 108]);
    expect(spread([100, 104, 102], 16, [0, 240])).toEqual([86, 118, 102]);
  });

  it('stay between the ends', () => {
    expect(spread([240, 240], 16, [0, 240])).toEqual([224, 240]);
  });

  it('are never nearer than the gap, nor out of order, and none is out of bounds', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: -20, max: 260 }), { maxLength: 15 }), (wanted) => {
        const places = spread(wanted, 16, [0, 240]);
        const order = [...wanted.keys()].sort((a, b) => (wanted[a] ?? 0) - (wanted[b] ?? 0));
        const sorted = order.map((index) => places[index] ?? NaN);
        for (const [index, place] of sorted.slice(1).entries())
          expect(place - (sorted[index] ?? NaN)).toBeGreaterThanOrEqual(16 - 1e-6);
        for (const place of places) {
          expect(place).toBeGreaterThanOrEqual(-1e-6);
          expect(place).toBeLessThanOrEqual(240 + 1e-6);
        }
      }),
    );
  });

  it('stand closer where there is no room for all', () => {
    const places = spread(new Array<number>(31).fill(50), 16, [0, 240]);
    expect(places[1]).toBeCloseTo(8, 9);
    expect(places.at(-1)).toBeCloseTo(240, 9);
  });
});
