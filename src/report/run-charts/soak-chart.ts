import { temperatureLimit } from '../../analysis/derating.js';
import type { Evidence } from '../../analysis/evidence.js';
import { type Finding, findingNamed } from '../../analysis/finding.js';
import { degrees } from '../../analysis/in-words.js';
import { onTheWay, type SettledTemperature } from '../../analysis/settled-temperature.js';
import { ambientOfSoak, governingSoak } from '../../analysis/soak.js';
import type { SoakSeen } from '../../analysis/soak-seen.js';
import { driftLine } from '../../analysis/thermal-drift.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { Celsius, Seconds } from '../../quantity/quantity.js';
import type { ChartLine } from '../chart/drawn-line.js';
import { type ChartPoint, type Level, pointChart, type Whisker } from '../chart/point-chart.js';
import type { Markup } from '../page/markup.js';
import { together } from '../page/markup.js';
import type { Result } from '../result.js';
import { figure } from '../page/figure.js';
import { amps, foundInWords, volts } from './in-words.js';

/** Time constants after which less than a hundredth of the rise is left. */
const toSettle = 5;
/** A curve is drawn on to where it settles, but never so far that what was read becomes a corner of it. */
const furthest = 6;
const places = 81;
const whole = { height: 240, left: 66, right: 150 };
const small = { ...whole, height: 110 };

/**
 * The soak that the findings rest on: temperature over time and where it goes, and below it what the voltage did.
 * Undefined where none held its current.
 */
export function soakFigure({ evidence, findings }: Result): Markup | undefined {
  const seen = governingSoak(evidence);
  const start = seen?.looks[0]?.t;
  if (seen === undefined || start === undefined) return undefined;
  const end = endOf(seen, start);
  const title = `Soak at ${amps(seen.current)}`;
  return figure(
    title,
    together(
      seen.temperatures.length > 0 && temperatureChart(evidence, findings, seen, { start, end, title }),
      voltageChart(findings, seen, { start, end }),
    ),
    caption(evidence, findings, seen),
  );
}

interface Span {
  readonly start: Seconds;
  /** After the start. */
  readonly end: Seconds;
}

function endOf({ looks, settling }: SoakSeen, start: Seconds): Seconds {
  const watched = (looks.at(-1)?.t ?? start) - start;
  if (settling?.timeConstant === undefined) return watched;
  const settles = settling.way.from - start + toSettle * settling.timeConstant.value;
  return Math.max(watched, Math.min(settles, furthest * watched));
}

function temperatureChart(
  evidence: Evidence,
  findings: readonly Finding[],
  seen: SoakSeen,
  { start, end, title }: Span & { readonly title: string },
): Markup {
  const { settling, read } = seen;
  const points = read.temperatures.values.map(({ t: at, value }): ChartPoint => {
    const t = at - start;
    return {
      x: t,
      y: value,
      says: () => `${degrees(value)} after ${minutes(t)}; step ${seen.step}, soak`,
    };
  });
  return pointChart({
    id: 'soak',
    title,
    description: inWords(findings, seen),
    x: { label: 'Time under load', dimension: 'time', from: 0, to: end * 1.01 },
    y: { label: 'Temperature', dimension: 'temperature' },
    sorts: [{ name: 'read', shape: 'dot', look: 3, points, all: read.temperatures.all }],
    lines: settling === undefined ? [] : wayOf(settling, seen, { start, end }),
    levels: levelsOf(evidence, seen),
    whiskers: whiskersOf(evidence, findings, seen, end),
    size: whole,
  });
}

/** The fitted way as far as it was watched, and from there on as what it is: a prediction. */
function wayOf(
  settling: SettledTemperature,
  { times }: SoakSeen,
  { start, end }: Span,
): readonly ChartLine[] {
  const from = settling.way.from - start;
  const last = (times.at(-1) ?? start) - start;
  const between = (first: Seconds, to: Seconds): Pick<ChartLine, 'xs' | 'ys'> => {
    const xs = Array.from({ length: places }, (_, index) => first + ((to - first) * index) / (places - 1));
    return { xs, ys: xs.map((t) => onTheWay(settling, t + start)) };
  };
  const fitted = { name: 'fitted settling', ...between(from, last), look: 0 };
  return end > last ? [fitted, { name: 'predicted', ...between(last, end), look: 1 }] : [fitted];
}

/** Where it settles: the rise above the air, with its interval; by the curve alone where nobody knows the air. */
function whiskersOf(
  evidence: Evidence,
  findings: readonly Finding[],
  seen: SoakSeen,
  x: Seconds,
): readonly Whisker[] {
  const { settling } = seen;
  if (settling === undefined) return [];
  const air = ambientOfSoak(evidence, seen)?.temperature;
  const rise = findingNamed(findings, 'temperature-rise');
  const words = `where it settles, ${degrees(settling.settled)}`;
  if (air === undefined || rise === undefined || rise.interval === null) {
    const [low, high] = settling.interval;
    return [{ x, low, high, look: 1, says: words }];
  }
  const [low, high] = rise.interval;
  return [
    { x, low: air + low, high: air + high, look: 1, says: `${words}: a rise of ${foundInWords(rise)}` },
  ];
}

function levelsOf(evidence: Evidence, seen: SoakSeen): readonly Level[] {
  const ambient = ambientOfSoak(evidence, seen);
  const limit = temperatureLimit(evidence.header.derating, seen);
  const level = (name: string, at: Celsius | undefined): readonly Level[] =>
    at === undefined ? [] : [{ at, name: `${name} ${degrees(at)}` }];
  return [
    ...level(ambient?.from === 'start' ? 'before the load' : 'ambient', ambient?.temperature),
    ...level('limit', limit),
  ];
}

function voltageChart(findings: readonly Finding[], seen: SoakSeen, { start, end }: Span): Markup {
  const { looks, step, read } = seen;
  const line = driftLine(seen);
  const drift = findingNamed(findings, 'thermal-drift');
  const title = 'Voltage during the soak';
  const first = looks[0]?.voltage ?? NaN;
  const last = looks.at(-1)?.voltage ?? NaN;
  return pointChart({
    id: 'soak-voltage',
    title,
    description:
      `From ${volts(first)} to ${volts(last)}.` +
      (drift === undefined ? '' : ` At the end it drifts by ${foundInWords(drift)}.`),
    x: { label: 'Time under load', dimension: 'time', from: 0, to: end * 1.01 },
    y: { label: 'Voltage', dimension: 'voltage' },
    sorts: [
      {
        name: 'read',
        shape: 'dot',
        look: 3,
        points: read.voltages.values.map(({ t, value }) => ({
          x: t - start,
          y: value,
          says: () => `${volts(value)} after ${minutes(t - start)}; step ${step}, soak`,
        })),
        all: read.voltages.all,
      },
    ],
    lines:
      line === undefined
        ? []
        : [
            {
              name: 'drift at the end',
              xs: [line.from - start, line.to - start],
              ys: [line.fit.intercept, line.fit.intercept + (line.fit.slope * (line.to - line.from)) / hour],
              look: 0,
            },
          ],
    size: small,
  });
}

const hour = 3600;

function inWords(findings: readonly Finding[], { temperatures, settling, times, looks }: SoakSeen): string {
  const first = temperatures[0] ?? NaN;
  const last = temperatures.at(-1) ?? NaN;
  const watched = (times.at(-1) ?? 0) - (looks[0]?.t ?? 0);
  const rise = findingNamed(findings, 'temperature-rise');
  return [
    `From ${degrees(first)} to ${degrees(last)} in ${minutes(watched)}.`,
    ...(settling === undefined ? ['Where it goes is not told.'] : [settlesInWords(settling)]),
    ...(rise === undefined ? [] : [`Rise above the air: ${foundInWords(rise)}.`]),
  ].join(' ');
}

function settlesInWords({ settled, timeConstant }: SettledTemperature): string {
  return timeConstant === undefined
    ? `It has settled at ${degrees(settled)}.`
    : `It settles at ${degrees(settled)}, with a time constant of ${minutes(timeConstant.value)}.`;
}

function caption(
  { steps }: Evidence,
  findings: readonly Finding[],
  { settling, step, temperatures, each }: SoakSeen,
): string {
  const soaks = steps.filter(({ kind }) => kind === 'soak').length;
  const rise = findingNamed(findings, 'temperature-rise');
  return [
    ...(temperatures.length === 0 ? ['Nothing read the temperature.'] : []),
    ...(settling === undefined
      ? temperatures.length === 0
        ? []
        : ['Too little was watched to tell where the temperature goes.']
      : [settlesInWords(settling)]),
    ...(settling === undefined || rise === undefined
      ? []
      : [
          `The rise above the air is ${foundInWords(rise)}: the bar at the end, in which thermometer and air count as ` +
            'well as the scatter about the curve.',
        ]),
    ...(settling?.timeConstant === undefined ? [] : ['Dashed: predicted, not read.']),
    ...(each === 1
      ? []
      : [
          `The fit goes through means of ${each} looks that follow each other; of those before the last hour the lowest and ` +
            'the highest are drawn.',
        ]),
    ...(soaks > 1 ? [`Of ${soaks} soaks this is step ${step}, on which the findings rest.`] : []),
  ].join(' ');
}

function minutes(time: Seconds): string {
  return formatQuantity(time, 'time', { significant: 3 });
}
