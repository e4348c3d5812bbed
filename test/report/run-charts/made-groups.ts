import { analyse } from '../../../src/analysis/analyse.js';
import type { RunHeader } from '../../../src/record/run-header.js';
import type { Result } from '../../../src/report/result.js';
import {
  type Brick,
  circuitEvidence,
  circuitHeader,
  type CircuitHeader,
  type CircuitPoint,
  sharingPoints,
} from '../../analysis/circuit-evidence.js';
import { resultOf } from '../fixed-record.js';

export const alike: Brick = { voltage: 15.21, droop: 0.018, ballast: 0.05 };

/** Instruments of ordinary promises, so that every share and voltage has an interval. */
export const ordinary = {
  meter: { voltage: { ofReading: 5e-4, fixed: 1e-4, resolution: 1e-5 } },
  load: {
    voltage: { ofReading: 1e-3, fixed: 0.01 },
    current: { ofReading: 2e-3, fixed: 0.01, resolution: 1e-3 },
  },
};

/** The record of one sharing-log or stack-check. */
export function circuitResult(header: RunHeader, points: readonly CircuitPoint[]): Result {
  const evidence = circuitEvidence(header, points);
  return {
    ...resultOf([], header),
    evidence,
    integrity: { kind: 'whole', lines: 0, bytes: 0 },
    findings: analyse(evidence),
  };
}

/** Bricks behind their ballasts, joined, at these loads. */
export function shared(
  bricks: Readonly<Record<string, Brick>>,
  loads: readonly number[],
  rest: Partial<CircuitHeader> = {},
): Result {
  const ballasts = Object.fromEntries(
    Object.entries(bricks).map(([name, { ballast }]) => [name, [ballast, ballast * 0.001] as const]),
  );
  const header = circuitHeader({ circuit: 'parallel', ballasts, ...ordinary, ...rest });
  return circuitResult(header, sharingPoints(bricks, loads));
}

/** Bricks upon each other; what a brick gives at a current where it is not its own line. */
export function stacked(
  bricks: Readonly<Record<string, Pick<Brick, 'voltage' | 'droop'>>>,
  points: readonly {
    readonly set: number;
    readonly outcome?: 'held' | 'dropped';
    readonly change?: Readonly<Record<string, number>>;
    /** What flowed; what was asked for where left out. */
    readonly current?: number;
  }[],
  rest: Partial<CircuitHeader> = {},
): Result {
  const names = Object.keys(bricks);
  const header = circuitHeader({
    circuit: 'series',
    ballasts: Object.fromEntries(names.map((name) => [name, [0, 0] as const])),
    ...ordinary,
    ...rest,
  });
  const stood = points.map(({ set, outcome = 'held', change = {}, current = set }): CircuitPoint => {
    const places = Object.fromEntries(
      Object.entries(bricks).map(([name, { voltage, droop }]) => [
        name,
        change[name] ?? voltage - droop * current,
      ]),
    );
    return {
      set,
      outcome,
      current,
      places,
      output: Object.values(places).reduce((all, each) => all + each, 0),
    };
  });
  return circuitResult(header, stood);
}

/** The first `count` of K1, K2, K3 …, each a little lower than the one before. */
export function drawer(count: number, ballast = 0.05): Readonly<Record<string, Brick>> {
  return Object.fromEntries(
    Array.from({ length: count }, (_, index) => [
      `K${index + 1}`,
      { voltage: 15.21 - 0.008 * index, droop: 0.018, ballast },
    ]),
  );
}
