import { describe, expect, it } from 'vitest';
import { movementOf } from '../../../src/judgement/movement.js';
import type { ComparedRecords } from '../../../src/report/comparison.js';
import { comparisonPage } from '../../../src/report/comparison-page/comparison-page.js';
import { curvesFigure } from '../../../src/report/comparison-page/curves-figure.js';
import { lineDifferenceFigure } from '../../../src/report/comparison-page/line-difference.js';
import { pageMark } from '../../../src/report/page/page.js';
import { headerOf } from '../../analysis/evidence-of.js';
import { readChart } from '../chart/read-chart.js';
import { compared, fourTwins, header, limitMoved, moduleWith, nothingMoved } from './made-comparisons.js';
import { readRows } from './read-rows.js';

const made = { program: 'railproof test', date: new Date('2026-12-02T17:00:00Z') };

function page(records: ComparedRecords): string {
  return comparisonPage(records, made).replaceAll('\u00a0', ' ');
}

function movedIn({ comparison: { findings } }: ComparedRecords): readonly string[] {
  return findings.filter((one) => movementOf(one) === 'moved').map(({ finding }) => finding);
}

/** What each arrow of a page says that it marks. */
function arrowsOf(text: string): readonly string[] {
  return [...text.matchAll(/<g class="shift"><title>([^<]*)/g)].map(([, says = '']) => says);
}

describe('the page of a comparison', () => {
  it('says first what the terminal says first, and of what', () => {
    const text = page(limitMoved);
    expect(text).toContain(pageMark('comparison'));
    expect(text).toContain('<h1>K1: what changed</h1>');
    expect(text).toContain('<p class="word">Not as it should be</p>');
    expect(text.indexOf('droop-resistance moved from 1')).toBeLessThan(text.indexOf('<section'));
    expect(page(nothingMoved)).toContain('<p class="word">As it should be</p>');
    expect(page(nothingMoved)).toContain('Nothing changed beyond its tolerance');
    expect(text).not.toMatch(/NaN|undefined|<script/);
  });

  it.each([
    ['a limit that moved', limitMoved],
    ['nothing that changed', nothingMoved],
    ['four twins', fourTwins],
  ])('marks by arrows what moved and nothing else: %s', (_, records) => {
    const moved = movedIn(records);
    const arrows = arrowsOf(page(records));
    const marked = new Set(arrows.map((says) => /^[a-zA-Z0-9-]+/.exec(says)?.[0]));
    const measured = records.comparison.findings
      .filter(({ finding, difference }) => moved.includes(finding) && difference !== undefined)
      .map(({ finding }) => finding);
    expect([...marked].sort()).toEqual([...measured].sort());
  });

  it('has cases in which something moved, and one in which nothing did', () => {
    expect(movedIn(limitMoved)).toEqual(expect.arrayContaining(['droop-resistance', 'dropout-current']));
    expect(movedIn(nothingMoved)).toEqual([]);
    expect(movedIn(fourTwins)).toEqual(['share-of-W1', 'share-of-W2', 'share-of-W3', 'share-of-W4']);
  });

  it('draws both values of what moved where they can be read off, to a hundredth of the axis', () => {
    const text = page(limitMoved);
    const charts = limitMoved.comparison.findings
      .filter((one) => movementOf(one) === 'moved')
      .map((one, index) => ({ one, rows: readRows(text, `change-${index + 1}`).rows }));
    expect(charts.length).toBeGreaterThan(2);
    const scales: Readonly<Record<string, number>> = { resistance: 1e3, ratio: 100 };
    for (const { one, rows } of charts) {
      const size = scales[one.before?.dimension ?? ''] ?? 1;
      const [then, now] = [one.before, one.after].map((each) => Number(each?.value) * size) as [
        number,
        number,
      ];
      expect(rows.map(({ shape }) => shape)).toEqual(['circle', 'diamond']);
      const slack = Math.abs(now - then) / 50;
      expect(Math.abs((rows[0]?.value ?? NaN) - then)).toBeLessThan(slack);
      expect(Math.abs((rows[1]?.value ?? NaN) - now)).toBeLessThan(slack);
    }
  });

  it('draws each difference as a share of what is allowed', () => {
    const { rows } = readRows(page(fourTwins), 'allowance');
    // 1.5, 1.5, -5 and 2 percentage points of 3 that are allowed.
    expect(rows.map(({ value }) => Math.round(value))).toEqual(
      [50, 50, -167, 67].map((share) => expect.closeTo(share, -0.5) as number),
    );
    expect(rows.map(({ shape }) => shape)).toEqual(['circle', 'circle', 'square', 'circle']);
  });

  it('says of a finding that moved within what is allowed that it moved, and that it may', () => {
    expect(page(fourTwins)).toMatch(
      /<strong>Moved: <\/strong>share-of-W1 from 25\.00\d* % to 26\.50\d* %, by \+1\.5\d* ± 0\.\d+ percentage points .*?allowed is 3 percentage points, and it is within that/,
    );
  });
});

describe('the curves of two records laid over each other', () => {
  it('are told apart by shape and dashes, and named at their ends', () => {
    const figure = curvesFigure(limitMoved);
    if (figure === undefined) throw new Error('no curves');
    const { lines, marks, texts, title } = readChart(figure);
    expect(title).toContain('both records');
    expect([...lines.keys()]).toEqual(['earlier', 'later']);
    expect(texts).toEqual(expect.arrayContaining(['earlier', 'later']));
    expect(new Set(marks.map(({ shape }) => shape))).toEqual(new Set(['circle', 'diamond']));
    const slopes = [...lines.values()].map((line) => {
      const [from, to] = [line[0] ?? [0, 0], line.at(-1) ?? [0, 0]];
      return (from[1] - to[1]) / (to[0] - from[0]);
    });
    expect(slopes[0]).toBeCloseTo(0.018, 2);
    expect(slopes[1]).toBeCloseTo(0.024, 2);
  });

  it('have about each line a band to both sides', () => {
    const figure = curvesFigure(limitMoved);
    if (figure === undefined) throw new Error('no curves');
    const { lines, bands } = readChart(figure);
    expect(bands).toHaveLength(2);
    for (const [index, line] of [...lines.values()].entries()) {
      for (const [x, y] of [line[0] ?? [NaN, NaN], line.at(-1) ?? [NaN, NaN]]) {
        const there = (bands[index] ?? []).filter(([at]) => Math.abs(at - x) < 0.01).map(([, each]) => each);
        expect(Math.max(...there)).toBeGreaterThan(y);
        expect(Math.min(...there)).toBeLessThan(y);
      }
    }
  });

  it('are subtracted from each other, and the slope of that is the change of the droop', () => {
    const figure = lineDifferenceFigure(limitMoved);
    if (figure === undefined) throw new Error('no difference');
    const line = readChart(figure).lines.get('later less earlier') ?? [];
    const [from, to] = [line[0] ?? [0, 0], line.at(-1) ?? [0, 0]];
    const droop = limitMoved.comparison.findings.find(({ finding }) => finding === 'droop-resistance');
    // In mV over A.
    const slope = (from[1] - to[1]) / (to[0] - from[0]) / 1000;
    expect(Math.abs(slope - (droop?.difference?.value ?? NaN))).toBeLessThan(0.0001);
  });
});

describe('what two records are compared by', () => {
  const other = headerOf();
  const changed = {
    ...header,
    began: '2026-11-01T00:00:00.000Z',
    procedure: { ...header.procedure, name: 'acceptance' },
    bench: {
      ...header.bench,
      name: 'corner bench',
      simulated: false,
      voltageFrom: 'load-terminals' as const,
    },
    modules: header.modules.map((module) => ({
      ...module,
      changes: [{ date: '2026-11-14', what: 'link from output to earth removed' }],
    })),
    instruments: other.instruments.map((one) => ({ ...one, identity: `another ${one.role}` })),
  };

  it.each([
    ['the procedures', 'The procedures differ: real-limit, then acceptance.'],
    ['the benches', 'The benches differ. Earlier: nursery bench. Later: corner bench.'],
    ['a simulated bench', 'One of the two was made on a simulated bench'],
    ['the instruments', 'the load and meter are others in the later record.'],
    [
      'what was done',
      'No longer in the file of K1, and it was there before: link from output to earth removed',
    ],
    [
      'where the voltage was read',
      'read at the module in the earlier record and at the load in the later one. There what the leads lose was added by calculation',
    ],
    ['the order', 'The record that was given as the earlier one began after the other.'],
  ])('is said where it is not alike: %s', (_, sentence) => {
    expect(page(compared(moduleWith({}), moduleWith({}, changed)))).toContain(sentence);
    expect(page(limitMoved)).not.toContain(sentence);
  });

  it('is said of each module of a group by its name, and of one alone without', () => {
    const group = page(fourTwins);
    expect(group).toContain('W1: 15 V, 4 A; W2: 15 V, 4 A; W3: 15 V, 4 A; W4: 15 V, 4 A');
    expect(group).toContain('W2: 15 V brick from a retired label printer');
    const alone = page(limitMoved);
    expect(alone).not.toContain('K1: 15 V');
    const done = (index: number) => [{ date: '2026-11-14', what: `fan of number ${index} replaced` }];
    const modules = fourTwins.after.header.modules.map((module, index) => ({
      ...module,
      rated: { ...module.rated, current: 4 + index },
      changes: index === 2 ? done(3) : [],
    }));
    const after = { ...fourTwins.after, header: { ...fourTwins.after.header, modules } };
    const text = page({ ...fourTwins, after });
    expect(text).toContain('<strong>W3: 2026-11-14: fan of number 3 replaced</strong>');
    expect(text).toContain('Later: W1 15 V, 4 A; W2 15 V, 5 A; W3 15 V, 6 A; W4 15 V, 7 A.');
  });

  it('has all in bold that its caption says, which leaves out name and time', () => {
    const text = page(limitMoved);
    expect(text).toContain('Below name and time, what is not the same in both is in bold.');
    expect(text).toMatch(/<t[dh][^>]*>before<\/t[dh]><t[dh][^>]*>after<\/t[dh]>/);
  });

  it('says of one record with itself that it is one', () => {
    expect(page(nothingMoved)).toContain('Both are one and the same record.');
  });

  it('gives the seals, how much of each can be believed, and the instruments', () => {
    const text = page(limitMoved);
    expect(text).toContain('7a'.repeat(32));
    expect(text).toContain('journal whole, every seal holds');
    expect(text).toContain('a meter, meter-scpi, simulated:');
  });

  it('warns of other modules and of what is not whole before anything else', () => {
    const modules = header.modules.map((module) => ({ ...module, name: 'K2' }));
    const cut = { ...moduleWith({}, { ...header, modules }) };
    const broken = {
      ...cut,
      integrity: { kind: 'damaged', lines: 9, bytes: 0, line: 10, problem: 'torn' } as const,
    };
    const text = page(compared(moduleWith({}), broken));
    expect(text).toContain('<h1>K1 and K2: what differs</h1>');
    const [different, damaged, panel] = ['DIFFERENT MODULES: ', 'DAMAGED RECORD: ', 'class="standing'].map(
      (each) => text.indexOf(each),
    ) as [number, number, number];
    expect(different).toBeGreaterThan(0);
    expect(damaged).toBeGreaterThan(different);
    expect(panel).toBeGreaterThan(damaged);
  });
});
