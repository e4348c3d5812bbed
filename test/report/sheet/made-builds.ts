import type { Band, Concern, Estimate } from '../../../src/arrangement/build.js';
import { buildSeries } from '../../../src/arrangement/build-series.js';
import type { ParallelBuild } from '../../../src/arrangement/parallel-build.js';
import type { Selection } from '../../../src/arrangement/selection.js';
import type { SeriesBuild } from '../../../src/arrangement/series-build.js';
import { madeProfile } from '../../arrangement/made-profile.js';
export { madeStages } from './made-stages.js';

/** A number with limits a given share away from it. */
export function about(value: number, share = 0.02): Estimate {
  return { value, low: value * (1 - share), high: value * (1 + share) };
}

export const concern: Concern = {
  kind: 'not-warmed',
  module: 'K2',
  run: '20261130T091500Z-K2-real-limit',
  weight: 'weakens',
  text: 'measured cold: run thermal-soak, since its limit may fall when it is warm',
};

const openVoltages = [15.21, 15.16, 15.24, 15.19, 15.23, 15.18, 15.2, 15.17];
const branch = 0.018 + 0.051;

/** Modules side by side through 51 mΩ each, their shares by Ohm's law; it may be built unless a test says otherwise. */
export function madeParallel(
  changed: Partial<ParallelBuild> = {},
  names: readonly string[] = ['K1', 'K2', 'K3'],
): ParallelBuild {
  const sources = names.map((_, index) => openVoltages[index % openVoltages.length] ?? 15.2);
  const mean = sources.reduce((sum, each) => sum + each, 0) / sources.length;
  const most = 4.9 * names.length;
  const loads = Array.from({ length: 200 }, (_, index) => (most * (index + 1)) / 200);
  const current = (load: number, source: number): number =>
    Math.max(0, load / sources.length + (source - mean) / branch);
  const band = (line: (load: number) => number, half: (load: number) => number): Band => ({
    best: loads.map(line),
    low: loads.map((load) => line(load) - half(load)),
    high: loads.map((load) => line(load) + half(load)),
  });
  const load = 4 * names.length * 0.8;
  const currents = sources.map((source) => about(current(load, source), 0.04));
  return {
    kind: 'parallel',
    wish: { ballast: { kind: 'for-imbalance', most: 0.4 }, tolerance: 0.05, load: undefined },
    modules: names.map((name, index) => madeProfile(name, { openCircuit: sources[index] ?? 15.2 })),
    standing: { kind: 'may-be-built' },
    concerns: [concern],
    load: { current: load, from: 'recommended' },
    ballast: {
      kind: 'resistor',
      resistance: 0.051,
      tolerance: 0.05,
      dissipation: 0.82,
      dissipationAtLimit: 1.4,
      rating: 3,
      voltageCost: 0.204,
    },
    sharing: {
      loads,
      busVoltage: band(
        (at) => mean - (at * branch) / names.length,
        (at) => 0.006 + 0.002 * at,
      ),
      currents: sources.map((source) =>
        band(
          (at) => current(at, source),
          (at) => 0.05 + 0.012 * at,
        ),
      ),
    },
    atLoad: {
      busVoltage: about(mean - (load * branch) / names.length, 0.002),
      currents,
      shares: currents.map(({ value }) => about(value / load, 0.04)),
      imbalance: { value: 0.24, low: 0.2, high: 0.38 },
    },
    firstToSaturate: {
      module: names.at(-1) ?? '',
      load: about(most * 0.92),
      probability: 0.97,
      then: 'it shuts down, the rest cannot carry the load alone, and the group fails',
    },
    usable: about(most * 0.92),
    recommended: { current: load, setBy: `${names.at(-1) ?? ''} at its recommended 4 A sets it` },
    sumOfSingles: { usable: 5.1 * names.length, recommended: 4 * names.length },
    withoutBallast: {
      load,
      imbalance: about(1.4, 0.1),
      hog: names.at(-1),
      failsAt: 6.1,
      story: ['K3 takes nearly all of the load until it reaches its limit at 5.1 A and shuts down'],
    },
    failures: names.map((module, index) => ({
      module,
      recommended: load * 0.66,
      usable: most * 0.6,
      rest: (['carries-it', 'overloaded', 'fails'] as const)[index % 3] ?? 'fails',
      sentences: [
        'switched off, it takes no current from the bus, and the rest carry its part',
        'with its output shorted the bus goes down with it, unless a diode stands in series with each output',
      ],
    })),
    circuit: {
      form: { kind: 'group', of: names.map((name) => ({ kind: 'module', name })) },
      ballast: { resistance: 0.051, tolerance: 0.05 },
      reverseDiodes: false,
      orDiodes: false,
    },
    parts: [
      {
        marks: names.map((_, index) => `R${index + 1}`),
        what: '51 mΩ resistor, wire-wound, ± 5 %',
        ratings: ['at least 3 W', '15 A for a moment'],
        why: 'makes the modules share; each turns 0.82 W into heat at most',
      },
    ],
    cautions: [
      'the mains side of each module stays closed, earthed and fused as its maker made it',
      'the resistors get hot: keep them clear of leads and plastics',
    ],
    ...changed,
  };
}

/** As it is worked out, with what a test changes. */
export function madeSeries(
  changed: Partial<SeriesBuild> = {},
  names: readonly string[] = ['K1', 'K2', 'K3'],
): SeriesBuild {
  const profiles = names.map((name, index) =>
    madeProfile(name, { openCircuit: openVoltages[index] ?? 15.2 }),
  );
  return { ...buildSeries(profiles, { load: undefined }), ...changed };
}

/** Two supplies, each two groups of two one upon the other. */
export function madeSelection(changed: Partial<Selection> = {}): Selection {
  const names = ['K1', 'K2', 'K3', 'K4', 'K5', 'K6', 'K7', 'K8', 'K9'];
  const supply = (modules: readonly string[], recommended: number, imbalance: number) => ({
    groups: [
      { modules: modules.slice(0, 2), recommended, imbalance },
      { modules: modules.slice(2), recommended: recommended + 0.2, imbalance: imbalance / 2 },
    ],
    recommended,
  });
  return {
    kind: 'selection',
    wish: {
      group: 2,
      stack: 2,
      supplies: 2,
      ballast: { kind: 'given', resistance: 0.051 },
      tolerance: 0.05,
    },
    modules: names.map((name) => madeProfile(name)),
    leftOut: [{ module: 'K9', why: 'its output is bonded to earth, and it would be shorted in a stack' }],
    standing: { kind: 'may-be-built' },
    concerns: [],
    best: {
      supplies: [supply(['K1', 'K5', 'K2', 'K7'], 7.4, 0.06), supply(['K3', 'K8', 'K4', 'K6'], 7.2, 0.08)],
      recommended: 7.2,
      imbalance: 0.08,
      ballast: 0.051,
    },
    next: {
      supplies: [supply(['K1', 'K2', 'K5', 'K7'], 7.1, 0.07), supply(['K3', 'K4', 'K8', 'K6'], 7.0, 0.11)],
      recommended: 7,
      imbalance: 0.11,
      ballast: 0.051,
    },
    margin: {
      current: 0.2,
      imbalance: 0.03,
      told: false,
      sentence: 'the best is ahead of the next by 0.2 A, less than the records can tell apart',
    },
    considered: 315,
    unused: [],
    circuit: {
      form: {
        kind: 'stack',
        of: [
          { kind: 'group', of: ['K1', 'K5'].map((name) => ({ kind: 'module', name })) },
          { kind: 'group', of: ['K2', 'K7'].map((name) => ({ kind: 'module', name })) },
        ],
      },
      ballast: { resistance: 0.051, tolerance: 0.05 },
      reverseDiodes: true,
      orDiodes: false,
    },
    parts: [
      {
        marks: ['R1', 'R2', 'R3', 'R4'],
        what: '51 mΩ resistor',
        ratings: ['at least 3 W'],
        why: 'makes the modules of a group share',
      },
      {
        marks: ['D1', 'D2', 'D3', 'D4'],
        what: 'diode',
        ratings: ['at least 15 A', '40 V reverse'],
        why: 'carries the current of the rest when a module fails',
      },
    ],
    cautions: ['all outputs of a stack float but the lowest: no second earth anywhere'],
    ...changed,
  };
}
