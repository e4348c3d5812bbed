import { curveSeen } from '../../analysis/curve-seen.js';
import { lineVoltage } from '../../analysis/regulation.js';
import type { RegulationLine } from '../../analysis/regulation-line.js';
import { asGiven } from '../../analysis/in-words.js';
import { changeInWords } from '../../judgement/change-in-words.js';
import { formatUncertain } from '../../quantity/format-quantity.js';
import type { Amperes, Volts } from '../../quantity/quantity.js';
import { pointChart } from '../chart/point-chart.js';
import type { ComparedRecords } from '../comparison.js';
import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';
import { listed } from '../../quantity/listed.js';
import { amps } from '../run-charts/in-words.js';
import { hasMoved } from './compared-words.js';
import { figure } from '../page/figure.js';

const title = 'Later voltage less the earlier one, at the same current';
const places = 61;

/** A record's line, as far as it goes. */
interface SideLine {
  readonly of: Result;
  readonly line: RegulationLine;
  readonly last: Amperes;
}

interface Between {
  readonly value: Volts;
  /** 95 %, of all that stands behind both voltages. */
  readonly expanded: Volts;
}

/**
 * The later line of regulation less the earlier one, as far as both go: what would not be seen in fifteen volts. Its
 * slope is the change of the droop. Undefined where one record has no line.
 */
export function lineDifferenceFigure(records: ComparedRecords): Markup | undefined {
  const { before, after } = records;
  const [earlier, later] = [lineOf(before), lineOf(after)];
  if (earlier === undefined || later === undefined) return undefined;
  const last = Math.min(earlier.last, later.last);
  const at = (current: Amperes): Between => differenceAt(earlier, later, current);
  const xs = Array.from({ length: places }, (_, index) => (last * index) / (places - 1));
  const there = xs.map(at);
  const said = `${inWords(at(0))} without load, ${inWords(at(last))} at ${amps(last)}`;
  return figure(
    title,
    pointChart({
      id: 'line-difference',
      title,
      description: `${said}. Above nothing the later voltage is the higher one.`,
      x: { label: 'Current', dimension: 'current', from: 0, to: last },
      y: { label: 'Difference', dimension: 'voltage' },
      sorts: [],
      lines: [
        {
          name: 'later less earlier',
          look: 3,
          xs,
          ys: there.map(({ value }) => value),
          band: {
            low: there.map(({ value, expanded }) => value - expanded),
            high: there.map(({ value, expanded }) => value + expanded),
          },
        },
      ],
      levels: [{ at: 0, name: 'no difference' }],
      size: { height: 150, left: 0, right: 0 },
    }),
    [
      `${said}, each with 95 %, as the shaded band has it: where "no difference" lies within the band, the voltage was not found to differ.`,
      droopInWords(records),
      commonInWords([before, after]),
    ].join(' '),
  );
}

/** The slope with its own uncertainty: the band, which is that of the voltages, says little of it. */
function droopInWords({ comparison: { findings } }: ComparedRecords): string {
  const droop = findings.find(({ finding }) => finding === 'droop-resistance');
  const falls =
    'Its slope is the change of the droop: where the line falls, the later droop is the larger one.';
  if (droop?.difference === undefined) return falls;
  return `${falls} The droop differs by ${changeInWords(droop)}, ${hasMoved(droop) ? 'which is more' : 'which is not more'} than its uncertainty.`;
}

/** What the greater part of the band does to the whole of the line, by where the voltages were read. */
function commonInWords(results: readonly Result[]): string {
  const atLoad = [...results.entries()].filter(
    ([, { header }]) => header.bench.voltageFrom === 'load-terminals',
  );
  const instruments = 'What the instruments may be wrong by shifts the line as a whole and tilts it hardly.';
  if (atLoad.length === 0) return instruments;
  const leads = atLoad.map(([index, { header }]) => {
    const off = asGiven(header.bench.leads.uncertainty, 'resistance');
    return `± ${off} in the ${index === 0 ? 'earlier' : 'later'} record`;
  });
  return (
    `${instruments} Where the voltage was read at the load, what the leads lose was added by calculation: what their ` +
    `resistance may be wrong by (${listed(leads)}) tilts the line, so the band widens with the current.`
  );
}

function lineOf(of: Result): SideLine | undefined {
  const { line, regulated } = curveSeen(of.evidence);
  const last = regulated.at(-1)?.current;
  return line === undefined || last === undefined ? undefined : { of, line, last };
}

/** Both lines are taken as independent, as the findings are. */
function differenceAt(earlier: SideLine, later: SideLine, current: Amperes): Between {
  const [then, now] = [earlier, later].map(({ of, line }) => lineVoltage(of.evidence, line, current)) as [
    Between,
    Between,
  ];
  return { value: now.value - then.value, expanded: Math.hypot(then.expanded, now.expanded) };
}

function inWords({ value, expanded }: Between): string {
  const text = formatUncertain(value, expanded, 'voltage');
  return `${value > 0 ? '+' : ''}${text.value} ± ${text.uncertainty} ${text.unit}`;
}
