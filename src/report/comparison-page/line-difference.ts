import { curveSeen } from '../../analysis/curve-seen.js';
import { lineAt, type RegulationLine } from '../../analysis/regulation-line.js';
import { formatUncertain } from '../../quantity/format-quantity.js';
import type { Amperes, Volts } from '../../quantity/quantity.js';
import { pointChart } from '../chart/point-chart.js';
import type { ComparedRecords } from '../comparison.js';
import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';
import { amps } from '../run-charts/in-words.js';
import { figure } from '../page/figure.js';

const title = 'Later voltage less the earlier one, at the same current';
const places = 61;

interface Between {
  readonly value: Volts;
  readonly expanded: Volts;
}

/**
 * The later line of regulation less the earlier one, as far as both go: what would not be seen in fifteen volts. Its
 * slope is the change of the droop. Undefined where one record has no line.
 */
export function lineDifferenceFigure({ before, after }: ComparedRecords): Markup | undefined {
  const [earlier, later] = [lineOf(before), lineOf(after)];
  if (earlier === undefined || later === undefined) return undefined;
  const last = Math.min(earlier.last, later.last);
  const at = (current: Amperes): Between => differenceAt(earlier.line, later.line, current);
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
    `${said}. Its slope is the change of the droop: where the line falls, the droop grew. The shaded band holds it with 95 %, by the scatter of the ` +
      'points of both; what the instruments may be wrong by comes on top, and moves all of it alike.',
  );
}

function lineOf({ evidence }: Result): { readonly line: RegulationLine; readonly last: Amperes } | undefined {
  const { line, regulated } = curveSeen(evidence);
  const last = regulated.at(-1)?.current;
  return line === undefined || last === undefined ? undefined : { line, last };
}

/** Both lines are taken as independent. */
function differenceAt(earlier: RegulationLine, later: RegulationLine, current: Amperes): Between {
  const [then, now] = [lineAt(earlier, current), lineAt(later, current)];
  return { value: now.value - then.value, expanded: Math.hypot(then.expanded, now.expanded) };
}

function inWords({ value, expanded }: Between): string {
  const text = formatUncertain(value, expanded, 'voltage');
  return `${value > 0 ? '+' : ''}${text.value} ± ${text.uncertainty} ${text.unit}`;
}
