import { type Ceilings, ceilingsOf, ceilingText, type RunLimits } from '../bench/ceilings.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import type { Bench, BenchDrivers } from '../files/bench.js';
import type { Module } from '../files/module.js';
import type { CautionName, Procedure, ProcedureLimits, ProcedureStep } from '../files/procedure.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { QuantityOrShare, Ratio, ReferenceName, Seconds } from '../quantity/quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import type { Known, StepKind } from '../steps/step-kind.js';
import type { UnderTest } from '../steps/under-test.js';
import { cautionsFor } from './cautions.js';
import { circuitProblems, needProblems, underTestOf } from './plan-circuit.js';
import { sourceProblems } from './plan-source.js';

/** A procedure that fits its module and its bench. */
export interface Plan {
  readonly procedure: Procedure;
  readonly bench: Bench;
  readonly underTest: UnderTest;
  readonly drivers: BenchDrivers;
  readonly ceilings: Ceilings;
  readonly steps: readonly PlanStep[];
  /** What must be acknowledged before anything is switched on. */
  readonly cautions: readonly CautionName[];
  readonly duration: Seconds;
  /** What refers to the nameplate. */
  readonly known: Known;
}

export interface PlanStep {
  readonly kind: StepKind;
  readonly parameters: unknown;
  readonly summary: string;
  readonly duration: Seconds;
}

/** What was asked for can't be done with this module on this bench. One line a problem. */
export class PlanError extends RailproofError {
  readonly code = 'PLAN';
  readonly exitCode = exitCodes.badFile;
  readonly problems: readonly string[];

  constructor(problems: readonly string[]) {
    super(problems.join('\n'), {
      advice:
        'nothing was switched on; mend the procedure, the bench or the module file, and look again with --dry-run',
    });
    this.problems = problems;
  }
}

/**
 * Without load a module gives a little more than its nameplate, so its power is reckoned with that much
 * more. Once its voltage is measured the load itself refuses what comes to too much.
 */
const aboveNameplate: Ratio = 0.03;

/**
 * Checks everything that can be known before an instrument is touched: that the modules are as many as the
 * circuit has places, that the bench can do and read what the steps need, that references are to something measured earlier, that what shall rise does, that currents and powers fit the
 * bench and the load, that the module fits the bench, and the source the module.
 * @throws PlanError with every problem found.
 */
export function makePlan(
  procedure: Procedure,
  modules: readonly [Module, ...Module[]],
  bench: Bench,
  drivers: BenchDrivers,
  stepKinds: readonly StepKind[],
): Plan {
  const underTest = underTestOf(procedure.circuit, modules);
  const { rated } = underTest;
  const known: Known = { 'rated-voltage': rated.voltage, 'rated-current': rated.current };
  const ceilings = ceilingsOf(bench, drivers, {
    ratedVoltage: rated.voltage,
    procedure: resolvedLimits(procedure.limits, known),
  });
  const problems: string[] = [
    ...circuitProblems(underTest, bench),
    ...sourceProblems(underTest, bench, drivers),
  ];
  if (rated.voltage > ceilings.voltage.value) {
    problems.push(
      `${underTest.name} is rated ${formatQuantity(rated.voltage, 'voltage')} and ` +
        `${ceilings.voltage.setBy} allows ${ceilingText(ceilings.voltage, 'voltage')}`,
    );
  }
  const measured = new Set<string>(Object.keys(known));
  const passes = bench.group?.measuredBy === 'operator' ? modules.length : 1;
  const reach = { modules: modules.length, passes };
  const steps = procedure.steps.map((step, index) => {
    const kind = stepKinds.find((one) => one.kind === step.kind);
    if (kind === undefined)
      throw new Error(`step kind ${step.kind} passed the procedure's schema and is not known`);
    const before = procedure.steps.slice(0, index).map((earlier) => earlier.kind);
    problems.push(
      ...orderProblems(step, kind, before),
      ...problemsOf(step, kind, measured, known, ceilings),
      ...needProblems(step, kind, underTest, bench, drivers),
    );
    for (const name of kind.measures) measured.add(name);
    const { parameters } = step;
    return {
      kind,
      parameters,
      summary: kind.describe(parameters),
      duration: kind.duration(parameters, reach),
    };
  });
  if (problems.length > 0) throw new PlanError(problems);
  const duration = steps.reduce((sum, step) => sum + step.duration, 0);
  const cautions = cautionsFor(procedure, underTest);
  return { procedure, bench, underTest, drivers, ceilings, steps, cautions, duration, known };
}

/** Shares of the nameplate become what they come to. */
function resolvedLimits(
  { voltage, current, ...absolute }: ProcedureLimits,
  known: Known,
): RunLimits['procedure'] & object {
  return {
    ...absolute,
    ...(voltage === undefined ? {} : { voltage: resolve(voltage, known) }),
    ...(current === undefined ? {} : { current: resolve(current, known) }),
  };
}

/** What a step rests on is done before it. */
function orderProblems(
  { place, kind: word }: ProcedureStep,
  { needs }: StepKind,
  before: readonly string[],
): string[] {
  return (needs.after ?? [])
    .filter((kind) => !before.includes(kind))
    .map((kind) => `${place}: ${word}: there is no ${kind} before it, and it needs one`);
}

function problemsOf(
  step: ProcedureStep,
  kind: StepKind,
  measured: ReadonlySet<string>,
  known: Known,
  ceilings: Ceilings,
): string[] {
  const problems: string[] = [];
  for (const [name, quantity] of Object.entries(kind.references(step.parameters))) {
    const where = `${step.place}: ${step.kind}.${name}`;
    const missing = notMeasured(quantity, measured);
    if (missing !== undefined) {
      problems.push(`${where}: refers to ${missing}, which no step before this one measures`);
    } else if (kind.currents.includes(name) && isKnown(quantity, known)) {
      problems.push(...beyond(where, quantity, known, ceilings));
    }
  }
  return [...problems, ...fallen(step, kind, known)];
}

/** What was asked for begins where it should end. */
function fallen(step: ProcedureStep, kind: StepKind, known: Known): string[] {
  const { rises } = kind;
  if (rises === undefined) return [];
  const quantities = kind.references(step.parameters);
  const from = quantities[rises.from];
  const to = quantities[rises.to];
  if (from === undefined || to === undefined || !isKnown(from, known) || !isKnown(to, known)) return [];
  const [first, last] = [resolve(from, known), resolve(to, known)];
  if (first < last || (first === last && rises.mayBeLevel)) return [];
  const than = first === last ? 'the same as' : 'above';
  const wanted = rises.mayBeLevel ? 'no higher' : 'lower';
  return [
    `${step.place}: ${step.kind}.${rises.from}: ${asked(from, known)} is ${than} ${rises.to}, ` +
      `${asked(to, known)}; it must be ${wanted}`,
  ];
}

/** What the file says in full; what a share comes to, to four digits. */
function asked(quantity: QuantityOrShare, known: Known): string {
  const amps = resolve(quantity, known);
  return formatQuantity(quantity.kind === 'absolute' ? amps : Number(amps.toPrecision(4)), 'current');
}

function notMeasured(quantity: QuantityOrShare, measured: ReadonlySet<string>): ReferenceName | undefined {
  return quantity.kind === 'share' && !measured.has(quantity.of) ? quantity.of : undefined;
}

function isKnown(quantity: QuantityOrShare, known: Known): boolean {
  return quantity.kind === 'absolute' || known[quantity.of] !== undefined;
}

function beyond(where: string, quantity: QuantityOrShare, known: Known, ceilings: Ceilings): string[] {
  const { current, power } = ceilings;
  const amps = resolve(quantity, known);
  const wanted = asked(quantity, known);
  if (amps < 0) return [`${where}: ${wanted} is below zero`];
  if (amps > current.value) {
    const allowed = ceilingText(current, 'current');
    return [`${where}: ${wanted} is more than ${current.setBy} allows (${allowed})`];
  }
  const rated = known['rated-voltage'] ?? 0;
  const watts = amps * rated * (1 + aboveNameplate);
  if (watts > power.value) {
    const taken = formatQuantity(watts, 'power', { significant: 4 });
    const allowed = ceilingText(power, 'power');
    return [
      `${where}: ${wanted} at ${formatQuantity(rated, 'voltage')} and ${formatQuantity(aboveNameplate, 'ratio')} ` +
        `is ${taken}, more than ${power.setBy} allows (${allowed})`,
    ];
  }
  return [];
}
