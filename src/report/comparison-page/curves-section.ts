import type { ComparedRecords } from '../comparison.js';
import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { curvesFigure } from './curves-figure.js';
import { lineDifferenceFigure } from './line-difference.js';
import { soaksFigure } from './soaks-figure.js';
import { tracesFigure } from './traces-figure.js';

const figures = [
  ['Voltage over current', curvesFigure],
  ['What lies between the two lines', lineDifferenceFigure],
  ['Past the limit', tracesFigure],
  ['Warming up', soaksFigure],
] as const;

/** The curves of both records laid over each other; undefined where neither has any. */
export function curvesSection(records: ComparedRecords): Markup | undefined {
  const drawn = figures.flatMap(([heading, figure]) => {
    const markup = figure(records);
    return markup === undefined ? [] : [element('h3', {}, heading), markup];
  });
  return drawn.length === 0 ? undefined : section('Curves laid over each other', drawn);
}
