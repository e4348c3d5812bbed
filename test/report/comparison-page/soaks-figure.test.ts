import { expect, it } from 'vitest';
import { soaksFigure } from '../../../src/report/comparison-page/soaks-figure.js';
import { type SoakGiven, thermometerHeader, warming } from '../../analysis/soak-events.js';
import { recordsOf } from '../compared-records.js';
import { readChart } from '../chart/read-chart.js';
import { soaked } from '../run-charts/made-results.js';

function bothSoaked(later: SoakGiven) {
  const before = soaked({ temperature: warming, until: 6000 }, thermometerHeader(), 7200);
  const after = soaked(later, thermometerHeader(), 300);
  const figure = soaksFigure(recordsOf({ ...before, run: 'before' }, { ...after, run: 'after' }, []));
  if (figure === undefined) throw new Error('no soaks');
  return readChart(figure);
}

it('two soaks are laid over each other from the beginning of each, and so are the lines fitted to them', () => {
  const hotter = (t: number): number => 23 + 46 * (1 - Math.exp(-t / 720));
  const { lines } = bothSoaked({ temperature: hotter, until: 5000 });
  expect(lines.size).toBe(2);
  for (const [line, until, rise] of [
    [[...lines.values()][0] ?? [], 100, 36],
    [[...lines.values()][1] ?? [], 5000 / 60, 46],
  ] as const) {
    // The axis is in minutes, and the fit begins with the second quarter of the soak.
    expect(Math.abs((line[0]?.[0] ?? NaN) - until / 4)).toBeLessThan(1);
    expect(Math.abs((line.at(-1)?.[0] ?? NaN) - until)).toBeLessThan(1);
    for (const [minutes, temperature] of line) {
      expect(Math.abs(temperature - (23 + rise * (1 - Math.exp(-minutes / 12))))).toBeLessThan(0.5);
    }
  }
});

it('with one soak only nothing is laid over anything', () => {
  const before = soaked({ temperature: warming });
  const after = soaked({ temperature: undefined });
  expect(soaksFigure(recordsOf({ ...before, run: 'b' }, { ...after, run: 'a' }, []))).toBeUndefined();
});
