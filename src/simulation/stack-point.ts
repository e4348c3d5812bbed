import type { LoadLaw } from '../circuit/load-law.js';
import { type ModuleCurve, knee } from '../circuit/module-curve.js';
import { type Link, type StringPoint, stringPoint } from '../circuit/series-string.js';
import type { ShockleyDiode } from '../circuit/shockley-diode.js';
import type { SimulatedModule } from '../files/simulation-section.js';
import { shortedSpans } from './earth-bonds.js';
import { BLEEDER } from './module-curve-of.js';
import type { ModulePoint, Part, RestingPoint } from './resting-point.js';

/** A silicon rectifier of some amperes: 0.65 V at 20 mA, 0.82 V at 4 A. */
export const REVERSE_DIODE: ShockleyDiode = {
  saturationCurrent: 1e-10,
  idealityFactor: 1.3,
  temperature: 300,
};

/** What two earth bonds are to the modules between them; milliohms of wire are nothing beside their limits. */
const shorted: LoadLaw = { kind: 'resistance', resistance: 0, leads: 0 };

/**
 * Where a stack comes to rest. Earth bonds at two 0 V rails short the modules between them into a loop of
 * their own, and leave the rest of the stack to feed the load.
 */
export function stackPoint(
  modules: readonly SimulatedModule[],
  parts: readonly Part[],
  law: LoadLaw,
): RestingPoint {
  const spans = shortedSpans(modules);
  if (spans.length === 0) return stringOf(modules, parts, law);
  const places = [...modules.keys()];
  const loops = spans.map(([from, to]) => places.slice(from, to));
  const main = places.filter((place) => !loops.some((loop) => loop.includes(place)));
  const found = new Map<number, ModulePoint>();
  const solve = (among: readonly number[], on: LoadLaw): RestingPoint => {
    const point = stringOf(
      modules.filter((_, place) => among.includes(place)),
      parts.filter((_, place) => among.includes(place)),
      on,
    );
    for (const [index, place] of among.entries()) found.set(place, point.modules[index] ?? idle);
    return point;
  };
  for (const loop of loops) solve(loop, shorted);
  const { voltage, current } = solve(main, law);
  return { voltage, current, modules: places.map((place) => found.get(place) ?? idle) };
}

const idle: ModulePoint = { voltage: 0, current: 0, through: 0 };

function stringOf(modules: readonly SimulatedModule[], parts: readonly Part[], law: LoadLaw): RestingPoint {
  const point = fallenString(modules, parts, law) ?? stringPoint(linksOf(modules, parts), law);
  return {
    voltage: point.voltage,
    current: point.current,
    modules: point.links.map(({ voltage, current }) => ({ voltage, current, through: point.current })),
  };
}

/**
 * Folding-back modules that have collapsed give no more than their short-circuit current until the string
 * asks for less. Undefined where there are none, or where they can rest nowhere but where all others can.
 */
function fallenString(
  modules: readonly SimulatedModule[],
  parts: readonly Part[],
  law: LoadLaw,
): StringPoint | undefined {
  const fallen = parts.map(fallenCurve);
  if (fallen.every((curve) => curve === undefined)) return undefined;
  const fallenParts = parts.map((part, place): Part => {
    const curve = fallen[place];
    return curve === undefined ? part : { kind: 'curve', curve, from: 'below' };
  });
  const point = stringPoint(linksOf(modules, fallenParts), law);
  const isOnItsFold = fallen.some((curve, place) => {
    const voltage = point.links[place]?.voltage ?? 0;
    return curve !== undefined && voltage > 0 && voltage < knee(curve).voltage;
  });
  return isOnItsFold ? onItsFold(modules, parts, law) : point;
}

/**
 * Where the load leaves a collapsed module some of its voltage, it rests on its fold. A load that sinks a
 * current and cannot be filled is a resistor there, and a resistor meets the string at one point only.
 */
function onItsFold(
  modules: readonly SimulatedModule[],
  parts: readonly Part[],
  law: LoadLaw,
): StringPoint | undefined {
  if (law.kind !== 'current') return undefined;
  const { current, leastVoltage, leads } = law;
  const unfilled: LoadLaw = { kind: 'resistance', resistance: leastVoltage / current, leads };
  const point = stringPoint(linksOf(modules, parts), unfilled);
  return point.current < current ? point : undefined;
}

function fallenCurve(part: Part): ModuleCurve | undefined {
  if (part.kind === 'nothing' || part.from === 'above' || part.curve.limit.style !== 'foldback') {
    return undefined;
  }
  return {
    ...part.curve,
    limit: { style: 'constant-current', current: part.curve.limit.shortCircuit },
  };
}

function linksOf(modules: readonly SimulatedModule[], parts: readonly Part[]): readonly Link[] {
  return modules.map(({ ballast, reverseDiode }, place): Link => {
    const part = parts[place];
    return {
      source:
        part?.kind === 'curve'
          ? { kind: 'module', curve: part.curve }
          : { kind: 'off', outputResistance: BLEEDER },
      resistance: ballast,
      ...(reverseDiode && { diode: REVERSE_DIODE }),
    };
  });
}
