import { describe, expect, it } from 'vitest';
import { type ChartPoint, pointChart, type PointChart } from '../../../src/report/chart/point-chart.js';
import fc from '../../property.js';
import { readChart } from './read-chart.js';

function chartOf(points: readonly (readonly [number, number])[], more: Partial<PointChart> = {}): PointChart {
  return {
    id: 'tried',
    title: 'Tried',
    description: 'Points.',
    x: { label: 'Current', dimension: 'current' },
    y: { label: 'Voltage', dimension: 'voltage' },
    sorts: [{ name: 'read', shape: 'circle', look: 0, points: points.map(([x, y]) => pointAt(x, y)) }],
    ...more,
  };
}

function pointAt(x: number, y: number): ChartPoint {
  return { x, y, says: () => `${x} and ${y}` };
}

describe('a chart of points', () => {
  it('draws each where its numbers say, to a tenth of a unit of the drawing', () => {
    // From 1 A and 1 V on, so that the axes are in A and V.
    const across = fc.double({ min: 1, max: 400, noNaN: true });
    fc.assert(
      fc.property(fc.array(fc.tuple(across, across), { minLength: 2, maxLength: 40 }), (points) => {
        const xs = points.map(([x]) => x);
        const ys = points.map(([, y]) => y);
        const [wide, high] = [Math.max(...xs) - Math.min(...xs), Math.max(...ys) - Math.min(...ys)];
        fc.pre(wide > 1 && high > 1);
        const { marks } = readChart(pointChart(chartOf(points)));
        expect(marks).toHaveLength(points.length);
        for (const [index, [x, y]] of points.entries()) {
          expect(Math.abs((marks[index]?.x ?? NaN) - x)).toBeLessThan(wide / 400);
          expect(Math.abs((marks[index]?.y ?? NaN) - y)).toBeLessThan(high / 100);
        }
      }),
    );
  });

  it('says of each what it is when pointed at, and names the sorts below', () => {
    const read = readChart(pointChart(chartOf([[1, 2], [3, 4]]))); // prettier-ignore
    expect(read.marks.map(({ says }) => says)).toEqual(['1 and 2', '3 and 4']);
    expect(read.texts).toContain('read');
  });

  it('draws what is further down than its axis at the lower edge', () => {
    const { marks } = readChart(
      pointChart({
        ...chartOf([[1, 15], [2, 14]]), // prettier-ignore
        sorts: [
          { name: 'held', shape: 'circle', look: 0, points: [pointAt(1, 15), pointAt(2, 14)] },
          { name: 'gone', shape: 'arrow', look: 1, points: [pointAt(3, Number.NEGATIVE_INFINITY)] },
        ],
      }),
    );
    const lowest = Math.max(...marks.map(({ at: [, y] }) => y));
    expect(marks.find(({ shape }) => shape === 'arrow')?.at[1]).toBe(lowest);
    expect(marks.every(({ at }) => at.every(Number.isFinite))).toBe(true);
  });

  it('keeps its size whatever the number of points, says how many it drew, and makes no words for the others', () => {
    let said = 0;
    const points = Array.from({ length: 100_000 }, (_, index) => ({
      x: index,
      y: index === 31_415 ? 99 : Math.cos(index),
      says: () => {
        said += 1;
        return `reading ${index}`;
      },
    }));
    const drawn = pointChart({
      ...chartOf([]),
      sorts: [
        { name: 'read', shape: 'dot', look: 0, points },
        { name: 'few', shape: 'circle', look: 1, points: [pointAt(5, 5), pointAt(6, 6)] },
      ],
    });
    const { marks, texts } = readChart(drawn);
    expect(said).toBeLessThanOrEqual(302);
    expect(marks.filter(({ shape }) => shape === 'circle')).toHaveLength(2);
    expect(marks.map(({ says }) => says)).toContain('reading 31415');
    expect(texts).toContain(`read, ${said} of 100000 drawn`);
    expect(drawn.toString().length).toBeLessThan(60_000);
  });

  it.each<[string, readonly (readonly [number, number])[]]>([
    ['no point', []],
    ['one point', [[2, 3]]],
    ['points that are all equal', [[2, 3], [2, 3], [2, 3]]], // prettier-ignore
    ['points at nothing', [[0, 0], [0, 0]]], // prettier-ignore
    ['points that are no numbers', [[NaN, 1], [1, NaN], [NaN, NaN]]], // prettier-ignore
    ['huge points', [[1e30, -1e30], [-1e30, 1e30]]], // prettier-ignore
  ])('is whole with %s', (_, points) => {
    const text = pointChart(chartOf(points)).toString();
    expect(text).not.toMatch(/NaN|Infinity/);
    expect(text.endsWith('</svg>')).toBe(true);
  });

  it('writes what a name brings along as text', () => {
    const hostile = '"><script>alert(1)</script>';
    const text = pointChart(chartOf([[1, 1], [2, 2]], { levels: [{ at: 1, name: hostile }], title: hostile })); // prettier-ignore
    expect(text.toString()).not.toContain('<script');
  });
});
