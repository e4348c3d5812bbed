import { describe, expect, it } from 'vitest';
import published from '../../../fixtures/reference/droop-sharing.json' with { type: 'json' };
import { findingNamed } from '../../../src/analysis/finding.js';
import type { Result } from '../../../src/report/result.js';
import { sharesFigure } from '../../../src/report/run-charts/shares-chart.js';
import type { Brick } from '../../analysis/circuit-evidence.js';
import { circuitHeader, sharingPoints } from '../../analysis/circuit-evidence.js';
import { evenly } from '../../analysis/evidence-of.js';
import fc from '../../property.js';
import { readChart } from '../chart/read-chart.js';
import { resultOf } from '../fixed-record.js';
import { alike, circuitResult, drawer, ordinary, shared } from './made-groups.js';

function read(result: Result) {
  const figure = sharesFigure(result);
  if (figure === undefined) throw new Error('no shares');
  const markup = figure.toString();
  const words = /<figcaption>(.*)<\/figcaption>/.exec(markup)?.[1] ?? '';
  return { ...readChart(figure), size: markup.length, words: words.replaceAll('\u00a0', ' ') };
}

function plain(texts: Iterable<string>): readonly string[] {
  return [...texts].map((text) => text.replaceAll('\u00a0', ' '));
}

/** What the points of each shape lie at, by rising current. */
function sharesOf({ marks }: ReturnType<typeof read>, shape: string): readonly number[] {
  return marks.filter((mark) => mark.shape === shape).map(({ y }) => y);
}

/** The height of the drawing's unit in percent, at most. */
const drawn = 0.5;

// Source: Millman's theorem, as in any textbook; its numbers, and those of the design idea on copper traces as
// ballasts (Electronic Design magazine), stand in fixtures/reference/droop-sharing.json.
describe('the shares of a group', () => {
  const millman =
    published.entries.find(({ source }) => source.startsWith('Textbook (Millman'))?.checks ?? [];

  it.each(millman)(
    'of $v0_V V are where Millman has them',
    ({ v0_V, total_branch_ohm, load_A, currents_A }) => {
      const bricks = Object.fromEntries(
        v0_V.map((voltage, index): [string, Brick] => {
          const branch = total_branch_ohm[index] ?? NaN;
          return [`K${index + 1}`, { voltage, droop: branch - 0.05, ballast: 0.05 }];
        }),
      );
      const chart = read(shared(bricks, [load_A / 2, load_A]));
      const shares = ['circle', 'square', 'diamond'].flatMap((shape) => sharesOf(chart, shape).at(-1) ?? []);
      expect(shares).toHaveLength(currents_A.length);
      for (const [index, share] of shares.entries()) {
        expect(Math.abs(share - (100 * (currents_A[index] ?? NaN)) / load_A)).toBeLessThan(drawn);
      }
    },
  );

  it('behind copper traces of 10 mΩ, 2 mV apart, are 55 and 45 % of 2 A', () => {
    const trace = { droop: 0, ballast: 0.01 };
    const chart = read(shared({ K1: { voltage: 5.002, ...trace }, K2: { voltage: 5, ...trace } }, [1, 2]));
    expect(Math.abs((sharesOf(chart, 'circle').at(-1) ?? NaN) - 55)).toBeLessThan(drawn);
    expect(Math.abs((sharesOf(chart, 'square').at(-1) ?? NaN) - 45)).toBeLessThan(drawn);
  });

  it('add up to the whole at every load, and each lies on its own line', () => {
    const group = fc.array(fc.double({ min: 15.19, max: 15.21, noNaN: true }), {
      minLength: 2,
      maxLength: 8,
    });
    fc.assert(
      fc.property(group, fc.double({ min: 4, max: 20, noNaN: true }), (voltages, most) => {
        const bricks = Object.fromEntries(
          voltages.map((voltage, index) => [`K${index + 1}`, { ...alike, voltage }]),
        );
        const { marks, lines } = read(shared(bricks, evenly(most / 2, most, 4)));
        const at = new Map<number, number>();
        for (const { x, y } of marks) at.set(Math.round(x * 20), (at.get(Math.round(x * 20)) ?? 0) + y);
        for (const sum of at.values()) expect(Math.abs(sum - 100)).toBeLessThan(drawn * voltages.length);
        expect([...lines.keys()].filter((name) => /K\d/.test(name))).toHaveLength(voltages.length);
      }),
      { numRuns: 10 },
    );
  });

  it('are told apart by shape, named at the ends of their lines, and have the interval of the finding', () => {
    const result = shared(drawer(3), evenly(2, 12, 6));
    const chart = read(result);
    expect(new Set(chart.marks.map(({ shape }) => shape))).toEqual(new Set(['circle', 'square', 'diamond']));
    for (const name of ['K1', 'K2', 'K3']) {
      const finding = findingNamed(result.findings, `share-of-${name}`);
      expect(plain(chart.texts)).toContainEqual(
        expect.stringMatching(new RegExp(`^${(100 * Number(finding?.value)).toFixed(1)} % ${name}`)),
      );
    }
    const [low, high] = findingNamed(result.findings, 'share-of-K1')?.interval ?? [NaN, NaN];
    const reach = chart.reaches.filter(({ x }) => x > 11.9).sort((one, other) => other.high - one.high)[0];
    expect(Math.abs((reach?.low ?? NaN) - 100 * low)).toBeLessThan(drawn);
    expect(Math.abs((reach?.high ?? NaN) - 100 * high)).toBeLessThan(drawn);
    expect(plain(chart.texts)).toContain('33.3 % equal share');
    expect(chart.description).not.toMatch(/NaN|undefined/);
  });

  it('have the line above which a member carries more than its label', () => {
    const { lines } = read(shared({ K1: alike, K2: alike }, evenly(0.8, 8, 10)));
    const [, label] = [...lines].find(([name]) => name.startsWith('label')) ?? ['', []];
    expect(label.length).toBeGreaterThan(5);
    // Share × current of the whole is 4 A all along it.
    for (const [total, share] of label) expect(Math.abs((total * share) / 100 - 4)).toBeLessThan(0.06);
  });

  it('say who hogs, as the finding does, and nobody is said to carry less than nothing', () => {
    const high: Brick = { voltage: 15.27, droop: 0.001, ballast: 0.01 };
    const result = shared({ K1: high, K2: { ...high, voltage: 15.2 } }, evenly(0.5, 4, 6));
    expect(findingNamed(result.findings, 'hogging-module')?.value).toBe('K1');
    const { texts, words } = read(result);
    expect(plain(texts)).toEqual(expect.arrayContaining(['100 % K1, hogs', '0 % K2']));
    expect(words).toMatch(/^K1 hogs: it carries 100 % of 4.00 A/);
  });

  it('mark where one met its limit and the others took over', () => {
    const group = { K1: { ...alike, voltage: 15.4 }, K2: alike, K3: alike };
    const result = shared(group, evenly(1, 12, 12));
    const { ballasts } = { ballasts: { K1: 0.05, K2: 0.05, K3: 0.05 } };
    const header = result.header;
    // From 8 A on K1 gives what it gave at 8 A, and the others share the rest.
    const points = sharingPoints(group, evenly(1, 12, 12)).map((point) => {
      const own = 4;
      if (point.phase === 'proof' || Number(point.places['K1']) / ballasts.K1 <= own) return point;
      const rest = ((point.set ?? 0) - own) / 2;
      return { ...point, places: { K1: own * 0.05, K2: rest * 0.05, K3: rest * 0.05 } };
    });
    const limited = circuitResult(header, points);
    expect(plain(read(limited).texts).some((text) => /^K1 at its limit beyond \d/.test(text))).toBe(true);
  });
});

describe('the recommendation among the shares', () => {
  it('is shown where the test was finished, and not where it was broken off', () => {
    const result = shared(drawer(2), evenly(0.8, 8, 10));
    const isThere = (of: Result): boolean => read(of).texts.some((text) => text.startsWith('recommended'));
    expect(isThere(result)).toBe(true);
    const torn = { kind: 'cut-off', lines: 0, bytes: 0, tornBytes: 0 } as const;
    expect(isThere({ ...result, integrity: torn })).toBe(false);
  });
});

describe('the shares of a record that holds little, or very much', () => {
  it('are not there where nothing is shared, or where the currents do not add up', () => {
    expect(sharesFigure(resultOf())).toBeUndefined();
    const header = circuitHeader({
      circuit: 'parallel',
      ballasts: { K1: [0.05, 0], K2: [0.05, 0] },
      ...ordinary,
    });
    expect(sharesFigure(circuitResult(header, []))).toBeUndefined();
    const wrong = sharingPoints({ K1: alike, K2: { ...alike, ballast: 0.2 } }, evenly(0.8, 8, 10));
    expect(sharesFigure(circuitResult(header, wrong))).toBeUndefined();
  });

  it('are one point each where one was held', () => {
    const { marks } = read(shared(drawer(2), [4]));
    expect(marks.map(({ shape }) => shape)).toEqual(['circle', 'square']);
  });

  it('of one member are the whole', () => {
    const chart = read(shared(drawer(1), [2, 4]));
    expect(sharesOf(chart, 'circle').every((share) => Math.abs(share - 100) < drawn)).toBe(true);
  });

  it('of hundreds of looks keep their size', () => {
    const result = shared(drawer(2), evenly(0.8, 8, 500));
    const { marks, size, texts } = read({ ...result, findings: [] });
    expect(marks.length).toBeGreaterThan(200);
    expect(marks.length).toBeLessThan(320);
    expect(size).toBeLessThan(100_000);
    expect(plain(texts)).toContainEqual(expect.stringMatching(/^K1, \d+ of 500 drawn$/));
  });
});
