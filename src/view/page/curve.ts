import uPlot from '/uplot.js';
import type { ViewState } from '../view-state.js';
import { type Chart, chartOf, chartWords, pointCells, pointHeads } from './chart-choice.js';
import { drawMarks, markPaths } from './curve-marks.js';
import { drawn, made, place, show, whenChanged, write } from './dom.js';

const plot = place('plot');
const tableRows = 8;
let chart: Chart | undefined;
let drawing: uPlot | undefined;

/** Follows the points; nothing is drawn anew while they stay. */
export function showCurve(state: ViewState): void {
  run = state.run;
  follow(state.points);
}

let run: ViewState['run'];
const follow = whenChanged((points: ViewState['points']) => {
  chart = chartOf(points, run);
  write(place('curve-heading'), chart?.title ?? 'Curve');
  write(place('curve-words'), chartWords(points, run));
  showLegend(chart);
  showTable(points);
  if (chart === undefined) {
    drawing?.destroy();
    drawing = undefined;
    return;
  }
  drawing ??= begun();
  drawing.setData(dataOf(chart));
});

function dataOf({ marks }: Chart): uPlot.AlignedData {
  const sorted = [...marks].sort((one, other) => one.x - other.x);
  return [sorted.map(({ x }) => x), sorted.map(({ y }) => y)];
}

/** A colour of the look, as the light of the room has it now. */
function colour(name: string): string {
  return getComputedStyle(document.documentElement).getPropertyValue(`--${name}`).trim();
}

function begun(): uPlot {
  const font = '13px system-ui, "Liberation Sans", sans-serif';
  const axis = {
    stroke: () => colour('soft'),
    ...{ font, labelFont: font, labelSize: 22, gap: 5 },
    grid: { stroke: () => colour('rule'), width: 0.6 },
    ticks: { stroke: () => colour('ink'), width: 1, size: 5 },
    border: { show: true, stroke: () => colour('ink'), width: 1.2 },
    values: (_: uPlot, splits: number[], __: number, ___: number, step: number) =>
      splits.map((value) => value.toFixed(decimalsOfStep(step))),
  };
  return new uPlot(
    {
      ...sizeNow(),
      legend: { show: false },
      cursor: { show: false },
      padding: [24, 14, 0, 0],
      scales: {
        x: { time: false, range: () => [chart?.x.from ?? 0, chart?.x.to ?? 1] },
        y: { range: () => [chart?.y.from ?? 0, chart?.y.to ?? 1] },
      },
      axes: [
        { ...axis, size: 34, label: () => chart?.x.label ?? '' },
        { ...axis, size: 62, label: () => chart?.y.label ?? '' },
      ],
      series: [{}, { paths: () => null, points: { show: false } }],
      hooks: {
        draw: [
          (drawn: uPlot) => {
            if (chart !== undefined) drawMarks(drawn, chart, colour);
          },
        ],
      },
    },
    [[], []],
    plot,
  );
}

/** As many decimals as the distance between two ticks needs. */
function decimalsOfStep(step: number): number {
  let decimals = 0;
  while (decimals < 6 && Math.abs(step * 10 ** decimals - Math.round(step * 10 ** decimals)) > 1e-6)
    decimals += 1;
  return decimals;
}

function sizeNow(): { readonly width: number; readonly height: number } {
  return { width: Math.max(200, plot.clientWidth), height: Math.max(180, plot.clientHeight) };
}

new ResizeObserver(() => {
  drawing?.setSize(sizeNow());
}).observe(plot);
matchMedia('(prefers-color-scheme: dark)').addEventListener('change', () => {
  drawing?.redraw();
});

const names = { held: 'held', back: 'on the way back', dropped: 'did not hold' } as const;

function showLegend(of: Chart | undefined): void {
  const looks = new Set(of?.marks.map(({ look }) => look));
  place('legend').replaceChildren(
    ...(['held', 'back', 'dropped'] as const)
      .filter((look) => looks.has(look) && looks.size > 1)
      .map((look) => {
        const { line, sign, series } = markPaths[look];
        const sample = drawn(
          'svg',
          { viewBox: '0 0 36 14', 'aria-hidden': 'true' },
          drawn('path', { d: line }),
          drawn('path', { class: 'hollow', d: sign }),
        );
        return made('span', { class: series }, sample, names[look]);
      }),
  );
}

function showTable(points: ViewState['points']): void {
  show(place('last-points'), points.length > 0);
  const rows = points
    .slice(-tableRows)
    .reverse()
    .map((point) => made('tr', {}, ...pointCells(point, run).map((cell) => made('td', {}, cell))));
  place('points').replaceChildren(
    made(
      'table',
      {},
      made('thead', {}, made('tr', {}, ...pointHeads.map((head) => made('th', { scope: 'col' }, head)))),
      made('tbody', {}, ...rows),
    ),
  );
}
