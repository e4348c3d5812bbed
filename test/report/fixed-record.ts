import { analyse } from '../../src/analysis/analyse.js';
import { judge, overall } from '../../src/judgement/judge.js';
import type { Phase, TimedEvent } from '../../src/record/journal-event.js';
import type { RunHeader } from '../../src/record/run-header.js';
import type { Result } from '../../src/report/result.js';
import {
  collected,
  evenly,
  eventsOf,
  headerOf,
  type Point,
  type Sample,
  type Step,
} from '../analysis/evidence-of.js';

/** Readings that scatter by a millivolt, the same each time. */
const flicker = [0.0012, -0.0007, 0.0003, -0.0011, 0.0004];

function samplesAt(voltage: number, current: number, swing = 1): readonly Sample[] {
  return flicker.map((off, index) => ({
    meter: voltage + off * swing,
    load: voltage - 0.035 * current + (flicker[(index + 2) % flicker.length] ?? 0),
    current: current + (flicker[(index + 3) % flicker.length] ?? 0) / 2,
  }));
}

function held(set: number, phase: Phase = 'ramp'): Point {
  const swing = set > 5.1 ? 60 : 1;
  return {
    set,
    phase,
    samples: samplesAt(15.21 - 0.018 * set, set, swing),
  };
}

function dropped(set: number, phase: Phase = 'halve'): Point {
  return {
    set,
    phase,
    outcome: 'dropped',
    samples: [{ meter: 0.4, load: 0.2, current: 0.1 }],
  };
}

const hiccups: readonly Sample[] = Array.from({ length: 40 }, (_, at) =>
  at % 8 === 0 ? { meter: 8.1, load: 7.9, current: 5.2 } : { meter: 0.02, load: 0.01, current: 0 },
);

export const steps: readonly Step[] = [
  {
    kind: 'open-circuit',
    points: [0, 1, 2, 3, 4].map((at) => ({
      phase: 'idle',
      outcome: 'measured',
      samples: samplesAt(15.21 + (flicker[at] ?? 0) / 3, 0),
    })),
  },
  { kind: 'load-ramp', points: evenly(0, 4, 21).map((set) => held(set)) },
  {
    kind: 'dropout-search',
    points: [
      held(4, 'start'),
      held(4.4, 'climb'),
      held(4.8, 'climb'),
      held(5.2, 'climb'),
      dropped(5.6, 'climb'),
      { set: 5.6, phase: 'overload', outcome: 'measured', samples: hiccups },
      held(5.2, 'return'),
      dropped(5.4),
      held(5.2, 'return'),
      held(5.3, 'halve'),
      held(5, 'steadiness'),
      held(5.15, 'steadiness'),
    ],
    recoveries: [
      ['came-back', 0.42, 0.48],
      ['came-back', 0.2, 0.26],
    ],
  },
];

const accuracy = { ofReading: 0.002, fixed: 0.01, resolution: 0.001 };

export const header: RunHeader = headerOf({
  meter: { voltage: { ofReading: 0.0005, fixed: 0.003, resolution: 0.001 } },
  load: { voltage: { ...accuracy, ofReading: 0.001 }, current: accuracy },
  criteria: [
    {
      finding: 'usable-current',
      requirement: { kind: 'at-least', value: { kind: 'share', ratio: 1, of: 'rated-current' } },
    },
    {
      finding: 'droop-resistance',
      requirement: { kind: 'at-most', value: { kind: 'absolute', value: 0.018 } },
    },
    {
      finding: 'load-regulation',
      requirement: { kind: 'at-most', value: { kind: 'absolute', value: 0.0025 } },
    },
    { finding: 'limit-style', requirement: { kind: 'is', word: 'constant-current' } },
    { finding: 'temperature-rise', requirement: { kind: 'at-most', value: { kind: 'absolute', value: 40 } } },
  ],
});

/** A record of K1 as it would be understood, with the same readings and times whenever it is made. */
export function resultOf(events: readonly TimedEvent[] = eventsOf(steps), of: RunHeader = header): Result {
  const evidence = collected(events, of);
  const findings = analyse(evidence);
  const decisions = judge(of, findings);
  const lines = events.length;
  const whole = evidence.ended !== undefined;
  return {
    run: '20261201T083000Z-K1-real-limit',
    header: of,
    evidence,
    integrity: whole
      ? { kind: 'whole', lines, bytes: 0 }
      : { kind: 'cut-off', lines, bytes: 0, tornBytes: 0 },
    findings,
    decisions,
    outcome: overall(decisions),
    fingerprints: { header: '5e'.repeat(32), lastSeal: '7a'.repeat(32) },
  };
}
