import type { Amperes, Volts } from '../quantity/quantity.js';
import type { LineFit } from '../statistics/line-fit.js';
import { combine, type Contribution } from '../statistics/uncertainty-budget.js';
import { bothWaysNote } from './both-ways.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { moduleVoltageErrors, promised, promisedErrors } from './promised-errors.js';
import { ratedOf } from './rated.js';
import { lineAt, type RegulationLine } from './regulation-line.js';

/** The line may be stretched by this part beyond its last point to reach the rated current. */
const stretch = 1.05;

/**
 * `droop-resistance`, `load-regulation` and, where no open-circuit step was made, `open-circuit-voltage`:
 * a straight line V = V0 − R·I through the regulated points, with the residuals' uncertainties
 * (JCGM 100:2008, H.3) and the instruments' promises. A gain error scales the slope that was read, whether
 * it is the voltage's or the current's; an offset leaves it alone; both move V0. Where the voltage is read
 * at the load, the slope that was read is that of the module and the leads together. A ramp that went back
 * down gives the mean of both ways at each current.
 * @param points held, steady, below the onset of the limit; by rising current.
 * @param line `regulationLine` of these points.
 */
export function regulationFindings(
  evidence: Evidence,
  points: readonly CurvePoint[],
  line: RegulationLine | undefined,
  openCircuitKnown: boolean,
): readonly Finding[] {
  if (line === undefined) return [];
  const step = points[0]?.step ?? null;
  const droop = droopFinding(evidence, line, step);
  const reaches = (points.at(-1)?.current ?? 0) * stretch;
  return [
    ...(openCircuitKnown ? [] : [interceptFinding(evidence, line, step)]),
    droop,
    ...regulationFinding(evidence, droop, reaches),
  ];
}

function droopFinding(
  evidence: Evidence,
  { fit, ways, scatter }: RegulationLine,
  step: number | null,
): Finding {
  const { instrument: voltage, leads } = moduleVoltageErrors(evidence.header);
  const current = promisedErrors(evidence.header, 'load', 'current');
  const droop = -fit.slope;
  const slopeRead = readSlope(evidence, fit);
  return measured(
    'droop-resistance',
    'resistance',
    droop,
    [
      {
        name: 'scatter about the line',
        kind: 'A',
        uncertainty: scatter / Math.sqrt(fit.spreadX),
        degreesOfFreedom: fit.degreesOfFreedom,
      },
      promised(`${voltage.of}, gain`, voltage.gain * slopeRead),
      promised(`${current.of}, gain`, current.gain * slopeRead),
      ...(leads === 0 ? [] : [promised('resistance of the leads', leads)]),
    ],
    {
      step,
      note: `straight line through ${fit.points} points${bothWaysNote(ways)}${stillNote(fit, slopeRead)}`,
    },
  );
}

function interceptFinding(evidence: Evidence, line: RegulationLine, step: number | null): Finding {
  return measured(
    'open-circuit-voltage',
    'voltage',
    line.fit.intercept,
    lineVoltageBudget(evidence, line, 0),
    { step, note: 'by extending the line to no load' },
  );
}

/** The voltage that the line has at a current, ± all that stands behind it, 95 %. */
export function lineVoltage(
  evidence: Pick<Evidence, 'header'>,
  line: RegulationLine,
  at: Amperes,
): { readonly value: Volts; readonly expanded: Volts } {
  const { expanded } = combine(lineVoltageBudget(evidence, line, at));
  return { value: lineAt(line, at).value, expanded };
}

/**
 * The budget of the voltage that the line has at a current: the scatter of its points, what the instruments may be
 * wrong by, and, where what the leads lose was added by calculation, what their resistance may be wrong by.
 */
function lineVoltageBudget(
  evidence: Pick<Evidence, 'header'>,
  line: RegulationLine,
  at: Amperes,
): readonly Contribution[] {
  const { fit } = line;
  const { instrument: voltage, leads } = moduleVoltageErrors(evidence.header);
  const current = promisedErrors(evidence.header, 'load', 'current');
  const slopeRead = readSlope(evidence, fit);
  const scatter = {
    name: 'scatter about the line',
    kind: 'A',
    uncertainty: lineAt(line, at).uncertainty,
    degreesOfFreedom: fit.degreesOfFreedom,
  } as const;
  const always = [
    scatter,
    promised(`${voltage.of}, gain`, voltage.gain * (fit.intercept + slopeRead * at)),
    promised(`${voltage.of}, offset`, voltage.offset),
    promised(`${current.of}, offset`, current.offset * slopeRead),
  ];
  if (at === 0) return always;
  return [
    ...always,
    promised(`${current.of}, gain`, current.gain * slopeRead * at),
    ...(leads === 0 ? [] : [promised('resistance of the leads', leads * at)]),
  ];
}

/** IEC 61204: the fall of the voltage from no load to rated current, over the rated voltage. */
function regulationFinding(evidence: Evidence, droop: Finding, reaches: Amperes): readonly Finding[] {
  const rated = ratedOf(evidence.header);
  if (reaches < rated.current) return [];
  const perOhm = rated.current / rated.voltage;
  return [
    measured(
      'load-regulation',
      'ratio',
      (droop.value as number) * perOhm,
      droop.budget.map((line) => ({ ...line, uncertainty: line.uncertainty * perOhm })),
      { step: droop.step, note: 'from no load to rated current, of the rated voltage' },
    ),
  ];
}

/**
 * A module may regulate so well that a coarse meter shows no change at all; a meter that has stopped measuring
 * looks the same, and no guard can tell the two.
 */
function stillNote(fit: LineFit, slopeRead: number): string {
  const still = Math.abs(slopeRead) < 1e-12 && fit.residualDeviation < 1e-12;
  return still
    ? '; the voltage was the same to the last digit at every current: see that what read it is live'
    : '';
}

/** Of the voltage as the instrument read it, before what the leads lose was added by calculation; in Ω. */
function readSlope({ header: { bench } }: Pick<Evidence, 'header'>, fit: LineFit): number {
  return bench.voltageFrom === 'load-terminals' ? fit.slope - bench.leads.resistance : fit.slope;
}
