import { describe, expect, it } from 'vitest';
import { chartOf, chartWords, pointCells } from '../../../src/view/page/chart-choice.js';
import { point, run } from './viewed.js';

describe('what is drawn', () => {
  it('is voltage against current while the load goes up, with the nameplate in sight from the first point', () => {
    const chart = chartOf([point(0, { phase: 'idle', step: 1, outcome: 'measured' }), point(0.4)], run);
    expect(chart).toMatchObject({ title: 'Voltage against current', rated: 4 });
    expect(chart?.x.to).toBeGreaterThan(4);
    expect(chart?.marks.map(({ joined }) => joined)).toEqual([false, true]);
  });

  it('tells apart what held, what came on the way back and what did not hold; only walks are lines', () => {
    const chart = chartOf(
      [
        point(3.6),
        point(4),
        point(4.8, { phase: 'climb' }),
        point(5.6, { phase: 'climb', outcome: 'dropped', voltage: 3 }),
        point(4, { phase: 'down' }),
        point(2, { phase: 'down' }),
      ],
      run,
    );
    expect(chart?.marks.map(({ look }) => look)).toEqual(['held', 'held', 'held', 'dropped', 'back', 'back']);
    expect(chart?.marks.map(({ joined }) => joined)).toEqual([false, true, false, false, false, true]);
  });

  it('is not pressed flat by what fell: the frame is that of what held', () => {
    const chart = chartOf([point(4), point(5.6, { outcome: 'dropped', voltage: 3 })], run);
    expect(chart?.y.from).toBeGreaterThan(15);
    expect(chartOf([point(5.6, { outcome: 'dropped', voltage: 3 })], run)?.y.from).toBeLessThan(3);
  });

  it('has what fell where it was asked to be: a module that has let go delivers nothing', () => {
    const fell = point(5.6, { phase: 'climb', outcome: 'dropped', current: 0.002, voltage: -0.001 });
    const after = point(5.6, { phase: 'overload', outcome: 'measured', current: 0.002, voltage: 0.2 });
    const chart = chartOf([point(4), fell, after], run);
    expect(chart?.marks.map(({ x, look }) => [x, look])).toEqual([
      [4, 'held'],
      [5.6, 'dropped'],
    ]);
    expect(chart?.y.from).toBeGreaterThan(15);
  });

  it('does not blow noise up to a slope', () => {
    const { y } = chartOf([point(0, { voltage: 15.2001 }), point(1, { voltage: 15.2 })], run) ?? {};
    expect((y?.to ?? 0) - (y?.from ?? 0)).toBeGreaterThan(0.07);
  });

  it('is temperature over time in a soak, in minutes where it is long, and its voltage where nothing measures warmth', () => {
    const soak = [0, 300, 600].map((t) =>
      point(4, { phase: 'soak', step: 3, t: 50 + t, temperature: 23 + t / 60 }),
    );
    const chart = chartOf([point(0), ...soak], run);
    expect(chart).toMatchObject({
      title: 'Temperature over the time of the soak',
      x: { label: 'Time in min' },
      y: { label: 'Temperature in °C' },
    });
    expect(chart?.marks.map(({ x, y }) => [x, y])).toEqual([
      [0, 23],
      [5, 28],
      [10, 33],
    ]);
    const cold = soak.map((each) => ({ ...each, temperature: null }));
    expect(chartOf(cold, run)?.y.label).toBe('Voltage in V');
  });

  it('is the trace alone while the limit is traced, point after point', () => {
    const trace = [
      point(5.2, { phase: 'trace', step: 3 }),
      point(4.9, { phase: 'trace', step: 3, voltage: 9 }),
    ];
    const chart = chartOf([point(4), ...trace], run);
    expect(chart?.title).toBe('At the limit: voltage against current');
    expect(chart?.marks.map(({ x }) => x)).toEqual([5.2, 4.9]);
    expect(chart?.marks.at(1)?.joined).toBe(true);
  });

  it('is nothing without a point that counts', () => {
    expect(chartOf([], run)).toBeUndefined();
    expect(chartOf([point(1, { outcome: 'interrupted' })], run)).toBeUndefined();
    expect(chartOf([point(1, { voltage: null })], run)).toBeUndefined();
    expect(chartOf([point(0, { phase: 'earth' })], run)).toBeUndefined();
  });
});

describe('the chart in words', () => {
  it('says how many points there are, how many fell, and the last', () => {
    expect(chartWords([], run)).toBe('No points so far.');
    expect(chartWords([point(0.4)], run)).toBe(
      'Voltage against current: 1 point. The last: 0.400 A, 15.193 V, held.',
    );
    expect(chartWords([point(4), point(5, { outcome: 'dropped', voltage: 3 })], run)).toBe(
      'Voltage against current: 2 points, of which 1 did not hold. The last: 5.000 A, 3.000 V, did not hold.',
    );
  });

  it('has in its table what the load was set to: a current, or a voltage', () => {
    expect(pointCells(point(2, { temperature: 30 }), run)).toEqual([
      '2.000 A',
      '2.000 A',
      '15.164 V',
      '30.0 °C',
      'held',
    ]);
    expect(pointCells(point(2, { set: { voltage: 9 }, voltage: null }), run)).toEqual([
      '9.000 V',
      '2.000 A',
      '–',
      '–',
      'held',
    ]);
  });
});
