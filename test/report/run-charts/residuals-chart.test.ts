import { describe, expect, it } from 'vitest';
import { curveSeen } from '../../../src/analysis/curve-seen.js';
import { residualsSeen } from '../../../src/analysis/residuals-seen.js';
import { residualsFigure } from '../../../src/report/run-charts/residuals-chart.js';
import { evenly, ramp } from '../../analysis/evidence-of.js';
import { readChart } from '../chart/read-chart.js';
import { brick, idle, madeResult, upAndBack } from './made-results.js';

describe('what the points of a record lie off the line', () => {
  const result = madeResult([idle, upAndBack]);
  const figure = residualsFigure(result);
  if (figure === undefined) throw new Error('no residuals');
  const { marks, lines, bands, texts, description } = readChart(figure);
  const seen = residualsSeen(result.header, curveSeen(result.evidence));

  it('is drawn in millivolts about the line at zero, the way up and the way back told apart by shape', () => {
    expect(texts).toContain('Off the line (mV)');
    expect(lines.get('the fitted line')?.every(([, y]) => Math.abs(y) < 0.01)).toBe(true);
    const drawn = (shape: string): readonly number[] =>
      marks.filter((mark) => mark.shape === shape).map(({ y }) => y);
    const off = (phase: string): readonly unknown[] =>
      (seen?.residuals ?? [])
        .filter(({ point }) => point.phase === phase)
        .map((each) => expect.closeTo(1000 * each.off, 1) as unknown);
    expect(drawn('circle')).toEqual(off('ramp'));
    expect(drawn('triangle-down')).toEqual(off('down'));
    expect(drawn('circle')).toHaveLength(11);
  });

  it('is held against what single readings promise', () => {
    const expected = 1000 * (seen?.residuals[0]?.expected ?? NaN);
    const heights = (bands[0] ?? []).map(([, y]) => y);
    expect(Math.max(...heights)).toBeCloseTo(expected, 1);
    expect(Math.min(...heights)).toBeCloseTo(-expected, 1);
    const words = figure.toString().replaceAll('\u00a0', ' ');
    expect(words).toContain('Of 20 points about 19 lie in the shaded band');
    expect(words).toContain('(Student&#39;s t, 88 degrees of freedom)');
    expect(words).toContain('The line goes through the mean of both ways');
    expect(description.replaceAll('\u00a0', ' ')).toMatch(
      /^22 points\. The furthest lies -?\d+(\.\d+)? (mV|µV) off the line, at/,
    );
  });

  it('says that nothing promises anything where each point has one reading and no last digit is known', () => {
    const single = residualsFigure(
      madeResult([{ kind: 'load-ramp', points: ramp(evenly(0, 4, 11), brick) }]),
    );
    expect(single?.toString()).toContain('nothing tells how far off one may lie by chance');
    expect(single?.toString()).not.toMatch(/NaN|class="band"/);
  });

  it('is not there without a line', () => {
    expect(residualsFigure(madeResult([idle]))).toBeUndefined();
    expect(residualsFigure(madeResult([{ kind: 'load-ramp', points: ramp([4], brick) }]))).toBeUndefined();
  });
});
