import { describe, expect, it } from 'vitest';
import { findingNamed } from '../../../src/analysis/finding.js';
import type { RunHeader } from '../../../src/record/run-header.js';
import { curveFigure } from '../../../src/report/run-charts/curve-chart.js';
import { evenly, eventsOf, headerOf, ramp } from '../../analysis/evidence-of.js';
import { readChart, type ChartRead } from '../chart/read-chart.js';
import { resultOf } from '../fixed-record.js';
import { bent, brick, idle, madeResult, search, upAndBack } from './made-results.js';

function read(result: ReturnType<typeof madeResult>): ChartRead & { readonly words: string } {
  const figure = curveFigure(result);
  if (figure === undefined) throw new Error('no curve');
  const words = /<figcaption>(.*)<\/figcaption>/.exec(figure.toString())?.[1] ?? '';
  return { ...readChart(figure), words: words.replaceAll('\u00a0', ' ') };
}

function plain(texts: readonly string[]): readonly string[] {
  return texts.map((text) => text.replaceAll('\u00a0', ' '));
}

describe('the curve of a record', () => {
  const whole = read(madeResult([idle, upAndBack, search]));

  it('has every held point at its current and voltage, and tells by shape what it was taken for', () => {
    const of = (shape: string): readonly number[] =>
      whole.marks.filter((mark) => mark.shape === shape).map(({ x }) => Math.round(x * 100) / 100);
    expect(of('circle')).toEqual(evenly(0, 4, 11).map((x) => expect.closeTo(x, 1) as number));
    expect(of('triangle-down')).toHaveLength(11);
    expect(of('diamond')).toEqual([4, 4.4, 4.8, 5.2].map((x) => expect.closeTo(x, 1) as number));
    expect(of('plus')).toEqual([0]);
    for (const { x, y } of whole.marks.filter(({ shape }) => shape === 'diamond')) {
      expect(Math.abs(y - brick(x))).toBeLessThan(0.006);
    }
    expect(whole.marks.find(({ shape }) => shape === 'diamond')?.says).toMatch(
      /^held 15\.138\u00a0V at 4\.000\u00a0A; step 3, dropout-search, point 1; 1 reading$/,
    );
  });

  it('marks what dropped otherwise, and draws what fell out of the chart at its lower edge', () => {
    const cross = whole.marks.find(({ shape }) => shape === 'cross');
    expect(cross?.x).toBeCloseTo(5.3, 1);
    expect(cross?.y).toBeCloseTo(14.4, 1);
    const arrow = whole.marks.find(({ shape }) => shape === 'arrow');
    expect(arrow?.x).toBeCloseTo(5.6, 1);
    expect(arrow?.says).toContain('dropped at 5.600\u00a0A: 400.00\u00a0mV');
    expect(whole.words).toContain('Arrows: dropped');
  });

  it('lays the line through it that the findings are of, as far as its points go', () => {
    const line = whole.lines.get('fitted line') ?? [];
    const [from, to] = [line[0], line.at(-1)];
    expect(from?.[0]).toBeCloseTo(0, 1);
    expect(to?.[0]).toBeCloseTo(4, 1);
    expect(((from?.[1] ?? 0) - (to?.[1] ?? 0)) / 4).toBeCloseTo(0.018, 2);
    expect(whole.words).toMatch(/through 11 points: 15\.2\d+ V − 1[78]\.\d+ mΩ · I/);
    expect(whole.words).toContain(
      'by the scatter of its points about it (Student&#39;s t, 9 degrees of freedom)',
    );
    expect(whole.words).toContain('What the instruments may be wrong by comes on top');
  });

  it('shades from the highest held to the lowest dropped current, and names both', () => {
    const [bracket] = whole.stretches;
    expect(bracket?.from).toBeCloseTo(5.2, 1);
    expect(bracket?.to).toBeCloseTo(5.3, 1);
    expect(plain([bracket?.says ?? ''])).toEqual(['held 5.200 A, dropped 5.300 A']);
    expect(plain(whole.texts)).toContain('held 5.200 A, dropped 5.300 A');
  });

  it('names the label, what is usable and what is recommended', () => {
    expect(plain(whole.texts)).toEqual(
      expect.arrayContaining(['rated 4 A', 'rated 15 V', 'usable 5.250 A', 'recommended 4.00 A']),
    );
  });

  it('says in words and numbers what is to be read off', () => {
    const said = whole.description.replaceAll('\u00a0', ' ');
    expect(said).toContain('Points: 11 on the way up, 11 on the way back, 4 of a search, 1 open circuit.');
    expect(said).toMatch(/droop of 1[78]\.\d+ mΩ, 95 % from/);
    expect(said).toContain('It held 5.200 A and dropped out at 5.300 A.');
    expect(said).toContain('Recommended: 4.00 A.');
    expect(said).toContain('The label says 15 V and 4 A.');
    expect(said).not.toMatch(/NaN|undefined/);
  });

  it('marks where the limit begins with the interval of the finding', () => {
    const result = madeResult([bent]);
    const onset = findingNamed(result.findings, 'limit-onset-current');
    const [low, high] = onset?.interval ?? [NaN, NaN];
    const { stretches, lines, texts } = read(result);
    const shaded = stretches.find(({ says }) => says.startsWith('limit begins'));
    expect(Math.abs((shaded?.from ?? NaN) - low)).toBeLessThan(0.01);
    // A stretch too narrow to be seen is drawn a unit and a half wide.
    expect((shaded?.to ?? NaN) - high).toBeLessThan(0.03);
    expect(plain(texts)).toContain(`limit begins ${Number(onset?.value).toFixed(3)} A`);
    const beyond = lines.get('beyond the knee') ?? [];
    expect(beyond[0]?.[0]).toBeCloseTo(5, 1);
    expect(beyond.at(-1)?.[1]).toBeCloseTo(brick(5.5) - 0.5, 1);
  });
});

describe('the curve of a record that holds little', () => {
  it('is not there without anything held', () => {
    expect(curveFigure(madeResult([]))).toBeUndefined();
    expect(curveFigure(resultOf([], headerOf()))).toBeUndefined();
    const unread = [{ set: 4, samples: [{ meter: null, current: null }] }];
    expect(curveFigure(madeResult([{ kind: 'load-ramp', points: unread }]))).toBeUndefined();
  });

  it('is the open circuit alone where no more was read', () => {
    const { marks, lines, words } = read(madeResult([idle]));
    expect(marks.map(({ shape }) => shape)).toEqual(['plus']);
    expect(lines.size).toBe(0);
    expect(words).toBe('No load was held.');
  });

  it.each([
    ['one point', [4]],
    ['points at one current', [4, 4, 4, 4, 4]],
  ])('has no line with %s, and says so', (_, currents) => {
    const figure = read(madeResult([{ kind: 'load-ramp', points: ramp(currents, brick) }]));
    expect(figure.marks).toHaveLength(currents.length);
    expect(figure.lines.size).toBe(0);
    expect(figure.words).toContain('No line was laid through the points');
  });

  it('is drawn as far as the record goes where that was cut off', () => {
    const events = eventsOf([idle, upAndBack, search], false);
    const half = events.slice(0, Math.floor(events.length / 2));
    const { marks, description } = read(resultOf(half, headerOf()));
    expect(marks.length).toBeGreaterThan(5);
    expect(description).not.toMatch(/NaN|undefined/);
  });

  it('recommends nothing where the test was not finished', () => {
    const unfinished = resultOf(eventsOf([idle, upAndBack, search], false), headerOf());
    expect(findingNamed(unfinished.findings, 'recommended-current')?.value).toBeGreaterThan(0);
    const { texts, description } = read(unfinished);
    expect(plain([...texts, description]).some((text) => /recommended/i.test(text))).toBe(false);
    expect(plain(texts).some((text) => text.startsWith('usable'))).toBe(true);
  });

  it('is that of the whole where several modules were joined, and draws no line', () => {
    const header = headerOf();
    const [K1] = header.modules;
    if (K1 === undefined) throw new Error('no module');
    const group: RunHeader = { ...header, circuit: 'series', modules: [K1, { ...K1, name: 'K2' }] };
    const points = ramp(evenly(0, 4, 5), (current) => 2 * brick(current));
    const figure = read(
      madeResult(
        [{ kind: 'stack-check', points: points.map((point) => ({ ...point, phase: 'stack' })) }],
        group,
      ),
    );
    expect(figure.title).toBe('Voltage of the whole over its current');
    expect(plain(figure.texts)).toEqual(expect.arrayContaining(['rated 30 V', 'rated 4 A']));
    expect(figure.words).toBe('Voltage and current are those of the whole.');
  });

  it('leaves the rated voltage out where it would squeeze the curve', () => {
    const soft = madeResult(
      [{ kind: 'load-ramp', points: ramp(evenly(0, 4, 11), brick) }],
      headerOf({ rated: { voltage: 24, current: 4 } }),
    );
    const figure = read(soft);
    expect(plain(figure.texts)).not.toContain('rated 24 V');
    expect(figure.description.replaceAll('\u00a0', ' ')).toContain('The label says 24 V');
  });

  it('calls nothing a recommendation where it does not conform', () => {
    const { texts, description } = read({
      ...madeResult([idle, upAndBack, search]),
      outcome: 'does-not-conform',
    });
    expect(plain(texts)).toContain('by its limits alone 4.00 A');
    expect([...texts, description].join(' ')).not.toMatch(/recommended/i);
  });
});
