import { type CurveSeen, curveSeen } from '../../analysis/curve-seen.js';
import { lineAt } from '../../analysis/regulation-line.js';
import type { Compared } from '../../judgement/compare.js';
import { listed } from '../../quantity/listed.js';
import { extremesOf } from '../chart/axis.js';
import type { ChartLine } from '../chart/drawn-line.js';
import { pointChart, type PointSort } from '../chart/point-chart.js';
import type { ComparedRecords } from '../comparison.js';
import type { Markup } from '../page/markup.js';
import { heldSorts, idleSort } from '../run-charts/curve-points.js';
import { foundInWords } from '../run-charts/in-words.js';
import { figure } from '../page/figure.js';
import { hasMoved } from './compared-words.js';
import { bothInWords, seenInWords, verbsOf } from './movement-words.js';
import { bothSides, type PageSide, recordsShown } from './sides.js';
import { turnRow } from './turn-row.js';

/** A line and its interval are bent: so many places of it are reckoned. */
const linePlaces = 61;
/** Fewer make no curve: a soak alone stays at one current. */
const leastPoints = 3;

/** Currents at which a curve changes its course, and what is said of them. */
const turns = [
  ['limit-onset-current', 'limit begins'],
  ['unsteady-above-current', 'swings above'],
  ['dropout-current', 'drops out'],
] as const;

interface Turn {
  readonly words: string;
  readonly compared: Compared;
}

/**
 * V against I of both records: the points held, the line through them with its interval, where each turns, and by an
 * arrow what of that moved. Undefined where neither has a point.
 */
export function curvesFigure(records: ComparedRecords): Markup | undefined {
  const sides = bothSides(records);
  const sorts = sides.map(pointsOf);
  const seen = sides.map((side) => ({ ...side, seen: curveSeen(side.result.evidence) }));
  if (seen.every((side) => side.seen.held.length < leastPoints)) return undefined;
  const { sameModules } = records.comparison;
  const drawn = sides.filter((_, index) => (sorts[index]?.points.length ?? 0) > 0);
  const title = `Voltage over current, ${recordsShown(drawn)}`;
  const lines = seen.flatMap(lineOf);
  const found = turnsOf(records);
  const rows = found.map(({ words, compared }) => turnRow(words, compared, { sides, sameModules }));
  const [, furthest] = extremesOf([
    ...sorts.flatMap(({ points }) => points.map(({ x }) => x)),
    ...rows.flatMap(({ places }) => places.map(({ at }) => at)),
  ]);
  return figure(
    title,
    pointChart({
      id: 'curves',
      title,
      description: inWords(sorts, found),
      x: { label: 'Current', dimension: 'current', from: 0, to: furthest * 1.03 },
      y: { label: 'Voltage', dimension: 'voltage' },
      sorts,
      lines,
      turns: rows,
      names: 'at-ends',
    }),
    caption(records, lines, found),
  );
}

function pointsOf({ name, shape, look, result }: PageSide): PointSort {
  const points = [idleSort(result.evidence), ...heldSorts(result.evidence)].flatMap((sort) => sort.points);
  return {
    name: `held, ${name}`,
    shape,
    look,
    points: points.map(({ x, y, says }) => ({ x, y, says: () => `${name}: ${says()}` })),
  };
}

interface SeenSide extends PageSide {
  readonly seen: CurveSeen;
}

/**
 * The line of regulation, and where there is a knee the line beyond it; where there is none, as of a group through
 * ballasts, the held points joined.
 */
function lineOf({ name, look, seen }: SeenSide): readonly ChartLine[] {
  const { line, regulated, knee, beyondKnee, held } = seen;
  const last = knee?.breakpoint ?? regulated.at(-1)?.current;
  if (line === undefined || last === undefined) {
    if (held.length < leastPoints) return [];
    return [{ name, look, xs: held.map(({ current }) => current), ys: held.map(({ voltage }) => voltage) }];
  }
  const xs = Array.from({ length: linePlaces }, (_, index) => (last * index) / (linePlaces - 1));
  const there = xs.map((current) => lineAt(line, current));
  const beyond = beyondKnee.slice(1);
  const nothing = beyond.map(() => Number.NaN);
  return [
    {
      name,
      look,
      xs: [...xs, ...beyond.map(({ current }) => current)],
      ys: [...there.map(({ value }) => value), ...beyond.map(({ voltage }) => voltage)],
      band: {
        low: [...there.map(({ value, expanded }) => value - expanded), ...nothing],
        high: [...there.map(({ value, expanded }) => value + expanded), ...nothing],
      },
    },
  ];
}

function turnsOf({ comparison: { findings } }: ComparedRecords): readonly Turn[] {
  return turns.flatMap(([name, words]) => {
    const compared = findings.find(({ finding }) => finding === name);
    return compared === undefined ? [] : [{ words, compared }];
  });
}

function inWords(sorts: readonly PointSort[], found: readonly Turn[]): string {
  const counted = sorts.map(({ name, points }) => `${points.length} points ${name}`);
  const turned = found.map(({ words, compared: { before, after } }) =>
    [before, after]
      .map((each, index) =>
        each === undefined ? [] : [`${words} ${index === 0 ? 'earlier' : 'later'} at ${foundInWords(each)}`],
      )
      .flat()
      .join(', '),
  );
  return `${[...counted, ...turned].join('. ')}.`;
}

function caption(
  { comparison: { findings, sameModules } }: ComparedRecords,
  lines: readonly ChartLine[],
  found: readonly Turn[],
): string {
  const droop = findings.find(({ finding }) => finding === 'droop-resistance');
  const moved = found.filter(({ compared }) => hasMoved(compared)).map(({ compared }) => compared.finding);
  const said = [
    lines.some(({ band }) => band !== undefined) &&
      'Each line goes through the regulated points of its record; the shaded band holds the line with 95 %, by the ' +
        'scatter of its points.',
    lines.some(({ band }) => band === undefined) &&
      'Where no line could be laid through the points of a record they are joined.',
    droop !== undefined &&
      `${seenInWords('the droop', droop, sameModules)}: ${bothInWords(droop, sameModules)}.`,
    found.length > 0 && `Below: where the curves turn, with 95 %; ${arrowsInWords(moved, sameModules)}.`,
  ];
  return said.filter((each) => each !== false).join(' ');
}

function arrowsInWords(moved: readonly string[], sameModules: boolean): string {
  const verbs = verbsOf(sameModules);
  return moved.length === 0
    ? `nothing of it was seen to ${verbs.move}`
    : `an arrow marks what ${verbs.moved}: ${listed(moved)}`;
}
