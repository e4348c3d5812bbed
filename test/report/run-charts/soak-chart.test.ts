import { describe, expect, it } from 'vitest';
import { findingNamed } from '../../../src/analysis/finding.js';
import { curveFigure } from '../../../src/report/run-charts/curve-chart.js';
import { soakFigure } from '../../../src/report/run-charts/soak-chart.js';
import { randomFrom } from '../../../src/statistics/random.js';
import { thermometerHeader, warming } from '../../analysis/soak-events.js';
import { readChart } from '../chart/read-chart.js';
import { idle, madeResult, soaked } from './made-results.js';

const room = { ambient: { temperature: 22, uncertainty: 0.5 } };

function noisy(scatter: number): (t: number) => number {
  const random = randomFrom(11);
  return (t) => warming(t) + scatter * random.normal();
}

describe('a soak', () => {
  it('is drawn in minutes, with the curve through it, the air and the limit of temperature', () => {
    const header = thermometerHeader(room, { limit: 70 });
    const figure = soakFigure(soaked({ temperature: warming }, header));
    if (figure === undefined) throw new Error('no soak');
    const { marks, lines, texts } = readChart(figure, 'soak');
    expect(texts).toContain('Time under load (min)');
    for (const { x, y } of marks) expect(Math.abs(y - warming(60 * x))).toBeLessThan(0.4);
    const fitted = lines.get('fitted settling') ?? [];
    expect(fitted.at(-1)?.[0]).toBeCloseTo(100, 0);
    for (const [x, y] of fitted) expect(Math.abs(y - warming(60 * x))).toBeLessThan(0.4);
    expect(texts.map((text) => text.replaceAll('\u00a0', ' '))).toEqual(
      expect.arrayContaining(['ambient 22 °C', 'limit 70 °C']),
    );
    // Watched for more than five time constants there is nothing to predict.
    expect(lines.has('predicted')).toBe(false);
  });

  it('that was cut short goes on as a prediction, dashed and named, to the interval of the finding', () => {
    const result = soaked({ temperature: noisy(0.2), until: 1080 }, thermometerHeader(room));
    const figure = soakFigure(result);
    if (figure === undefined) throw new Error('no soak');
    const { lines, texts, whiskers, description } = readChart(figure, 'soak');
    const predicted = lines.get('predicted') ?? [];
    expect(predicted[0]?.[0]).toBeCloseTo(18, 0);
    // Five time constants of 12 min.
    expect(predicted.at(-1)?.[0] ?? NaN).toBeGreaterThan(45);
    expect(texts).toContain('predicted');
    expect(figure.toString()).toContain('Dashed: predicted, not read.');
    const rise = findingNamed(result.findings, 'temperature-rise')?.interval ?? [NaN, NaN];
    expect(whiskers[0]?.low).toBeCloseTo(22 + rise[0], 0);
    expect(whiskers[0]?.high).toBeCloseTo(22 + rise[1], 0);
    expect(description.replaceAll('\u00a0', ' ')).toMatch(
      /It settles at 5\d(\.\d)? °C, with a time constant of 1\d\.\d min/,
    );
  });

  it('that was too short to tell says so, and predicts nothing', () => {
    const figure = soakFigure(soaked({ temperature: noisy(0.2), until: 60 }));
    const text = figure?.toString() ?? '';
    expect(text).toContain('Too little was watched to tell where the temperature goes.');
    expect(text).not.toMatch(/predicted|whisker|NaN/);
  });

  it('has the drift of the voltage below, on an axis of its own', () => {
    const figure = soakFigure(soaked({ temperature: warming, voltage: (t) => 15.1 - t / 1e6 }));
    if (figure === undefined) throw new Error('no soak');
    const { marks, lines } = readChart(figure, 'soak-voltage');
    for (const { x, y } of marks) expect(Math.abs(y - (15.1 - (60 * x) / 1e6))).toBeLessThan(0.0002);
    const drift = lines.get('drift at the end') ?? [];
    const [[from, high] = [], [to, low] = []] = [drift[0], drift.at(-1)];
    // Over the last ten minutes, by 1 µV a second.
    expect((to ?? 0) - (from ?? 0)).toBeCloseTo(10, 0);
    expect((high ?? 0) - (low ?? 0)).toBeCloseTo(0.0006, 4);
  });

  it('without a thermometer is its voltage alone', () => {
    const figure = soakFigure(soaked({}));
    expect(figure?.toString().match(/<svg/g)).toHaveLength(1);
    expect(figure?.toString()).toContain('id="soak-voltage-title"');
    expect(figure?.toString()).toContain('Nothing read the temperature.');
  });

  it('of a look a second for hours is drawn with its one odd reading, in less than 150 kB', () => {
    const odd = (t: number): number => warming(t) + (t === 5_555 ? 4 : 0.1 * Math.sin(t));
    const result = soaked(
      { temperature: odd, until: 20_000, every: 1, voltage: (t) => 15.1 + 1e-3 * Math.sin(t) },
      thermometerHeader(room),
    );
    expect(soakFigure(result)?.toString().length).toBeLessThan(150_000);
    const { marks, texts } = readChart(soakFigure(result) ?? curveNever(), 'soak');
    expect(Math.max(...marks.map(({ y }) => y))).toBeCloseTo(63, 0);
    expect(marks.length).toBeLessThanOrEqual(302);
    expect(texts.some((text) => / of 20001 drawn$/.test(text))).toBe(true);
  });

  it('of one current is no curve: voltage over current is not drawn', () => {
    const result = soaked({ temperature: warming });
    expect(soakFigure(result)).toBeDefined();
    expect(curveFigure(result)).toBeUndefined();
    expect(curveFigure(soaked({ temperature: warming, dropsAt: 1200 }))).toBeDefined();
  });

  it('is not there where nothing was soaked', () => {
    expect(soakFigure(madeResult([idle]))).toBeUndefined();
    expect(soakFigure(soaked({ dropsAt: 0 }))).toBeUndefined();
  });
});

function curveNever(): never {
  throw new Error('no soak');
}
