import { describe, expect, it } from 'vitest';
import { stackFigure } from '../../../src/report/run-charts/stack-chart.js';
import type { Result } from '../../../src/report/result.js';
import { evenly } from '../../analysis/evidence-of.js';
import fc from '../../property.js';
import { readChart } from '../chart/read-chart.js';
import { resultOf } from '../fixed-record.js';
import { circuitResult, drawer, ordinary, stacked } from './made-groups.js';

function read(result: Result) {
  const figure = stackFigure(result);
  if (figure === undefined) throw new Error('no stack');
  const markup = figure.toString();
  const words = /<figcaption>(.*)<\/figcaption>/.exec(markup)?.[1] ?? '';
  return {
    each: readChart(figure, 'stack'),
    sum: readChart(figure, 'stack-sum'),
    size: markup.length,
    words: words.replaceAll('\u00a0', ' '),
  };
}

function plain(texts: Iterable<string>): readonly string[] {
  return [...texts].map((text) => text.replaceAll('\u00a0', ' '));
}

const bricks = drawer(3);
const climb = [0, 1, 2, 3, 4].map((set) => ({ set }));
const gone = (volts: number) => [
  ...climb,
  { set: 4.5, outcome: 'dropped' as const, current: 0.2, change: { K2: volts } },
];

describe('the voltages of a string', () => {
  it('have every member at its own voltage, by shape, and their sum below', () => {
    const { each, sum } = read(stacked(bricks, climb));
    const shapes = ['circle', 'square', 'diamond'];
    for (const [index, shape] of shapes.entries()) {
      const points = each.marks.filter((mark) => mark.shape === shape);
      expect(points).toHaveLength(5);
      for (const { x, y } of points) {
        expect(Math.abs(y - (15.21 - 0.008 * index - 0.018 * x))).toBeLessThan(0.001);
      }
    }
    // Kirchhoff's voltage law: the same current through all, so voltages and droops add up.
    for (const { x, y } of sum.marks) expect(Math.abs(y - (45.606 - 0.054 * x))).toBeLessThan(0.15);
    expect(plain(each.texts)).toEqual(expect.arrayContaining(['K1', 'K2', 'K3']));
    expect(each.description.replaceAll('\u00a0', ' ')).toContain(
      'At 4.000 A: K1 15.138 V, K2 15.130 V, K3 15.122 V, together 45.390 V.',
    );
  });

  it('have the 95 % of the meter that read them', () => {
    const meter = { voltage: { ofReading: 0, fixed: 0.02 * Math.sqrt(3) } };
    const { each } = read(stacked(bricks, climb, { ...ordinary, meter }));
    expect(each.reaches).toHaveLength(15);
    // A rectangular half-width of √3 · 20 mV is a standard uncertainty of 20 mV; 95 % of a normal are 1.960 of it
    // (JCGM 100:2008, 4.3.7 and table G.2).
    for (const { low, high } of each.reaches)
      expect(Math.abs((high - low) / 2 - 1.96 * 0.02)).toBeLessThan(0.001);
  });

  it('add up, whatever the modules', () => {
    const group = fc.array(fc.double({ min: 5, max: 24, noNaN: true }), { minLength: 2, maxLength: 6 });
    fc.assert(
      fc.property(group, (voltages) => {
        const string = Object.fromEntries(
          voltages.map((voltage, index) => [`K${index + 1}`, { voltage, droop: 0.02 }]),
        );
        const { each, sum } = read(stacked(string, climb));
        const at = (marks: typeof each.marks): number =>
          marks.filter(({ x }) => Math.abs(x - 2) < 0.1).reduce((all, { y }) => all + y, 0);
        expect(Math.abs(at(each.marks) - at(sum.marks))).toBeLessThan(0.3 * voltages.length);
      }),
      { numRuns: 10 },
    );
  });

  it('mark whose goes first, between what the string held and what it did not', () => {
    const { each, words } = read(stacked(bricks, gone(0.4)));
    const [bracket] = each.stretches;
    expect(bracket?.from).toBeCloseTo(4, 1);
    expect(bracket?.to).toBeCloseTo(4.5, 1);
    expect(plain(each.texts)).toContain('K2 collapses at 4.500 A');
    const crosses = each.marks.filter(({ shape }) => shape === 'cross');
    expect(crosses).toHaveLength(3);
    expect(Math.min(...crosses.map(({ y }) => y))).toBeCloseTo(0.4, 0);
    expect(words).toContain('The weakest is K2: it collapses at 4.50 A');
    expect(words).not.toContain('below zero');
    expect(plain(each.texts)).not.toContain('0 V');
  });

  it('say who is driven below zero by the others, and draw zero', () => {
    const { each, words } = read(stacked(bricks, gone(-0.71)));
    expect(plain(each.texts)).toContain('0 V');
    expect(each.marks.some(({ y }) => Math.abs(y + 0.71) < 0.1)).toBe(true);
    expect(words).toContain('K2 was driven below zero by the others: -710 mV when 4.500 A were asked for.');
  });

  it('take what reads a little below zero for nothing', () => {
    const meter = { voltage: { ofReading: 5e-4, fixed: 0.01 } };
    expect(read(stacked(bricks, gone(-0.005), { ...ordinary, meter })).words).not.toContain('below zero');
  });

  it('show what may be touched where the string comes near it', () => {
    expect(plain(read(stacked(drawer(4), climb)).sum.texts)).toContain('60 V, touch limit');
    expect(plain(read(stacked(drawer(2), climb)).sum.texts)).not.toContain('60 V, touch limit');
  });

  it('say so where they do not add up', () => {
    const header = stacked(bricks, climb).header;
    const off = climb.map(({ set }) => ({ set, output: 40, places: { K1: 15.2, K2: 15.2, K3: 15.2 } }));
    expect(read(circuitResult(header, off)).words).toMatch(
      /^THEY DO NOT ADD UP: at .* the sum is 45\.600 V and the output gives 40\.000 V/,
    );
  });
});

describe('the voltages of a string that holds little, or very much', () => {
  it('are not there where nothing was stacked', () => {
    expect(stackFigure(resultOf())).toBeUndefined();
    expect(stackFigure(circuitResult(stacked(bricks, climb).header, []))).toBeUndefined();
  });

  it('are one point each where one was held', () => {
    expect(read(stacked(drawer(2), [{ set: 2 }])).each.marks).toHaveLength(2);
  });

  it('of hundreds of points keep their size', () => {
    const result = stacked(
      drawer(2),
      evenly(0, 4, 500).map((set) => ({ set })),
    );
    const { each, size } = read(result);
    expect(each.marks.length).toBeGreaterThan(200);
    expect(each.marks.length).toBeLessThan(320);
    expect(size).toBeLessThan(200_000);
  });
});
