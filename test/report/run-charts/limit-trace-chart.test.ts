import { describe, expect, it } from 'vitest';
import { findingNamed } from '../../../src/analysis/finding.js';
import { limitTraceFigure } from '../../../src/report/run-charts/limit-trace-chart.js';
import { evenly } from '../../analysis/evidence-of.js';
import type { Gives } from '../../analysis/trace-events.js';
import { type ChartRead, readChart } from '../chart/read-chart.js';
import { resultOf } from '../fixed-record.js';
import { idle, limited, madeResult, upAndBack } from './made-results.js';

type Figure = ReturnType<typeof limitTraceFigure>;

function read(figure: Figure): ChartRead & { readonly words: string } {
  if (figure === undefined) throw new Error('no limit');
  return { ...readChart(figure), words: figure.toString().replaceAll('\u00a0', ' ') };
}

const steady: Gives = () => 5;
const power: Gives = (voltage) => 75 / voltage;
const pulsing: Gives = (_, sample) => (sample % 5 === 0 ? 5 : null);

describe('a limit', () => {
  it('of constant current is drawn where it was held, with the current into a short and its interval', () => {
    const result = limited(steady);
    const { marks, title, stretches, words } = read(limitTraceFigure(result));
    expect(title).toBe('Past the limit: constant-current');
    expect(marks).toHaveLength(12);
    for (const [index, voltage] of evenly(14.7, 1, 12).entries()) {
      expect(marks[index]?.x).toBeCloseTo(5, 1);
      expect(Math.abs((marks[index]?.y ?? NaN) - voltage)).toBeLessThan(0.05);
    }
    const short = findingNamed(result.findings, 'short-circuit-current');
    expect(short?.value).toBeCloseTo(5, 6);
    expect(stretches.find(({ says }) => says.startsWith('into a short'))?.from).toBeCloseTo(5, 1);
    expect(words).toContain('Constant-current: the current stays the same down to 1.00 V.');
  });

  it('of constant power lies on the line of that power, which is named', () => {
    const { lines, bands, texts, words, marks } = read(limitTraceFigure(limited(power, evenly(14.7, 8, 12))));
    const [name, line] = [...lines].find(([each]) => each.includes('W')) ?? ['', []];
    expect(name.replaceAll('\u00a0', ' ')).toBe('75.0 W ± 5 %');
    expect(texts.map((text) => text.replaceAll('\u00a0', ' '))).toContain('75.0 W ± 5 %');
    for (const [current, voltage] of line) expect(Math.abs(current * voltage - 75)).toBeLessThan(0.6);
    // The band is cut off at the edge of the plot where it leaves it.
    const inner = (bands[0] ?? []).filter(([current]) => current > 6 && current < 9);
    for (const [current, voltage] of inner) {
      expect(Math.abs(Math.abs(current * voltage - 75) - 3.75)).toBeLessThan(0.7);
    }
    expect(inner.length).toBeGreaterThan(5);
    expect(marks.at(-1)?.says.replaceAll('\u00a0', ' ')).toContain('8.0000 V at 9.375 A, 75.0 W; 10 samples');
    expect(words).toContain('The curve is a constant 75.0 W');
  });

  it('that tries again and again is drawn by the most it gave, and told apart by shape', () => {
    const { marks, title, description } = read(limitTraceFigure(limited(pulsing)));
    expect(title).toBe('Past the limit: hiccup');
    expect(new Set(marks.map(({ shape }) => shape))).toEqual(new Set(['triangle-down']));
    expect(marks[0]?.x).toBeCloseTo(5, 1);
    expect(marks[0]?.says.replaceAll('\u00a0', ' ')).toContain(
      'it gave something in 2 of 10 samples, 5.000 A at most, and nothing in the others; step 2',
    );
    expect(description.replaceAll('\u00a0', ' ')).toContain('up to 5.000 A at times');
  });

  it('where it gives nothing is a cross at no current', () => {
    const { marks, words } = read(limitTraceFigure(limited(() => null)));
    expect(marks.every(({ shape, x }) => shape === 'cross' && Math.abs(x) < 0.01)).toBe(true);
    expect(words).toContain('gave nothing');
  });

  it('has its regulated line where the droop is known, and its open circuit where it is not', () => {
    expect(read(limitTraceFigure(limited(steady))).texts.some((text) => text.startsWith('open'))).toBe(true);
    const { lines } = read(limitTraceFigure(resultOf()));
    const line = lines.get('regulated line') ?? [];
    expect(line[0]?.[1]).toBeCloseTo(15.21, 1);
  });

  it('shows what an overload read, sample by sample', () => {
    const { marks } = read(limitTraceFigure(resultOf()));
    const dots = marks.filter(({ shape }) => shape === 'dot');
    expect(dots.some(({ x, y }) => Math.abs(x - 5.2) < 0.05 && Math.abs(y - 8.1) < 0.1)).toBe(true);
    expect(dots.some(({ x }) => Math.abs(x) < 0.05)).toBe(true);
    expect(dots[0]?.says).toContain('asked for 5.600\u00a0A; step 3, overload');
  });

  it('of an overload alone shows what the search held before, from where it fell', () => {
    const of = (result: Parameters<typeof limitTraceFigure>[0]): readonly number[] =>
      read(limitTraceFigure(result)).marks.flatMap(({ shape, x }) => (shape === 'diamond' ? [x] : []));
    const held = of(resultOf());
    expect(Math.max(...held)).toBeCloseTo(5.3, 1);
    expect(held.length).toBeGreaterThan(3);
    expect(of(limited(steady))).toEqual([]);
  });

  it('is not there where nobody looked for it', () => {
    expect(limitTraceFigure(madeResult([]))).toBeUndefined();
    expect(limitTraceFigure(madeResult([idle, upAndBack]))).toBeUndefined();
    expect(limitTraceFigure(madeResult([idle, { kind: 'limit-trace' }]))).toBeUndefined();
  });
});
