import type { Circuit, Form } from '../../../src/arrangement/build.js';
import type { Guaranteed, StagedBuild } from '../../../src/arrangement/staged-build.js';
import { madeProfile } from '../../arrangement/made-profile.js';

const names = ['W1', 'W2', 'W3'];
const module = (name: string): Form => ({ kind: 'module', name });
const allSideBySide: Form = { kind: 'group', of: names.map(module) };
const forms: readonly (readonly [name: string, form: Form, volts: number, amperes: number])[] = [
  ['low', allSideBySide, 12.1, 6],
  [
    'middle',
    { kind: 'stack', of: [{ kind: 'group', of: [module('W1'), module('W2')] }, module('W3')] },
    24.2,
    2.5,
  ],
  ['high', { kind: 'stack', of: names.map(module) }, 36.3, 2.5],
];
const most = 25;
const switchOvers = [
  { lower: 'low', upper: 'middle', up: 9.6, down: 8.6 },
  { lower: 'middle', upper: 'high', up: 21.4, down: 20.4 },
];

/** Three bricks of 12 V before a linear stage that may turn 25 W into heat. */
export function madeStages(changed: Partial<StagedBuild> = {}): StagedBuild {
  const outputs = Array.from({ length: 121 }, (_, index) => 1 + (29 * index) / 120);
  const currents = Array.from({ length: 41 }, (_, index) => (6 * index) / 40);
  const at = (output: number, way: 'up' | 'down'): Guaranteed => {
    const [name, , volts, amperes] = feedOf(output, way);
    const byHeat = most / (volts - output);
    return byHeat < amperes
      ? { arrangement: name, current: byHeat, setBy: 'dissipation' }
      : { arrangement: name, current: amperes, setBy: name === 'low' ? 'linear-stage' : 'module' };
  };
  return {
    kind: 'stages',
    wish: {
      name: 'valves',
      title: 'adjustable supply for the valve bench',
      ballast: { resistance: 0.1, tolerance: 0.05, rating: 5 },
      contacts: [
        { kind: 'make', name: 'S1', joins: ['W1-', 'W2-'] },
        { kind: 'break', name: 'S2', joins: ['W2+', 'W3-'] },
        { kind: 'change-over', name: 'S3', common: 'W1+', rest: 'in+', driven: 'W2-', bridges: false },
      ],
      wires: [['W3+', 'in+']],
      diodes: [],
      arrangements: forms.map(([name, form], index) => ({
        name,
        form,
        driven: ['S1', 'S3'].slice(0, index),
      })),
      sequence: 'break-before-make',
      linearStage: { dropOut: 2, current: 6, dissipation: { kind: 'fixed', most } },
      output: { from: 1, to: 30 },
      hysteresis: 1,
    },
    modules: names.map((name) =>
      madeProfile(name, { openCircuit: 12.1, recommended: 2.5, label: { voltage: 12, current: 2.5 } }),
    ),
    standing: { kind: 'may-be-built' },
    concerns: [],
    arrangements: forms.map(([name, form, volts, amperes]) => ({
      name,
      circuit: circuitOf(form),
      closed: ['S1'],
      openVoltage: { value: volts, low: volts - 0.1, high: volts + 0.1 },
      fullVoltage: { value: volts - 0.4, low: volts - 0.6, high: volts - 0.2 },
      current: amperes,
      setBy: 'W2 at its recommended 2.5 A sets it',
    })),
    switchOvers: switchOvers.map((over) => ({
      ...over,
      swing: { noLoad: 12.1, fullLoad: 11.8 },
      goingUp: {
        moving: ['S1', 'S3'],
        bySequence: {
          'any-order': {
            kind: 'forbidden',
            order: ['S3 leaves in+', 'S1 closes'],
            connection: {
              kind: 'short',
              modules: ['W2'],
              volts: 12.1,
              through: ['S1', 'S3'],
              sentence: 'the output of W2 is across itself through S1 and S3',
            },
          },
          'break-before-make': { kind: 'clear', states: 3, interrupts: true },
          'make-before-break': { kind: 'clear', states: 1, interrupts: false },
        },
      },
      comingDown: {
        moving: ['S1', 'S3'],
        bySequence: {
          'any-order': { kind: 'clear', states: 4, interrupts: true },
          'break-before-make': { kind: 'clear', states: 3, interrupts: true },
          'make-before-break': { kind: 'clear', states: 3, interrupts: false },
        },
      },
    })),
    mostDissipation: most,
    guaranteed: outputs.map((output) => ({
      output,
      rising: at(output, 'up'),
      falling: at(output, 'down'),
    })),
    map: {
      outputs,
      currents,
      watts: outputs.map((output) =>
        currents.map((current) => {
          const volts = feedOf(output, 'up')[2];
          return current > at(output, 'up').current ? null : (volts - output) * current;
        }),
      ),
    },
    parts: [
      {
        marks: ['R1', 'R2', 'R3'],
        what: '100 mΩ resistor',
        ratings: ['at least 5 W'],
        why: 'makes the modules share when they are side by side',
      },
    ],
    cautions: ['switch over with the output off, until the contacts were seen to move as told'],
    ...changed,
  };
}

function feedOf(output: number, way: 'up' | 'down'): (typeof forms)[number] {
  const passed = switchOvers.filter((over) => output > over[way]).length;
  const feed = forms[passed];
  if (feed === undefined) throw new RangeError(`no arrangement ${passed}`);
  return feed;
}

function circuitOf(form: Form): Circuit {
  return { form, ballast: { resistance: 0.1, tolerance: 0.05 }, reverseDiodes: true, orDiodes: false };
}
