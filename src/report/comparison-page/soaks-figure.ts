import { degrees } from '../../analysis/in-words.js';
import { onTheWay } from '../../analysis/settled-temperature.js';
import { governingSoak } from '../../analysis/soak.js';
import type { SoakSeen } from '../../analysis/soak-seen.js';
import { capitalised } from '../../quantity/capitalised.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { Seconds } from '../../quantity/quantity.js';
import type { ChartLine } from '../chart/drawn-line.js';
import { type ChartPoint, pointChart } from '../chart/point-chart.js';
import { thinned } from '../chart/thinned.js';
import type { ComparedRecords } from '../comparison.js';
import type { Markup } from '../page/markup.js';
import { amps, foundInWords } from '../run-charts/in-words.js';
import { figure } from '../page/figure.js';
import { bothInWords, seenInWords } from './movement-words.js';
import { bothSides, type PageSide } from './sides.js';

const title = 'Temperature under load, both records';
const places = 81;
/** Some fifty points of each: more would hide the lines, and each other. */
const stretches = 25;

interface Soak extends PageSide {
  readonly seen: SoakSeen;
  readonly start: Seconds;
}

/** Temperatures over time from the beginning of each soak; undefined unless both were soaked and watched. */
export function soaksFigure(records: ComparedRecords): Markup | undefined {
  const soaks = bothSides(records).flatMap(soakOf);
  if (soaks.length < 2) return undefined;
  const rise = records.comparison.findings.find(({ finding }) => finding === 'temperature-rise');
  const { sameModules } = records.comparison;
  const each = soaks.map(inWords).join(' ');
  return figure(
    title,
    pointChart({
      id: 'soaks',
      title,
      description:
        each +
        (rise?.before === undefined ? '' : ` Rise earlier: ${foundInWords(rise.before)}.`) +
        (rise?.after === undefined ? '' : ` Rise later: ${foundInWords(rise.after)}.`),
      x: { label: 'Time under load', dimension: 'time', from: 0 },
      y: { label: 'Temperature', dimension: 'temperature' },
      sorts: soaks.map((soak) => ({
        name: `read, ${soak.name}, at ${amps(soak.seen.current)}`,
        shape: soak.look === 0 ? 'dot' : 'plus',
        look: soak.look,
        points: thinned(pointsOf(soak), stretches),
      })),
      lines: soaks.flatMap(wayOf),
      names: 'at-ends',
    }),
    each,
    rise === undefined
      ? ''
      : ` ${seenInWords('the rise above the air', rise, sameModules)}: ${bothInWords(rise, sameModules)}.`,
  );
}

function soakOf(side: PageSide): readonly Soak[] {
  const seen = governingSoak(side.result.evidence);
  const start = seen?.looks[0]?.t;
  return seen === undefined || start === undefined || seen.temperatures.length === 0
    ? []
    : [{ ...side, seen, start }];
}

function pointsOf({ seen, start, name }: Soak): readonly ChartPoint[] {
  return seen.temperatures.map((temperature, index) => {
    const t = (seen.times[index] ?? start) - start;
    return { x: t, y: temperature, says: () => `${name}: ${degrees(temperature)} after ${minutes(t)}` };
  });
}

/** The fitted way as far as it was watched. */
function wayOf({ seen: { settling, times }, start, name, look }: Soak): readonly ChartLine[] {
  const last = times.at(-1);
  if (settling === undefined || last === undefined) return [];
  const from = settling.way.from;
  const xs = Array.from({ length: places }, (_, index) => from + ((last - from) * index) / (places - 1));
  return [{ name, look, xs: xs.map((t) => t - start), ys: xs.map((t) => onTheWay(settling, t)) }];
}

function inWords({ name, seen, start }: Soak): string {
  const { temperatures, times, current } = seen;
  const [first, last] = [temperatures[0] ?? Number.NaN, temperatures.at(-1) ?? Number.NaN];
  const watched = (times.at(-1) ?? start) - start;
  return `${capitalised(name)}: from ${degrees(first)} to ${degrees(last)} in ${minutes(watched)} at ${amps(current)}.`;
}

function minutes(time: Seconds): string {
  return formatQuantity(time, 'time', { significant: 3 });
}
