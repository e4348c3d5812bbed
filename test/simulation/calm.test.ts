import { describe, expect, it } from 'vitest';
import { calmly } from '../../src/simulation/calm.js';
import { type CircuitState, freshCircuit } from '../../src/simulation/circuit-state.js';
import { held, outlook } from '../../src/simulation/outlook.js';
import type { SimulatedCircuit } from '../../src/simulation/resting-point.js';
import { advance, onNewLoad, outputOf } from '../../src/simulation/virtual-circuit.js';
import fc from '../property.js';
import { k1 } from './bench-parts.js';
import { brick, sinks } from './circuit-play.js';

const thermal = { riseAtRated: 35, timeConstant: 720, ambient: 23, limitPerKelvin: -0.002 };
const module = k1({ style: 'hiccup', current: 5.3, period: 0.8 }, { thermal, ratedCurrent: 4 });
const alone: SimulatedCircuit = { circuit: 'single', modules: [module] };

function standing(circuit: SimulatedCircuit, current: number): CircuitState {
  const open = { kind: 'open' } as const;
  return onNewLoad(circuit, freshCircuit(circuit.modules, 0), open, sinks(current));
}

describe('a circuit that only warms', () => {
  it('is carried on over any time at once, and warms as it does', () => {
    const then = calmly(alone, standing(alone, 4), sinks(4), 3600);
    expect(then?.at).toBe(3600);
    expect(then?.modules[0]?.rise).toBeCloseTo(35 * (1 - Math.exp(-5)), 10);
  });

  it('retries in calm as long as the load is too much for it', () => {
    const state = standing(alone, 7);
    expect(state.modules[0]?.phase.kind).toBe('retrying');
    expect(calmly(alone, state, sinks(7), 0.5)?.at).toBe(0.5);
  });
});

describe('a circuit in which something will happen', () => {
  const tooMuchWhenWarm = sinks(5.2);

  it('is not carried past the moment at which its limit passes the load', () => {
    const state = standing(alone, 5.2);
    expect(calmly(alone, state, tooMuchWhenWarm, 3600)).toBeUndefined();
    expect(advance(alone, state, tooMuchWhenWarm, 200).modules[0]?.phase.kind).toBe('retrying');
  });

  it('comes to it at the same moment, however often it is looked at before', () => {
    const seldom = advance(alone, standing(alone, 5.2), tooMuchWhenWarm, 200).modules[0]?.phase;
    const law = sinks(5.2);
    let state = standing(alone, 5.2);
    for (let at = 0.1; at <= 200; at += 0.1) state = advance(alone, state, law, at);
    const often = state.modules[0]?.phase;
    if (seldom?.kind !== 'retrying' || often?.kind !== 'retrying') throw new Error('it never tripped');
    expect(often.since).toBeCloseTo(seldom.since, 5);
  });

  it('is watched while a module waits to start', () => {
    const overloaded = standing(alone, 7);
    const eased = onNewLoad(alone, advance(alone, overloaded, sinks(7), 0.4), sinks(7), sinks(2));
    expect(eased.modules[0]?.phase.kind).toBe('retrying');
    expect(calmly(alone, eased, sinks(2), 0.5)).toBeUndefined();
  });
});

it('within a calm the outlook and the currents are those that are found afresh at every moment of it', () => {
  const styles = [
    { style: 'hiccup', current: 3.7, period: 0.8 },
    { style: 'constant-current', current: 3.6 },
    { style: 'constant-power', current: 3.5 },
    { style: 'foldback', current: 3.8, shortCircuit: 1 },
  ] as const;
  const factor = fc.constantFrom(-0.02, -0.002, 0, 0.004);
  const modules = fc.array(fc.tuple(fc.constantFrom(...styles), factor, fc.integer({ min: 5, max: 900 })), {
    minLength: 1,
    maxLength: 3,
  });
  let calms = 0;
  fc.assert(
    fc.property(
      modules,
      fc.constantFrom('parallel', 'series'),
      fc.double({ min: 0.1, max: 9, noNaN: true }),
      fc.double({ min: 0.001, max: 500, noNaN: true }),
      (drawn, wired, current, until) => {
        const circuit: SimulatedCircuit = {
          circuit: wired,
          modules: drawn.map(([limit, limitPerKelvin, timeConstant], place) =>
            brick(`B${place}`, 12.3 - 0.01 * place, {
              limit,
              ballast: 0.05,
              thermal: { ...thermal, limitPerKelvin, timeConstant },
            }),
          ),
        };
        const state = standing(circuit, current);
        const law = sinks(current);
        const then = calmly(circuit, state, law, until);
        if (then === undefined) return;
        calms += 1;
        for (const share of [0.2, 0.5, 0.9, 1]) {
          const at = state.at + share * (then.at - state.at);
          const between = calmly(circuit, state, law, at) ?? state;
          expect(outlook(circuit, between, sinks(current))).toEqual(held(state));
          const afresh = outputOf(circuit, between, sinks(current));
          const known = outputOf(circuit, between, law);
          expect(known.current).toBeCloseTo(afresh.current, 9);
          expect(known.voltage).toBeCloseTo(afresh.voltage, 9);
        }
      },
    ),
  );
  expect(calms).toBeGreaterThan(20);
});
