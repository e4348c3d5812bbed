import { findingNamed } from '../../analysis/finding.js';
import { asGiven } from '../../analysis/in-words.js';
import type { GroupLook } from '../../analysis/module-currents.js';
import { type SharingSeen, sharesThere, sharingSeen } from '../../analysis/sharing-seen.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { Amperes, Ratio } from '../../quantity/quantity.js';
import type { RunHeader } from '../../record/run-header.js';
import { extremesOf } from '../chart/axis.js';
import type { ChartLine } from '../chart/drawn-line.js';
import type { VerticalMark } from '../chart/marks.js';
import { pointChart, type PointSort } from '../chart/point-chart.js';
import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';
import { figure } from '../sheet/figure.js';
import { amps, foundInWords, stepInWords } from './in-words.js';
import { memberLook } from './member-look.js';

const title = 'Who carries how much';

/**
 * Each member's share of the current over the current of the whole. Undefined where nothing was shared, or where the
 * members' currents may not be believed.
 */
export function sharesFigure(result: Result): Markup | undefined {
  const { evidence, header } = result;
  const seen = sharingSeen(evidence);
  if (seen === undefined || seen.held.length === 0) return undefined;
  const [, most] = extremesOf(seen.held.map(({ total }) => total));
  return figure(
    title,
    pointChart({
      id: 'shares',
      title,
      description: inWords(result, seen),
      x: { label: 'Current of the whole', dimension: 'current', from: 0, to: most * 1.03 },
      y: { label: 'Share', dimension: 'ratio', from: 0 },
      sorts: sortsOf(header, seen.held),
      lines: labelsOf(header, most),
      levels: [equalShare(header)],
      marks: marksOf(seen),
    }),
    caption(result),
  );
}

function sortsOf(header: RunHeader, held: readonly GroupLook[]): readonly PointSort[] {
  return header.modules.map(({ name }, place) => ({
    name,
    ...memberLook(place),
    joined: true,
    points: held.flatMap((look) => {
      const there = sharesThere(header, look)[place];
      if (there === undefined) return [];
      const { share, shareExpanded, current } = there;
      return [
        {
          x: look.total,
          y: share,
          says: () =>
            `${name} ${percent(share)} ± ${percent(shareExpanded)}, ${amps(current)} of ${amps(look.total)}; ` +
            stepInWords({ step: look.step, kind: 'sharing-log' }),
        },
      ];
    }),
  }));
}

/** Beyond it a member carries more than its own label says. */
function labelsOf({ modules }: RunHeader, most: Amperes): readonly ChartLine[] {
  const labels = [...new Set(modules.map(({ rated }) => rated.current))];
  return labels
    .filter((label) => label < most)
    .map((label) => {
      const xs = Array.from({ length: 61 }, (_, index) => label + ((most - label) * index) / 60);
      const whose = modules.filter(({ rated }) => rated.current === label).map(({ name }) => name);
      const of = labels.length === 1 ? 'each' : whose.join(', ');
      return {
        name: `label of ${of}, ${asGiven(label, 'current')}`,
        xs,
        ys: xs.map((total) => label / total),
        look: 5,
      };
    });
}

function equalShare({ modules }: RunHeader): { readonly at: Ratio; readonly name: string } {
  const at = 1 / modules.length;
  return { at, name: `equal ${percent(at)}` };
}

function marksOf({ saturated }: SharingSeen): readonly VerticalMark[] {
  if (saturated === undefined) return [];
  const { module, how, total } = saturated;
  return [{ at: total, label: `${module} ${how === 'stays' ? 'at its limit' : 'left'}` }];
}

function inWords({ findings, header }: Result, { held }: SharingSeen): string {
  const highest = held.at(-1);
  const shares = highest === undefined ? [] : sharesThere(header, highest);
  const each = shares.map(
    ({ module, share, shareExpanded }) => `${module} ${percent(share)} ± ${percent(shareExpanded)}`,
  );
  const imbalance = findingNamed(findings, 'imbalance');
  return [
    `${held.length} points. At ${amps(highest?.total ?? 0)}: ${each.join(', ')}.`,
    ...(imbalance === undefined ? [] : [`Imbalance ${foundInWords(imbalance)}.`]),
  ].join(' ');
}

function caption({ findings }: Result): string {
  const hogging = findingNamed(findings, 'hogging-module');
  if (hogging === undefined) return '';
  const said =
    hogging.value === 'none'
      ? 'They share the load'
      : hogging.value === 'undetermined'
        ? 'Whether one of them hogs could not be told'
        : `${String(hogging.value)} hogs`;
  return `${said}: ${hogging.note}.`;
}

function percent(ratio: Ratio): string {
  return formatQuantity(ratio, 'ratio', { significant: Math.abs(ratio) >= 0.1 ? 3 : 2 });
}
