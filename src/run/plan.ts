import { type Ceilings, ceilingsOf } from '../bench/ceilings.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import type { Bench } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import type { Module } from '../files/module.js';
import type { Procedure, ProcedureStep } from '../files/procedure.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { QuantityOrShare, ReferenceName, Seconds } from '../quantity/quantity.js';
import { resolve } from '../quantity/resolve-share.js';
import type { Known, StepKind } from '../steps/step-kind.js';

/** A procedure that fits its module and its bench. */
export interface Plan {
  readonly procedure: Procedure;
  readonly bench: Bench;
  readonly modules: readonly Module[];
  readonly module: Module;
  readonly drivers: PlanDrivers;
  readonly ceilings: Ceilings;
  readonly steps: readonly PlanStep[];
  readonly duration: Seconds;
  /** What refers to the nameplate. */
  readonly known: Known;
}

export interface PlanDrivers {
  readonly load: Driver;
  readonly meter?: Driver | undefined;
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
    super(problems.join('\n'), { advice: 'nothing was switched on' });
    this.problems = problems;
  }
}

/**
 * Checks everything that can be known before an instrument is touched: that references are to something
 * measured earlier, that currents and powers fit the bench and the load, that the module fits the bench.
 * @throws PlanError with every problem found.
 */
export function makePlan(
  procedure: Procedure,
  modules: readonly [Module, ...Module[]],
  bench: Bench,
  drivers: PlanDrivers,
  stepKinds: readonly StepKind[],
): Plan {
  const module = modules[0];
  const ceilings = ceilingsOf(bench, drivers);
  const known: Known = { 'rated-voltage': module.rated.voltage, 'rated-current': module.rated.current };
  const problems: string[] = [];
  if (module.rated.voltage > ceilings.voltage.value) {
    problems.push(
      `${module.name} is rated ${formatQuantity(module.rated.voltage, 'voltage')} and ` +
        `${ceilings.voltage.setBy} allows ${formatQuantity(ceilings.voltage.value, 'voltage')}`,
    );
  }
  const measured = new Set<string>(Object.keys(known));
  const steps = procedure.steps.map((step) => {
    const kind = stepKinds.find((one) => one.kind === step.kind);
    if (kind === undefined)
      throw new Error(`step kind ${step.kind} passed the procedure's schema and is not known`);
    problems.push(...problemsOf(step, kind, measured, known, ceilings));
    for (const name of kind.measures) measured.add(name);
    const { parameters } = step;
    return { kind, parameters, summary: kind.describe(parameters), duration: kind.duration(parameters) };
  });
  if (problems.length > 0) throw new PlanError(problems);
  const duration = steps.reduce((sum, step) => sum + step.duration, 0);
  return { procedure, bench, modules, module, drivers, ceilings, steps, duration, known };
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
      problems.push(...beyond(where, resolve(quantity, known), known['rated-voltage'] ?? 0, ceilings));
    }
  }
  return problems;
}

function notMeasured(quantity: QuantityOrShare, measured: ReadonlySet<string>): ReferenceName | undefined {
  return quantity.kind === 'share' && !measured.has(quantity.of) ? quantity.of : undefined;
}

function isKnown(quantity: QuantityOrShare, known: Known): boolean {
  return quantity.kind === 'absolute' || known[quantity.of] !== undefined;
}

function beyond(where: string, amps: number, volts: number, ceilings: Ceilings): string[] {
  const { current, power } = ceilings;
  if (amps < 0) return [`${where}: ${formatQuantity(amps, 'current')} is below zero`];
  if (amps > current.value) {
    const allowed = formatQuantity(current.value, 'current');
    return [`${where}: ${formatQuantity(amps, 'current')} is more than ${current.setBy} allows (${allowed})`];
  }
  if (amps * volts > power.value) {
    const wanted = formatQuantity(amps * volts, 'power');
    const allowed = formatQuantity(power.value, 'power');
    return [
      `${where}: ${formatQuantity(amps, 'current')} at ${formatQuantity(volts, 'voltage')} is ${wanted}, ` +
        `more than ${power.setBy} allows (${allowed})`,
    ];
  }
  return [];
}
