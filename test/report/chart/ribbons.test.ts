import { describe, expect, it } from 'vitest';
import { lineChart } from '../../../src/report/chart/line-chart.js';

const heat = { word: 'heat', sign: 'H' };
const limit = { word: 'current limit', sign: 'C' };

/** What stands in and above the strip of a chart from 0 V to 30 V, in the order in which it is drawn. */
function strip(...stretches: readonly { from: number; to: number; word: string; sign: string }[]): string[] {
  const chart = lineChart({
    ...{ id: 'c', title: 't', description: 'd', marks: [] },
    x: { label: 'Output', dimension: 'voltage' },
    y: { label: 'Current', dimension: 'current', from: 0 },
    lines: [{ name: 'rising', xs: [0, 30], ys: [1, 2] }],
    ribbons: [{ label: 'Set by', stretches }],
  }).toString();
  const after = chart.slice(chart.indexOf('Set by'), chart.indexOf('class="axis"'));
  return [...`>${after}`.matchAll(/(?:^|<text[^>]*)>([^<]+)<\/text>/g)].map(([, text]) => text ?? '');
}

describe('a strip below a chart', () => {
  it('says in words what holds, where each has room for its own', () => {
    expect(strip({ from: 0, to: 15, ...heat }, { from: 15, to: 30, ...limit })).toEqual([
      'Set by',
      'heat',
      'current limit',
    ]);
  });

  it('has letters only where one word has no room, and says above it what they mean', () => {
    expect(strip({ from: 0, to: 27, ...heat }, { from: 27, to: 30, ...limit })).toEqual([
      'Set by: H heat, C current limit',
      'H',
      'C',
    ]);
  });

  it('leaves a stretch bare that has no room for a letter', () => {
    expect(strip({ from: 0, to: 29.8, ...heat }, { from: 29.8, to: 30, ...limit })).toEqual([
      'Set by: H heat, C current limit',
      'H',
    ]);
  });
});
