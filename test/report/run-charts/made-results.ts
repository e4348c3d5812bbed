import type { RunHeader } from '../../../src/record/run-header.js';
import type { TimedEvent } from '../../../src/record/journal-event.js';
import type { Result } from '../../../src/report/result.js';
import { evenly, eventsOf, headerOf, type Point, ramp, type Step } from '../../analysis/evidence-of.js';
import { soak, type SoakGiven, thermometerHeader } from '../../analysis/soak-events.js';
import { type Gives, traced } from '../../analysis/trace-events.js';
import { resultOf } from '../fixed-record.js';

/** With nothing but what is drawn uncertain. */
export function madeResult(steps: readonly Step[], header: RunHeader = headerOf()): Result {
  return resultOf(eventsOf(steps), header);
}

export const brick = (current: number): number => 15.21 - 0.018 * current;

export const idle: Step = {
  kind: 'open-circuit',
  points: [{ phase: 'idle', outcome: 'measured', samples: [{ meter: 15.21, current: 0 }] }],
};

/** Up and back, with a millivolt of difference between the ways, and scatter that is the same each time. */
export const upAndBack: Step = {
  kind: 'load-ramp',
  points: [...evenly(0, 4, 11), ...[...evenly(0, 4, 11)].reverse()].map((set, index): Point => {
    const back = index > 10;
    return {
      set,
      phase: back ? 'down' : 'ramp',
      samples: [0.0012, -0.0007, 0.0003, -0.0011, 0.0004].map((off, sample) => ({
        meter: brick(set) - (back ? 0.001 : 0) + off * (1 + ((index + sample) % 3)),
        current: set,
      })),
    };
  }),
};

/** A climb beyond a knee at 5 A, with three points on the way down and two that dropped. */
export const search: Step = {
  kind: 'dropout-search',
  points: [
    ...ramp([4, 4.4, 4.8], brick).map((point): Point => ({ ...point, phase: 'climb' })),
    { set: 5.6, phase: 'climb', outcome: 'dropped', samples: [{ meter: 0.4, current: 0.1 }] },
    ...ramp([5.2], brick).map((point): Point => ({ ...point, phase: 'halve' })),
    { set: 5.3, phase: 'halve', outcome: 'dropped', samples: [{ meter: 14.4, current: 5.3 }] },
  ],
};

/** Bends at 5 A, far enough to tell. */
export const bent: Step = {
  kind: 'load-ramp',
  points: ramp(evenly(0, 5.5, 56), (current) => brick(current) - Math.max(0, current - 5)).map(
    ({ samples: [sample], ...point }, index): Point => ({
      ...point,
      samples: [{ current: sample?.current ?? 0, meter: (sample?.meter ?? 0) + 0.001 * Math.sin(index * 7) }],
    }),
  ),
};

/** @param from when the run came to its soak. */
export function soaked(given: SoakGiven, header: RunHeader = thermometerHeader(), from = 0): Result {
  return resultOf([...soak(1, from, given), ended()], header);
}

function ended(): TimedEvent {
  return { t: 1e6, event: 'ended', how: 'completed', reason: null, status: 0 };
}

export function limited(gives: Gives, voltages = evenly(14.7, 1, 12)): Result {
  return madeResult([idle, traced(gives, voltages, [], 2)]);
}
