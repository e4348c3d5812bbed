import type { ViewedEnd, ViewedPoint, ViewedRun, ViewState } from '../../../src/view/view-state.js';

export const run: ViewedRun = {
  title: 'A first look',
  procedure: 'quick-look',
  module: 'K1',
  rated: { voltage: 15, current: 4 },
  bench: 'nursery bench',
  simulated: true,
  began: '2026-12-02T12:00:00.000Z',
  steps: [
    { kind: 'open-circuit', summary: 'voltage with the load off', duration: 4 },
    { kind: 'load-ramp', summary: '11 points from 0 A to 4 A', duration: 22 },
  ],
};

export const before: ViewState = {
  run,
  step: 0,
  elapsed: 0,
  remaining: 26,
  figures: {},
  input: undefined,
  points: [],
  cautions: [],
  question: undefined,
  notices: [],
  stopping: false,
  workingOut: undefined,
  ended: undefined,
};

/** One that was given up while its bench was opened. */
export const neverBegun: ViewedEnd = {
  how: 'stopped',
  reason: 'stopped with Ctrl-C',
  answer: ['This run switched nothing on.'],
  outcome: 'not-judged',
  safety: [],
  record: '',
  report: null,
};

/** A point of a ramp at a current, with what differs from one that held. */
export function point(current: number, other: Partial<ViewedPoint> = {}): ViewedPoint {
  return {
    step: 2,
    phase: 'ramp',
    set: { current },
    t: 10 + current,
    voltage: 15.2 - 0.018 * current,
    current,
    temperature: null,
    outcome: 'held',
    ...other,
  };
}
