import { findingNamed } from '../../analysis/finding.js';
import { asGiven } from '../../analysis/in-words.js';
import type { GroupLook } from '../../analysis/module-currents.js';
import {
  type ShareRead,
  type ShareThere,
  type SharingSeen,
  sharesRead,
  sharesThere,
  sharingSeen,
} from '../../analysis/sharing-seen.js';
import { carriedAt } from '../../analysis/shares.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { Amperes, Ratio } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import type { RunHeader } from '../../record/run-header.js';
import { extremesOf } from '../chart/axis.js';
import type { ChartLine } from '../chart/drawn-line.js';
import type { VerticalMark } from '../chart/marks.js';
import { type ChartPoint, type Level, pointChart, type PointSort } from '../chart/point-chart.js';
import { hoggingInWords } from '../group-answer.js';
import type { Markup } from '../page/markup.js';
import { isWhole, type Result } from '../result.js';
import { figure } from '../page/figure.js';
import { allowedAs, amps, foundInWords, stepInWords } from './in-words.js';
import { lineThrough, memberLook, once } from './member-look.js';

const title = 'Who carries how much';
/** The line of a label is bent: so many places of it are reckoned. */
const places = 61;

/**
 * Each member's share of the current over the current of the whole, with what each share may be off by, the equal
 * share, and where a member would carry more than its label. Undefined where nothing was shared, and where the
 * members' currents may not be believed.
 */
export function sharesFigure(result: Result): Markup | undefined {
  const { evidence, findings, header } = result;
  const seen = sharingSeen(evidence);
  const highest = seen?.held.at(-1);
  if (seen === undefined || highest === undefined) return undefined;
  const marks = marksOf(result, seen);
  const [, most] = extremesOf([...seen.held.map(({ total }) => total), ...marks.map(({ at }) => at)]);
  const sorts = sortsOf(header, seen.held);
  const last = sharesThere(header, highest);
  const hog = findingNamed(findings, 'hogging-module')?.value;
  const members = carriedAt(highest).map(({ module, share }, place) => {
    const { points, look } = sorts[place] ?? { points: [], look: place };
    const along = points.map((point) => ({ ...point, y: Math.min(1, Math.max(0, point.y)) }));
    return lineThrough(`${percent(share)} ${module}${module === hog ? ', hogs' : ''}`, along, look);
  });
  return figure(
    title,
    pointChart({
      id: 'shares',
      title,
      description: inWords(result, seen, last),
      x: { label: 'Current of the whole', dimension: 'current', from: 0, to: most * 1.03 },
      y: { label: 'Share of it', dimension: 'ratio', from: 0, to: topOf(sorts) },
      sorts,
      lines: [...members, ...labelsOf(header, most)],
      levels: [equalShare(header)],
      marks,
      names: 'beside',
    }),
    caption(result, seen),
  );
}

function sortsOf(header: RunHeader, held: readonly GroupLook[]): readonly PointSort[] {
  const looks = held.map((look) => ({
    look,
    read: sharesRead(look),
    there: once(() => sharesThere(header, look)),
  }));
  return header.modules.map(({ name }, place) => ({
    name,
    ...memberLook(place),
    points: looks.flatMap(({ look, read, there }) => {
      const one = read[place];
      return one === undefined ? [] : [pointOf(one, look, () => there()[place]?.shareExpanded ?? 0)];
    }),
  }));
}

function pointOf(
  { module, share, current }: ShareRead,
  { total, step }: GroupLook,
  expanded: () => Ratio,
): ChartPoint {
  return {
    x: total,
    y: share,
    between: () => [share - expanded(), share + expanded()],
    says: () =>
      `${module} ${percent(share)} ± ${percent(expanded())}: ${amps(current)} of ${amps(total)}; ` +
      stepInWords({ step, kind: 'sharing-log' }),
  };
}

/** What the shares reach, with some air; how far off they may be at light load would squeeze all the rest. */
function topOf(sorts: readonly PointSort[]): Ratio {
  const [, most] = extremesOf(sorts.flatMap(({ points }) => points.map(({ y }) => y)));
  return Math.min(1, Math.max(1.2 * most, 1.2 / sorts.length));
}

/** Above it a member carries more than its own label says. */
function labelsOf({ modules }: RunHeader, most: Amperes): readonly ChartLine[] {
  const labels = [...new Set(modules.map(({ rated }) => rated.current))];
  return labels
    .filter((label) => label < most)
    .map((label) => {
      const xs = Array.from(
        { length: places },
        (_, index) => label + ((most - label) * index) / (places - 1),
      );
      const whose = modules.filter(({ rated }) => rated.current === label).map(({ name }) => name);
      const of = labels.length === 1 ? '' : ` of ${whose.join(', ')}`;
      return {
        name: `label ${asGiven(label, 'current')}${of}`,
        xs,
        ys: xs.map((total) => label / total),
        look: 5,
      };
    });
}

function equalShare({ modules }: RunHeader): Level {
  const at = 1 / modules.length;
  return { at, name: `${percent(at)} equal share` };
}

function marksOf(result: Result, { saturated }: SharingSeen): readonly VerticalMark[] {
  const recommended = findingNamed(result.findings, 'recommended-current')?.value;
  return [
    ...(typeof recommended === 'number' && recommended > 0 && isWhole(result)
      ? [{ at: recommended, label: `${allowedAs(result)} ${roundedDown(recommended, 'current')}` }]
      : []),
    ...(saturated === undefined
      ? []
      : [
          {
            at: saturated.total,
            label: `${saturated.module} ${saturated.how === 'stays' ? 'at its limit' : 'has left'} beyond ${amps(saturated.total)}`,
          },
        ]),
  ];
}

function inWords({ findings }: Result, { held }: SharingSeen, last: readonly ShareThere[]): string {
  const each = last.map(
    ({ module, share, shareExpanded, current }) =>
      `${module} ${percent(share)} ± ${percent(shareExpanded)}, ${amps(current)}`,
  );
  const [lowest, highest] = extremesOf(held.map(({ total }) => total));
  return [
    `${held.length} points from ${amps(lowest)} to ${amps(highest)}.`,
    `At ${amps(held.at(-1)?.total ?? highest)}: ${each.join('; ')}.`,
    ...hoggingInWords(findings),
  ].join(' ');
}

function caption({ findings, header }: Result, { held }: SharingSeen): string {
  const imbalance = findingNamed(findings, 'imbalance');
  const label = header.modules.some(({ rated }) => rated.current < (held.at(-1)?.total ?? 0));
  return [
    ...hoggingInWords(findings),
    ...(imbalance === undefined || header.modules.length < 2
      ? []
      : [
          `Imbalance at ${amps(held.at(-1)?.total ?? 0)}, the largest current less the smallest over their mean: ${foundInWords(imbalance)}.`,
        ]),
    'The bars hold each share with 95 %.',
    ...(label ? ['Above the line of its label a member carries more than that says.'] : []),
  ].join(' ');
}

/** To a tenth of a percent from ten on, else to two digits. */
function percent(ratio: Ratio): string {
  return formatQuantity(ratio, 'ratio', { significant: Math.abs(ratio) >= 0.1 ? 3 : 2 });
}
