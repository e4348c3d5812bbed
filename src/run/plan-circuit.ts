import { nameplateOf } from '../circuit/nameplate.js';
import { type Bench, type BenchDrivers } from '../files/bench.js';
import type { Module } from '../files/module.js';
import type { Circuit, ProcedureStep } from '../files/procedure.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';
import type { StepKind } from '../steps/step-kind.js';
import type { UnderTest } from '../steps/under-test.js';
import type { PlanStep } from './plan.js';

/** The limit of class ES1 for direct voltage, IEC 62368-1, table 4; from memory. */
const touchSafe: Volts = 60;

export function underTestOf(circuit: Circuit, modules: readonly [Module, ...Module[]]): UnderTest {
  const [first, ...others] = modules;
  return {
    circuit,
    modules,
    name: modules.map(({ name }) => name).join('+'),
    rated: nameplateOf(circuit, [first.rated, ...others.map(({ rated }) => rated)]),
  };
}

/** Whether the modules are as many as the procedure's circuit and the bench have places for. */
export function* circuitProblems({ circuit, modules }: UnderTest, bench: Bench): Generator<string> {
  const names = modules.map(({ name }) => name);
  const twice = names.find((name, index) => names.indexOf(name) < index);
  if (twice !== undefined) yield `${twice} was given twice; each module has a place of its own`;
  if (circuit === 'single' && modules.length > 1) {
    const others = names.slice(1).join(', ');
    yield `the procedure tests one module, ${String(names[0])}; ${others} ${modules.length === 2 ? 'was' : 'were'} given too`;
  }
  if (circuit !== 'single' && modules.length < 2) {
    yield `the procedure is for modules in ${circuit}; give --module for each of them, in the order of the circuit`;
  }
  const { group, simulation } = bench;
  const places = group?.places.length;
  if (circuit !== 'single' && modules.length > 1 && places !== undefined && places !== modules.length) {
    yield `${modules.length} modules were given and the bench's group has ${places} places`;
  }
  if (simulation !== undefined && simulation.circuit !== circuit) {
    const what = circuit === 'single' ? 'one module' : `modules in ${circuit}`;
    yield `the procedure is for ${what} and the bench simulates a ${simulation.circuit} circuit`;
  }
}

/** What a step needs of the circuit and of the bench, and does not find there. */
export function* needProblems(
  { place, kind: word, parameters }: ProcedureStep,
  kind: StepKind,
  underTest: UnderTest,
  bench: Bench,
  drivers: BenchDrivers,
): Generator<string> {
  const where = `${place}: ${word}`;
  const { needs } = kind;
  const { circuit } = underTest;
  if (needs.circuits !== undefined && !needs.circuits.includes(circuit)) {
    yield `${where}: is for ${needs.circuits.join(' and ')} circuits, and the procedure's is ${circuit}`;
  }
  if (needs.taps === true) yield* tapProblems(where, underTest, bench);
  if (kind.needsThermometer?.(parameters) === true && drivers.thermometer === undefined)
    yield `${where}: needs a thermometer, and the bench has none`;
  for (const role of ['load', 'meter'] as const) {
    const operations = needs.operations?.[role] ?? [];
    const readings = needs.readings?.[role] ?? [];
    if (operations.length === 0 && readings.length === 0) continue;
    const driver = drivers[role];
    if (driver === undefined) {
      yield `${where}: needs a ${role}, and the bench has none`;
      continue;
    }
    for (const operation of operations) {
      if (!Object.hasOwn(driver.operations, operation))
        yield `${where}: the driver ${driver.name} does not say how to do ${operation}`;
    }
    for (const reading of readings) {
      if (!Object.hasOwn(driver.readings, reading))
        yield `${where}: the driver ${driver.name} does not say how to read ${reading}`;
    }
  }
}

/** How the places of the circuit are told apart, and what their resistors are, must be known. */
function* tapProblems(
  where: string,
  { circuit, rated }: UnderTest,
  { group, instruments }: Bench,
): Generator<string> {
  if (group === undefined) {
    yield `${where}: the bench file has no 'group' section, which says how the modules are told apart`;
    return;
  }
  if (circuit === 'parallel') {
    for (const [index, { ballast }] of group.places.entries()) {
      if (ballast === undefined) {
        yield `${where}: place ${index + 1} of the bench's group has no ballast, from whose voltage its current is known`;
      }
    }
  }
  if (circuit === 'series' && group.measuredBy === 'operator' && rated.voltage > touchSafe) {
    yield `${where}: a stack of ${formatQuantity(rated.voltage, 'voltage')} is above the ${formatQuantity(touchSafe, 'voltage')} DC that are touch-safe, so nobody may move probes in it: use a scanner or a meter at each place`;
  }
  if (group.measuredBy === 'operator' && instruments.meter === undefined)
    yield `${where}: needs a meter, and the bench has none`;
}

/** Whether someone has to be there for the step, on this bench. */
export function needsOperator({ kind, parameters }: PlanStep, { group }: Bench): boolean {
  const { needs } = kind;
  if (needs.operator === 'always' || kind.asks?.(parameters) === true) return true;
  return needs.taps === true && group?.measuredBy === 'operator';
}
