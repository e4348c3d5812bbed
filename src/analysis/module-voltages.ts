import type { Amperes, Ohms, Volts } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { mean } from '../statistics/checked.js';
import type { UncertainPart } from '../statistics/effective-freedom.js';
import { type Contribution, rectangular } from '../statistics/uncertainty-budget.js';
import { stepsOf } from './curve.js';
import type { Evidence, PointEvidence } from './evidence.js';
import { meterOf } from './module-currents.js';
import { believedStep, type PlaceLook, placeLooks } from './place-looks.js';
import { promised, promisedErrors } from './promised-errors.js';
import { scatterOf, scatterOfMean, together } from './scatter.js';

/** One stacked module at one look. */
export interface ModuleVoltage {
  readonly module: string;
  /** In the string, the lowest is 1. */
  readonly place: number;
  readonly volts: Volts;
  /** In series with it; 0 where the bench file names none. */
  readonly series: { readonly resistance: Ohms; readonly uncertainty: Ohms };
  readonly scatter: UncertainPart;
}

/** A look at a stack, with the voltage of each place that was read. */
export interface StackLook extends PlaceLook {
  readonly modules: readonly ModuleVoltage[];
  /** The string's current; 0 with the load's input off. */
  readonly current: Amperes;
  /** At the output of the whole, over all passes. */
  readonly output: Volts;
  readonly outputScatter: UncertainPart;
  readonly outputBy: PointEvidence['voltageBy'];
  /** What the output moved by between the passes, as a standard uncertainty. */
  readonly drift: Volts;
}

/** All looks of a stack at its places in a record, in order; none where the circuit is no stack. */
export function stackLooks(evidence: Evidence): readonly StackLook[] {
  const { header } = evidence;
  if (header.circuit !== 'series') return [];
  return stepsOf(evidence, 'stack-check').flatMap((step) =>
    placeLooks(header, believedStep(evidence, step))
      .filter(({ points }) => points.every(({ moduleVoltage }) => moduleVoltage.count > 0))
      .map((look) => withVoltages(header, look)),
  );
}

function withVoltages(header: RunHeader, look: PlaceLook): StackLook {
  const outputs = look.points.map(({ moduleVoltage }) => moduleVoltage);
  const means = outputs.map((moments) => moments.mean);
  const currents = look.points.flatMap(({ current }) => (current.count > 0 ? [current.mean] : []));
  return {
    ...look,
    current: look.set === undefined || currents.length === 0 ? 0 : mean(currents),
    output: mean(means),
    outputScatter: scatterOfMean(outputs),
    outputBy: look.points.some(({ voltageBy }) => voltageBy === 'load') ? 'load' : 'meter',
    drift: rectangular((Math.max(...means) - Math.min(...means)) / 2),
    modules: header.modules.flatMap(({ name }, index) => {
      const read = look.places.get(name);
      if (read === undefined) return [];
      return [
        {
          module: name,
          place: index + 1,
          volts: read.volts.mean,
          series: header.bench.places?.[index]?.ballast ?? { resistance: 0, uncertainty: 0 },
          scatter: scatterOf(read.volts),
        },
      ];
    }),
  };
}

/** What a stack gives up to a place: Σ (V − I·R) of the modules up to it. */
export function sumUpTo({ modules, current }: StackLook, place: number): Volts {
  return modules
    .filter((each) => each.place <= place)
    .reduce((sum, { volts, series }) => sum + volts - current * series.resistance, 0);
}

/**
 * The budget of Σ (V − I·R) over the places up to one, from the lowest unless another is named, less the output
 * where that is wanted. What one meter does to several places is added up before it is squared: its gain scales
 * the whole sum, its offset counts once for each place, and both come off again with the output where it is read by
 * the same meter.
 */
export function sumBudget(
  header: RunHeader,
  look: StackLook,
  {
    from = 1,
    upTo,
    lessOutput,
  }: { readonly from?: number; readonly upTo: number; readonly lessOutput: boolean },
): readonly Contribution[] {
  const summed = look.modules.filter(({ place }) => place >= from && place <= upTo);
  const reads = [
    ...summed.map(({ place, volts }) => ({ by: meterOf(header, place), volts, sign: 1 })),
    ...(lessOutput ? [outputRead(header, look)] : []),
  ];
  const posts = [...new Set(reads.map(({ by }) => by))];
  const leads = header.bench.leads.uncertainty;
  return [
    {
      name: 'scatter of the readings',
      kind: 'A',
      ...together([...summed.map(({ scatter }) => scatter), ...(lessOutput ? [look.outputScatter] : [])]),
    },
    ...posts.flatMap((post) => {
      const errors = promisedErrors(header, post, 'voltage');
      const its = reads.filter(({ by }) => by === post);
      const signed = its.reduce((sum, { sign }) => sum + sign, 0);
      const volts = its.reduce((sum, each) => sum + each.sign * each.volts, 0);
      return [
        promised(`${errors.of}, gain`, errors.gain * volts),
        promised(`${errors.of}, offset`, errors.offset * signed),
        promised(`${errors.of}, resolution`, errors.resolution * Math.sqrt(its.length)),
      ];
    }),
    promised(
      'resistors in series',
      look.current * Math.hypot(...summed.map(({ series }) => rectangular(series.uncertainty))),
    ),
    ...(lessOutput && look.outputBy === 'load'
      ? [promised('resistance of the leads', rectangular(leads) * look.current)]
      : []),
    ...(look.drift === 0
      ? []
      : [promised('drift between the passes', look.drift * Math.sqrt(upTo - from + 1))]),
  ];
}

function outputRead(header: RunHeader, { output, outputBy, current }: StackLook) {
  const volts = outputBy === 'load' ? output - current * header.bench.leads.resistance : output;
  return { by: outputBy, volts, sign: -1 };
}
