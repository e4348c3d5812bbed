import { expect, it } from 'vitest';
import { tracesFigure } from '../../../src/report/comparison-page/traces-figure.js';
import type { Gives } from '../../analysis/trace-events.js';
import { recordsOf } from '../compared-records.js';
import { readChart } from '../chart/read-chart.js';
import { limited } from '../run-charts/made-results.js';

const steady: Gives = () => 5;
const pulsing: Gives = (_, sample) => (sample % 5 === 0 ? 5 : null);

it('what gave at a voltage and what gave nothing, or at times only, have marks of their own', () => {
  const [before, after] = [limited(steady), limited(pulsing)];
  const figure = tracesFigure(recordsOf({ ...before, run: 'before' }, { ...after, run: 'after' }, []));
  if (figure === undefined) throw new Error('no traces');
  const { marks, lines, description, title } = readChart(figure);
  expect(title).toContain('Past the limit, both records');
  const earlier = marks.filter(({ says }) => says.startsWith('earlier: '));
  const later = marks.filter(({ says }) => says.startsWith('later: '));
  expect(new Set(earlier.map(({ shape }) => shape))).toEqual(new Set(['circle']));
  expect(new Set(later.map(({ shape }) => shape))).toEqual(new Set(['cross']));
  expect(earlier).toHaveLength(12);
  expect(later).toHaveLength(12);
  expect(description).toContain('12 points held at a voltage, earlier');
  expect(description).toContain('12 points gave nothing, or at times only, later');
  expect([...lines.keys()].filter((name) => name.includes('later'))).toEqual([]);
});
