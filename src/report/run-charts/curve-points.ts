import type { Evidence, PointEvidence, StepEvidence } from '../../analysis/evidence.js';
import { isHeld } from '../../analysis/curve.js';
import { taken } from '../../analysis/pooled-points.js';
import type { ChartPoint, PointSort } from '../chart/point-chart.js';
import { amps, stepInWords, volts } from './in-words.js';

type Phase = PointEvidence['phase'];

/** How the held points of a curve are told apart: by what they were taken for, which says how warm the module was. */
const sorts = {
  up: { name: 'on the way up', shape: 'circle', look: 0 },
  down: { name: 'on the way back', shape: 'triangle-down', look: 1 },
  search: { name: 'of a search', shape: 'diamond', look: 2 },
  soak: { name: 'of a soak', shape: 'square', look: 3 },
} as const;

type Sort = keyof typeof sorts;

const searching: readonly Phase[] = ['start', 'climb', 'halve', 'return', 'steadiness'];

function sortOf(phase: Phase): Sort {
  if (phase === 'down' || phase === 'soak') return phase;
  return searching.includes(phase) ? 'search' : 'up';
}

/** All points that were held, of a soak too; every one with its values and the step that it is of. */
export function heldSorts({ steps }: Evidence): readonly PointSort[] {
  const points: Record<Sort, ChartPoint[]> = { up: [], down: [], search: [], soak: [] };
  const counts: Record<Sort, number> = { up: 0, down: 0, search: 0, soak: 0 };
  for (const step of steps) {
    for (const point of step.points) {
      if (!isHeld(point)) continue;
      const sort = sortOf(point.phase);
      counts[sort] += point.looks;
      points[sort].push({
        x: point.current.mean,
        y: point.moduleVoltage.mean,
        says: () => `held ${valuesOf(point)}; ${origin(step, point)}`,
      });
    }
  }
  return (Object.keys(sorts) as Sort[]).map((sort) => ({
    ...sorts[sort],
    points: points[sort],
    all: counts[sort],
  }));
}

/** What a search held on its way to the limit. */
export function heldInSearch(evidence: Evidence): PointSort {
  const points = heldSorts(evidence).flatMap((sort) => (sort.name === sorts.search.name ? sort.points : []));
  return { ...sorts.search, name: 'held in the search', points };
}

/** Whether all that was loaded is a soak that held its one current: of that there is no curve to draw. */
export function isSoakAlone({ steps }: Evidence): boolean {
  const loaded = steps
    .flatMap(({ points }) => points)
    .filter((point) => isHeld(point) || point.outcome === 'dropped');
  const currents = new Set(loaded.map(({ set }) => set.current));
  return currents.size === 1 && loaded.every(({ phase, outcome }) => phase === 'soak' && outcome === 'held');
}

/** With the input off. */
export function idleSort({ steps }: Evidence): PointSort {
  const idle = steps
    .filter(({ kind }) => kind === 'open-circuit')
    .flatMap((step) =>
      step.points
        .filter(({ moduleVoltage }) => moduleVoltage.count > 0)
        .map((point) => ({ step, point, y: point.moduleVoltage.mean })),
    );
  return {
    name: 'open circuit',
    shape: 'plus',
    look: 5,
    points: idle.map(({ step, point, y }): ChartPoint => ({
      x: 0,
      y,
      says: () => `open circuit: ${volts(y)}; ${origin(step, point)}`,
    })),
    all: taken(idle.map(({ point }) => point)),
  };
}

/** Where the module dropped out, at the current that was set: what flowed then was not that of the curve. */
export function droppedPoints({ steps }: Evidence): readonly ChartPoint[] {
  return steps.flatMap((step) =>
    step.points.flatMap((point) => {
      const { outcome, phase, set, moduleVoltage } = point;
      if (outcome !== 'dropped' || phase === 'recovery' || set.current === undefined) return [];
      const y = moduleVoltage.count > 0 ? moduleVoltage.mean : Number.NEGATIVE_INFINITY;
      const x = set.current;
      const read = moduleVoltage.count > 0 ? valuesOf(point) : 'without a voltage';
      return [{ x, y, says: () => `dropped at ${amps(x)}: ${read}; ${origin(step, point)}` }];
    }),
  );
}

function valuesOf({ moduleVoltage, current }: PointEvidence): string {
  const flowed = current.count > 0 ? ` at ${amps(current.mean)}` : '';
  return `${volts(moduleVoltage.mean)}${flowed}`;
}

function origin(
  step: StepEvidence,
  { point, looks, moduleVoltage: { count, sampleDeviation } }: PointEvidence,
): string {
  const scatter =
    sampleDeviation === undefined || count < 2 ? '' : `, which scatter by ${volts(sampleDeviation)}`;
  const which = looks === 1 ? `point ${point}` : `${looks} points from ${point} on`;
  return `${stepInWords(step)}, ${which}; ${count === 1 ? '1 reading' : `${count} readings`}${scatter}`;
}
