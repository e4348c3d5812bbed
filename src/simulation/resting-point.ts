import type { LoadLaw } from '../circuit/load-law.js';
import type { ModuleCurve } from '../circuit/module-curve.js';
import { operatingPoints } from '../circuit/operating-point.js';
import { groupPoints } from '../circuit/parallel-group.js';
import type { SimulatedModule, Simulation } from '../files/simulation-section.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import { stackPoint } from './stack-point.js';

/** How the modules of a simulated bench are wired. */
export type SimulatedCircuit = Pick<Simulation, 'circuit' | 'modules'>;

/** What a module brings into the circuit: its curve, met from open circuit or from a collapsed output; or nothing. */
export type Part =
  | { readonly kind: 'curve'; readonly curve: ModuleCurve; readonly from: 'above' | 'below' }
  | { readonly kind: 'nothing' };

/** Where a circuit rests. */
export interface RestingPoint {
  /** At the output of the whole. */
  readonly voltage: Volts;
  /** Of the load. */
  readonly current: Amperes;
  /** In the order of the circuit. */
  readonly modules: readonly ModulePoint[];
}

export interface ModulePoint {
  /** At its own output. */
  readonly voltage: Volts;
  /** Through the module itself. */
  readonly current: Amperes;
  /** Through its series resistor; in a stack the diode's current is part of it. */
  readonly through: Amperes;
}

/**
 * Where the circuit comes to rest. Where more than one point is stable the past decides: the highest as long
 * as anything holds the output up, else the lowest.
 */
export function restingPoint(
  { circuit, modules }: SimulatedCircuit,
  parts: readonly Part[],
  law: LoadLaw,
): RestingPoint {
  switch (circuit) {
    case 'single':
      return alone(parts, law);
    case 'parallel':
      return inParallel(modules, parts, law);
    case 'series':
      return stackPoint(modules, parts, law);
  }
}

const nothing: RestingPoint = { voltage: 0, current: 0, modules: [{ voltage: 0, current: 0, through: 0 }] };

function alone(parts: readonly Part[], law: LoadLaw): RestingPoint {
  const [part] = parts;
  if (part === undefined || part.kind === 'nothing') return nothing;
  const point = operatingPoints(part.curve, law).at(part.from === 'above' ? 0 : -1);
  if (point === undefined) return nothing;
  const { voltage, current } = point;
  return { voltage, current, modules: [{ voltage, current, through: 0 }] };
}

function inParallel(modules: readonly SimulatedModule[], parts: readonly Part[], law: LoadLaw): RestingPoint {
  const branches = modules.map(({ ballast }, place) => {
    const part = parts[place];
    return {
      resistance: ballast,
      source:
        part?.kind === 'curve'
          ? ({ kind: 'module', curve: part.curve } as const)
          : ({ kind: 'off' } as const),
    };
  });
  const isHeldUp = parts.some((part) => part.kind === 'curve' && part.from === 'above');
  const point = groupPoints(branches, law).at(isHeldUp ? 0 : -1);
  if (point === undefined) return { ...nothing, modules: modules.flatMap(() => nothing.modules) };
  return {
    voltage: point.busVoltage,
    current: point.current,
    modules: point.branches.map(({ voltage, current }) => ({ voltage, current, through: current })),
  };
}
