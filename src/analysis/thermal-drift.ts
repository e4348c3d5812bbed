import { formatQuantity } from '../quantity/format-quantity.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { moduleVoltageErrors, promised } from './promised-errors.js';
import type { SoakSeen } from './soak-seen.js';
import { soundLine } from './sound-line.js';

const hour = 3600;
const fewestLooks = 4;

/**
 * `thermal-drift`: how fast the module's voltage still moved at the end of a soak, in V/h: a straight line
 * over the last window in which it was watched for settling (JCGM 100:2008, H.3). An offset of the voltage
 * drops out. The note tells what the whole soak moved it by.
 */
export function driftFindings(
  { header }: Evidence,
  { looks, over, step }: Pick<SoakSeen, 'looks' | 'over' | 'step'>,
): readonly Finding[] {
  const first = looks.at(0);
  const last = looks.at(-1);
  if (first === undefined || last === undefined) return [];
  const window = looks.filter(({ t }) => t >= last.t - over);
  const lately = window.length < fewestLooks ? looks : window;
  if (lately.length < fewestLooks) return [];
  const from = lately[0]?.t ?? 0;
  const fit = soundLine(
    lately.map(({ t }) => (t - from) / hour),
    lately.map(({ voltage }) => voltage),
  );
  if (fit === undefined) return [];
  const { instrument } = moduleVoltageErrors(header);
  const moved = last.voltage - first.voltage;
  const by = formatQuantity(Math.abs(moved), 'voltage', { significant: 2 });
  const whole = formatQuantity(last.t - first.t, 'time', { significant: 2 });
  return [
    measured(
      'thermal-drift',
      'voltage-rate',
      fit.slope,
      [
        {
          name: 'scatter about the line',
          kind: 'A',
          uncertainty: Math.max(fit.residualDeviation, instrument.resolution) / Math.sqrt(fit.spreadX),
          degreesOfFreedom: fit.degreesOfFreedom,
        },
        promised(`${instrument.of}, gain`, instrument.gain * fit.slope),
      ],
      {
        step,
        note:
          `over the last ${formatQuantity(last.t - from, 'time', { significant: 2 })}; ` +
          `in all it ${moved < 0 ? 'fell' : 'rose'} by ${by} in ${whole}`,
      },
    ),
  ];
}
