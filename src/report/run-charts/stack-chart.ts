import { findingNamed } from '../../analysis/finding.js';
import { askedOf, type StackSeen, stackSeen, touchable } from '../../analysis/stack-seen.js';
import { sumUpTo } from '../../analysis/module-voltages.js';
import type { RunHeader } from '../../record/run-header.js';
import { extremesOf } from '../chart/axis.js';
import type { VerticalMark } from '../chart/marks.js';
import { type Level, pointChart, type PointSort } from '../chart/point-chart.js';
import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';
import { figure } from '../sheet/figure.js';
import { amps, stepInWords, volts } from './in-words.js';
import { memberLook } from './member-look.js';

const title = 'Voltages in the string';

/** The voltage of each member of a string, and their sum, over its current. Undefined where nothing was stacked. */
export function stackFigure(result: Result): Markup | undefined {
  const { evidence, header } = result;
  const seen = stackSeen(evidence);
  if (seen === undefined || seen.climb.length === 0) return undefined;
  const sorts = sortsOf(header, seen);
  const points = sorts.flatMap((sort) => sort.points);
  if (points.length === 0) return undefined;
  const [, most] = extremesOf(points.map(({ x }) => x));
  const [lowest, highest] = extremesOf(points.map(({ y }) => y));
  return figure(
    title,
    pointChart({
      id: 'stack',
      title,
      description: inWords(seen),
      x: { label: 'Current of the string', dimension: 'current', from: 0, to: Math.max(most * 1.03, 0.1) },
      y: { label: 'Voltage', dimension: 'voltage', ...(lowest >= 0 ? { from: 0 } : {}) },
      sorts,
      levels: levelsOf(highest),
      marks: marksOf(seen),
    }),
    caption(result),
  );
}

function sortsOf(header: RunHeader, { climb }: StackSeen): readonly PointSort[] {
  const places = header.modules.length;
  const members = header.modules.map(({ name }, place): PointSort => ({
    name,
    ...memberLook(place),
    joined: true,
    points: climb.flatMap((look) =>
      look.modules
        .filter(({ module }) => module === name)
        .map((each) => ({
          x: askedOf(look),
          y: each.volts,
          says: () =>
            `${name} ${volts(each.volts)} at ${amps(askedOf(look))}, ${look.outcome}; ` +
            stepInWords({ step: look.step, kind: 'stack-check' }),
        })),
    ),
  }));
  const sum: PointSort = {
    name: 'sum of them',
    shape: 'dot',
    look: 5,
    joined: true,
    points: climb
      .filter(({ modules }) => modules.length === places)
      .map((look) => {
        const all = sumUpTo(look, places);
        return {
          x: askedOf(look),
          y: all,
          says: () =>
            `together ${volts(all)} at ${amps(askedOf(look))}, the output ${volts(look.output)}; ` +
            stepInWords({ step: look.step, kind: 'stack-check' }),
        };
      }),
  };
  return [...members, sum];
}

/** Shown where the string comes near it. */
function levelsOf(highest: number): readonly Level[] {
  return highest < 0.7 * touchable ? [] : [{ at: touchable, name: `may be touched ${touchable} V` }];
}

function marksOf({ climb, collapse }: StackSeen): readonly VerticalMark[] {
  if (collapse !== undefined) {
    return [{ at: collapse.at, label: `${collapse.module} collapses` }];
  }
  const dropped = climb.find(({ outcome }) => outcome === 'dropped');
  return dropped === undefined ? [] : [{ at: askedOf(dropped), label: 'dropped out' }];
}

function inWords({ climb }: StackSeen): string {
  const last = climb.at(-1);
  const each = last?.modules.map(({ module, volts: own }) => `${module} ${volts(own)}`) ?? [];
  return `${climb.length} points. At ${amps(last === undefined ? 0 : askedOf(last))}: ${each.join(', ')}.`;
}

function caption({ findings }: Result): string {
  const weakest = findingNamed(findings, 'weakest-module');
  if (weakest === undefined) return '';
  const said =
    weakest.value === 'none'
      ? 'None of them gives way first'
      : weakest.value === 'undetermined'
        ? 'Which gives way first could not be told'
        : `The weakest is ${String(weakest.value)}`;
  return `${said}: ${weakest.note}.`;
}
