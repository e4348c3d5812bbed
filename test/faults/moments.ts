/** When in a run a fault strikes. */
export const moments = ['pre-flight', 'ramp', 'search', 'soak', 'make-safe'] as const;
export type Moment = (typeof moments)[number];

/** A brisk procedure that comes to the moment, and the message to the load with which it has come. */
export interface Scene {
  readonly steps: readonly string[];
  readonly message: string;
  /** The message after which Ctrl-C is pressed: so the load is on when it has to be made safe. */
  readonly stopAfter?: string;
  /** What the load must have held in the end, in amperes, where the run completes. */
  readonly held: { readonly phases: readonly string[]; readonly currents: readonly number[] };
}

const idle = 'open-circuit: { for: 100 ms }';
const ramp = 'load-ramp: { from: 1 A, to: 3 A, points: 3, dwell: 20 ms, readings: 7 }';
const search =
  'dropout-search: { from: 4 A, ceiling: 6 A, climb: 2, resolution: 1 A, dwell: 20 ms, readings: 7, watch: 200 ms }';
const soak = 'soak: { current: 2.5 A, for: 3.5 s, every: 1 s, dwell: 20 ms, readings: 5 }';

const ramped = { phases: ['ramp'], currents: [1, 2, 3] };

/** Each set-point is of one step only, and what makes safe (see `bench-files.ts`) is said for nothing else. */
export const scenes: Readonly<Record<Moment, Scene>> = {
  'pre-flight': { steps: [idle, ramp], message: 'INP?', held: ramped },
  ramp: { steps: [idle, ramp], message: 'CURR 2', held: ramped },
  search: {
    steps: [idle, search],
    message: 'CURR 5',
    held: { phases: ['start', 'climb'], currents: [4, 5] },
  },
  soak: { steps: [idle, soak], message: 'CURR 2.5', held: { phases: ['soak'], currents: [2.5] } },
  'make-safe': { steps: [idle, ramp], message: 'INP 0', stopAfter: 'CURR 2', held: ramped },
};
