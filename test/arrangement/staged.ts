import type { Form } from '../../src/arrangement/build.js';
import type { StagesWish } from '../../src/arrangement/stages-wish.js';
import { madeProfile, type MadeOf } from './made-profile.js';
import { changes } from './switched.js';

export const alone = (name: string): Form => ({ kind: 'module', name });
export const group = (...of: Form[]): Form => ({ kind: 'group', of });
export const stack = (...of: Form[]): Form => ({ kind: 'stack', of });
export const [w1, w2, w3] = ['W1', 'W2', 'W3'].map(alone) as [Form, Form, Form];

/** 12 V bricks of the nursery's weather stations. */
export function bricks(made: Readonly<Record<string, MadeOf>> = {}) {
  return ['W1', 'W2', 'W3'].map((name) =>
    madeProfile(name, {
      openCircuit: 12.1,
      droop: 0.02,
      recommended: 2.5,
      usable: 3.4,
      dropout: 3.6,
      label: { voltage: 12, current: 2.5 },
      ...made[name],
    }),
  );
}

/** Two side by side, two stacked, three stacked, by change-over contacts that harm in no order. */
export function valveBench(changed: Partial<StagesWish> = {}): StagesWish {
  return {
    name: 'valve-bench',
    title: '0 to 32 V for the valve bench',
    ballast: { resistance: 0.051, tolerance: 0.05, rating: undefined },
    wires: [
      ['W1-', 'in-'],
      ['W2+', 'W3-'],
    ],
    contacts: [
      changes('S1', ['W1+', 'W2+', 'link']),
      changes('S2', ['W2-', 'W1-', 'link']),
      changes('S3', ['in+', 'W2+', 'W3+']),
    ],
    diodes: [],
    arrangements: [
      { name: 'pair', form: group(w1, w2), driven: [] },
      { name: 'two', form: stack(w1, w2), driven: ['S1', 'S2'] },
      { name: 'three', form: stack(w1, w2, w3), driven: ['S1', 'S2', 'S3'] },
    ],
    sequence: 'any-order',
    linearStage: { dropOut: 2, current: 5, dissipation: { kind: 'fixed', most: 25 } },
    output: { from: 0, to: 32 },
    hysteresis: 1,
    ...changed,
  };
}
