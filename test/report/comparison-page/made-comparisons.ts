import { type Finding, inWords, measured } from '../../../src/analysis/finding.js';
import type { ToleranceEntry } from '../../../src/record/baseline.js';
import type { RunHeader } from '../../../src/record/run-header.js';
import type { ComparedRecords } from '../../../src/report/comparison.js';
import type { Result } from '../../../src/report/result.js';
import { evenly, headerOf, type Point, ramp, type Step } from '../../analysis/evidence-of.js';
import { recordsOf } from '../compared-records.js';
import { madeResult } from '../run-charts/made-results.js';

/** All that `unchanged` asks of one module and of a group, as far as these records have it. */
export const asked: readonly ToleranceEntry[] = [
  within('open-circuit-voltage', 0.005),
  within('droop-resistance', 0.2),
  within('load-regulation', 0.2),
  within('usable-current', 0.05),
  within('dropout-current', 0.05),
  { finding: 'limit-style', expected: { kind: 'same' } },
  { finding: 'share-of-*', expected: { kind: 'within', limit: { kind: 'absolute', value: 0.03 } } },
];

function within(finding: string, ratio: number): ToleranceEntry {
  return { finding, expected: { kind: 'within', limit: { kind: 'share', ratio } } };
}

const flicker = [0.0012, -0.0007, 0.0003, -0.0011, 0.0004];
const accuracy = { ofReading: 0.002, fixed: 0.01, resolution: 0.001 };

export const header: RunHeader = headerOf({
  meter: { voltage: { ofReading: 0.0005, fixed: 0.003, resolution: 0.001 } },
  load: { voltage: accuracy, current: accuracy },
});

/** K1 with such a droop and limit: idle, a ramp to its label, and the search that found where it drops out. */
export function moduleWith(
  { droop = 0.018, limit = 5.3 }: { readonly droop?: number; readonly limit?: number },
  of: RunHeader = header,
): Result {
  const voltage = (current: number): number => 15.21 - droop * current;
  const idle: Step = {
    kind: 'open-circuit',
    points: flicker.map((off) => ({
      phase: 'idle',
      outcome: 'measured',
      samples: flicker.map((more) => ({ meter: voltage(0) + off / 3 + more, current: 0 })),
    })),
  };
  const up: Step = {
    kind: 'load-ramp',
    points: evenly(0, 4, 21).map((set, index): Point => ({
      set,
      samples: flicker.map((off, sample) => ({
        meter: voltage(set) + off * (1 + ((index + sample) % 3)),
        load: voltage(set) - 0.035 * set,
        current: set,
      })),
    })),
  };
  const dropped = (set: number): Point => ({
    set,
    phase: 'halve',
    outcome: 'dropped',
    samples: [{ meter: 0.4, current: 0.1 }],
  });
  const search: Step = {
    kind: 'dropout-search',
    points: [
      ...ramp([limit - 0.2, limit - 0.01], voltage).map((point): Point => ({ ...point, phase: 'halve' })),
      dropped(limit + 0.2),
      dropped(limit),
    ],
  };
  return madeResult([idle, up, search], of);
}

export function compared(before: Result, after: Result, tolerance = asked): ComparedRecords {
  return recordsOf({ ...before, run: 'before' }, { ...after, run: 'after' }, tolerance);
}

/** The limit fell and the droop grew; nothing changed; four twins of a group, of which one weakened. */
export const limitMoved = compared(moduleWith({}), moduleWith({ droop: 0.024, limit: 4.5 }));
export const nothingMoved = compared(moduleWith({}), moduleWith({}));
export const fourTwins = compared(group([0.25, 0.25, 0.25, 0.25]), group([0.265, 0.265, 0.2, 0.27]));

function group(shares: readonly number[]): Result {
  const names = ['W1', 'W2', 'W3', 'W4'];
  const [module] = header.modules;
  const modules = names.map((name) => ({ ...(module as RunHeader['modules'][number]), name }));
  const shared = names.map((name, index) => percentage(`share-of-${name}`, shares[index] ?? 0));
  const findings = [...shared, inWords('limit-style', 'hiccup', { step: 1 })];
  return { ...moduleWith({}), findings, header: { ...header, modules, circuit: 'parallel' } };
}

function percentage(name: string, value: number): Finding {
  const budget = [{ name: 'all', kind: 'B', uncertainty: 0.0005, degreesOfFreedom: Infinity }] as const;
  return measured(name, 'ratio', value, budget, { step: 1 });
}
