import { heldPoints } from '../../analysis/curve.js';
import { dropoutBracket } from '../../analysis/dropout.js';
import type { PointEvidence } from '../../analysis/evidence.js';
import { findingNamed } from '../../analysis/finding.js';
import { ratedOf } from '../../analysis/rated.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { printable } from '../printable.js';
import type { Result } from '../result.js';
import { type Mark, plotted, type PlotPoint, type Size } from './plot.js';
import { shareBars } from './share-bars.js';

/** Fewer say no more than the table does. */
const leastCurve = 4;
const leastLooks = 5;
const soakHeight = 12;

/** The small charts of a record for a terminal, an empty line between them; empty where it holds too little. */
export function chartsAsText(result: Result, size: Size): string {
  return [curve(result, size), soak(result, { ...size, height: soakHeight }), shares(result, size)]
    .filter((lines) => lines.length > 0)
    .map((lines) => lines.join('\n'))
    .join('\n\n');
}

/** Voltage over current: what was held, what was not, and what the limit looks like where it is a curve. */
function curve(result: Result, size: Size): readonly string[] {
  const { evidence } = result;
  const held = heldPoints(evidence.steps);
  if (held.length < leastCurve) return [];
  const all = evidence.steps.flatMap(({ points }) => points);
  const dropped = all.filter(({ outcome, phase }) => outcome === 'dropped' && phase !== 'recovery');
  const notHeld: PlotPoint[] = dropped.flatMap(({ set, moduleVoltage }) =>
    set.current === undefined || moduleVoltage.count === 0
      ? []
      : [{ x: set.current, y: moduleVoltage.mean, sign: 'x' }],
  );
  const points: PlotPoint[] = [
    ...held.map(({ current, voltage }) => ({ x: current, y: voltage })),
    ...traced(result, all),
    ...notHeld,
  ];
  return plotted(
    {
      title: 'Voltage in V over current in A',
      points,
      marks: curveMarks(result),
      key: notHeld.length === 0 ? [] : ['x not held, at the current asked for'],
    },
    size,
  );
}

/** What a hiccuping or latched module reads is an average of on and off, and no point of a curve. */
function traced({ findings }: Result, points: readonly PointEvidence[]): readonly PlotPoint[] {
  const style = findingNamed(findings, 'limit-style')?.value;
  if (style === 'hiccup' || style === 'latch-off') return [];
  return points
    .filter(
      ({ phase, current, moduleVoltage }) => phase === 'trace' && current.count * moduleVoltage.count > 0,
    )
    .map(({ current, moduleVoltage }) => ({ x: current.mean, y: moduleVoltage.mean }));
}

function curveMarks({ header, findings, evidence }: Result): readonly Mark[] {
  const amps = (value: number): string => formatQuantity(value, 'current', { significant: 4 });
  const rated = ratedOf(header).current;
  const bracket = dropoutBracket(evidence);
  const recommended = findingNamed(findings, 'recommended-current')?.value;
  return [
    { letter: 'N', x: rated, says: `nameplate, ${formatQuantity(Number(rated.toPrecision(6)), 'current')}` },
    ...(typeof recommended === 'number' && recommended > 0
      ? [{ letter: 'R', x: recommended, says: `recommended, ${roundedDown(recommended, 'current')}` }]
      : []),
    ...(bracket === undefined
      ? []
      : [
          {
            letter: 'D',
            x: (bracket.held + bracket.dropped) / 2,
            says: `dropout, between ${amps(bracket.held)} and ${amps(bracket.dropped)}`,
          },
        ]),
  ];
}

/** How it warmed; where nothing felt that, how its voltage went. */
function soak({ evidence }: Result, size: Size): readonly string[] {
  const looks = evidence.steps.flatMap(({ points }) => points.filter(({ phase }) => phase === 'soak'));
  const warm = looks.filter(({ temperature }) => temperature.count > 0);
  const seen =
    warm.length >= leastLooks ? warm : looks.filter(({ moduleVoltage }) => moduleVoltage.count > 0);
  const [first] = seen;
  if (first === undefined || seen.length < leastLooks) return [];
  const isWarmth = seen === warm;
  const points = seen.map(({ t, temperature, moduleVoltage }) => ({
    x: (t - first.t) / 60,
    y: isWarmth ? temperature.mean : moduleVoltage.mean,
  }));
  const title = `${isWarmth ? 'Temperature in °C' : 'Voltage in V'} over time in min, while it soaked`;
  return plotted({ title, points, marks: [], key: [] }, size);
}

/** Who carries how much, at the highest load that was held. */
function shares({ findings }: Result, size: Size): readonly string[] {
  const bars = findings.flatMap(({ name, value }) => {
    const [, module] = /^share-of-(.+)$/.exec(name) ?? [];
    if (module === undefined || typeof value !== 'number') return [];
    return [{ name: printable(module), share: value, says: `${(value * 100).toFixed(1)} %` }];
  });
  return shareBars('Shares of the load, at the highest that was held', bars, size);
}
