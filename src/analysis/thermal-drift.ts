import { formatQuantity } from '../quantity/format-quantity.js';
import type { Seconds, Volts } from '../quantity/quantity.js';
import type { LineFit } from '../statistics/line-fit.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { moduleVoltageErrors, promised } from './promised-errors.js';
import type { SoakSeen } from './soak-seen.js';
import { soundLine } from './sound-line.js';

const hour: Seconds = 3600;
const fewestLooks = 4;

/** A soak's voltage at its end, as a straight line over hours from the first look that went into it. */
export interface DriftLine {
  readonly fit: LineFit;
  readonly from: Seconds;
  readonly to: Seconds;
}

/** Over the last window; over all where that holds too few looks. Undefined where all are too few, or at one time. */
export function driftLine({ looks, over }: Pick<SoakSeen, 'looks' | 'over'>): DriftLine | undefined {
  const to = looks.at(-1)?.t ?? 0;
  const window = looks.filter(({ t }) => t >= to - over);
  const lately = window.length < fewestLooks ? looks : window;
  if (lately.length < fewestLooks) return undefined;
  const from = lately[0]?.t ?? 0;
  const fit = soundLine(
    lately.map(({ t }) => (t - from) / hour),
    lately.map(({ voltage }) => voltage),
  );
  return fit === undefined ? undefined : { fit, from, to };
}

/**
 * `thermal-drift`: how fast the module's voltage still moved at the end of a soak, in V/h: a straight line
 * over the last window in which it was watched for settling (JCGM 100:2008, H.3). An offset of the voltage
 * drops out. The note tells what the whole soak moved it by.
 */
export function driftFindings(
  { header }: Evidence,
  seen: Pick<SoakSeen, 'looks' | 'over' | 'step'>,
): readonly Finding[] {
  const { looks, step } = seen;
  const first = looks.at(0);
  const last = looks.at(-1);
  if (first === undefined || last === undefined) return [];
  const line = driftLine(seen);
  if (line === undefined) return [];
  const { fit, from } = line;
  const { instrument } = moduleVoltageErrors(header);
  const moved = movedInWords(last.voltage - first.voltage, instrument.resolution);
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
          `in all it ${moved} in ${whole}`,
      },
    ),
  ];
}

/** What no voltmeter of a bench shows; where a driver does not say what its own shows least. */
const unreadable: Volts = 1e-9;

/** Of less than could be read no digit is told. */
function movedInWords(moved: Volts, resolution: Volts): string {
  if (Math.abs(moved) < Math.max(resolution, unreadable)) return 'did not move by what could be read';
  return `${moved < 0 ? 'fell' : 'rose'} by ${formatQuantity(Math.abs(moved), 'voltage', { significant: 2 })}`;
}
