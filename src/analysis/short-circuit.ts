import { predictLine } from '../statistics/line-fit.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { volts } from './in-words.js';
import type { LimitTrace } from './limit-trace.js';
import { moduleVoltageErrors, promised, promisedErrors } from './promised-errors.js';
import { lineOverCurrent } from './sound-line.js';

/** The line goes through the lowest third of the points past the limit, four at least. */
const lowestPart = 1 / 3;
const fewest = 4;

/**
 * `short-circuit-current`: what the module gives into 0 V at its output. A load needs a volt or so, so the
 * lowest points are extended to 0 V by a straight line, with the uncertainty of the line there
 * (JCGM 100:2008, H.3.4). Only for a limit that holds, constant current or foldback: what pulses or
 * switches itself off has no current of its own into a short.
 *
 * An offset of the voltage moves the points along the line; a gain of it turns the line about 0 V and drops
 * out.
 */
export function shortCircuitFindings(
  { header }: Evidence,
  trace: LimitTrace | undefined,
): readonly Finding[] {
  if (trace === undefined || (trace.style !== 'constant-current' && trace.style !== 'foldback')) return [];
  const { limited, step } = trace;
  const lowest = limited.slice(-Math.max(fewest, Math.ceil(limited.length * lowestPart)));
  const fit = lineOverCurrent(
    lowest.map(({ voltage }) => voltage),
    lowest.map(({ current }) => current),
  );
  if (fit === undefined) return [];
  const current = promisedErrors(header, 'load', 'current');
  const { instrument: voltage, leads } = moduleVoltageErrors(header);
  const scatter = Math.max(fit.residualDeviation, current.resolution);
  const { value } = predictLine(fit, 0);
  const [high, low] = [lowest.at(0), lowest.at(-1)].map((point) => volts(point?.voltage ?? 0));
  return [
    measured(
      'short-circuit-current',
      'current',
      value,
      [
        {
          name: 'scatter about the line, at 0 V',
          kind: 'A',
          uncertainty: scatter * Math.sqrt(1 / fit.points + fit.meanX ** 2 / fit.spreadX),
          degreesOfFreedom: fit.degreesOfFreedom,
        },
        promised(`${current.of}, gain`, current.gain * value),
        promised(`${current.of}, offset`, current.offset),
        promised(`${voltage.of}, offset`, voltage.offset * fit.slope),
        ...(leads === 0 ? [] : [promised('resistance of the leads', leads * value * fit.slope)]),
      ],
      {
        step,
        note: `by a line through the ${fit.points} lowest points, ${String(high)} to ${String(low)}, extended to 0 V`,
      },
    ),
  ];
}
