import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import type { Result } from '../result.js';
import { curveFigure } from '../run-charts/curve-chart.js';
import { limitTraceFigure } from '../run-charts/limit-trace-chart.js';
import { residualsFigure } from '../run-charts/residuals-chart.js';
import { sharesFigure } from '../run-charts/shares-chart.js';
import { soakFigure } from '../run-charts/soak-chart.js';
import { stackFigure } from '../run-charts/stack-chart.js';

type Figure = (result: Result) => Markup | undefined;

/** In the order in which they explain each other; a record has those that it has something for. */
const charts: readonly (readonly [heading: string, figure: Figure])[] = [
  ['Voltage over current', curveFigure],
  ['How well the line fits', residualsFigure],
  ['At the limit and beyond', limitTraceFigure],
  ['Held for long', soakFigure],
  ['How they share the load', sharesFigure],
  ['How the string stands', stackFigure],
];

export function chartsSection(result: Result): Markup | undefined {
  const drawn = charts.flatMap(([heading, figureOf]) => {
    const figure = figureOf(result);
    return figure === undefined ? [] : [[element('h3', {}, heading), figure]];
  });
  return drawn.length === 0 ? undefined : section('What was measured', drawn);
}
