import { describe, expect, it } from 'vitest';
import { type LoadLaw, currentDrawn } from '../../src/circuit/load-law.js';
import { currentAtVoltage } from '../../src/circuit/module-curve.js';
import type { ModuleLimit, SimulatedModule } from '../../src/files/simulation-section.js';
import { curveOf } from '../../src/simulation/module-curve-of.js';
import { type CircuitState, freshCircuit } from '../../src/simulation/circuit-state.js';
import type { SimulatedCircuit } from '../../src/simulation/resting-point.js';
import { advance, onNewLoad, outputOf, powered, unpowered } from '../../src/simulation/virtual-circuit.js';
import type { ModuleState } from '../../src/simulation/virtual-module.js';
import fc from '../property.js';
import { hiccup, k1 } from './bench-parts.js';

const sinks = (current: number): LoadLaw => ({ kind: 'current', current, leastVoltage: 1, leads: 0.035 });
const open: LoadLaw = { kind: 'open' };
const thermal = { riseAtRated: 35, timeConstant: 720, ambient: 23, limitPerKelvin: -0.002 };

/** A module by itself: a circuit of one. */
const alone = (module: SimulatedModule): SimulatedCircuit => ({ circuit: 'single', modules: [module] });
const only = new Set([0]);

/** Plays loads that follow one another, each for a while, and gives the state and its output after each. */
function play(
  module: SimulatedModule,
  acts: readonly (readonly [LoadLaw, number])[],
): { circuit: CircuitState; state: ModuleState; voltage: number; current: number }[] {
  const circuit = alone(module);
  let state = freshCircuit([module], 0);
  let law = open;
  return acts.map(([next, duration]) => {
    state = advance(circuit, onNewLoad(circuit, state, law, next), next, state.at + duration);
    law = next;
    const { voltage, current } = outputOf(circuit, state, law);
    return { circuit: state, state: moduleOf(state), voltage, current };
  });
}

function moduleOf({ modules: [module] }: CircuitState): ModuleState {
  if (module === undefined) throw new Error('no module');
  return module;
}

/** The same with its input cycled. */
function cycled(module: SimulatedModule, state: CircuitState, law: LoadLaw): CircuitState {
  const circuit = alone(module);
  return powered(circuit, unpowered(circuit, state, law, only), law, only);
}

describe('a constant-current module', () => {
  const module = k1({ style: 'constant-current', current: 5.3 });

  it('collapses when overloaded, holds its current there, and is back some milliseconds after', () => {
    const [held, over, soon, later] = play(module, [
      [sinks(4), 1],
      [sinks(6), 1],
      [sinks(4), 0.002],
      [sinks(4), 0.05],
    ]);
    expect(held?.voltage).toBeCloseTo(15.21 - 0.018 * 4, 9);
    expect(over?.current).toBeCloseTo(5.3, 9);
    expect(over?.voltage).toBeLessThan(1.3);
    expect(soon?.voltage).toBeGreaterThan(2);
    expect(soon?.voltage).toBeLessThan(14);
    expect(later?.voltage).toBeCloseTo(15.21 - 0.018 * 4, 3);
  });
});

describe('a folding-back module on a constant-current load', () => {
  const module = k1({ style: 'foldback', current: 5.3, shortCircuit: 1.2 });

  it('locks at the low point until less is drawn than it still gives there', () => {
    const [, over, eased, released] = play(module, [
      [sinks(5), 1],
      [sinks(5.5), 1],
      [sinks(3), 1],
      [sinks(1.2), 1],
    ]);
    expect(over?.voltage).toBeLessThan(1.2);
    // 3 A would be well within what it delivered before, and still it stays down.
    expect(eased?.voltage).toBeLessThan(1.2);
    expect(released?.voltage).toBeCloseTo(15.21 - 0.018 * 1.2, 6);
  });

  it('does not start on a load above its short-circuit current', () => {
    const fresh = freshCircuit([module], 0);
    expect(moduleOf(cycled(module, fresh, sinks(3))).phase.kind).toBe('limiting');
    expect(moduleOf(cycled(module, fresh, sinks(1))).phase.kind).toBe('held');
  });
});

describe('a hiccuping module', () => {
  const module = k1(hiccup);

  it('pulses while overloaded: a short try at its limit, then nothing for the rest of the period', () => {
    const pulses = play(module, [
      [sinks(6), 0.05],
      [sinks(6), 0.15],
      [sinks(6), 0.65],
      [sinks(6), 0.1],
    ]);
    expect(pulses.map(({ current }) => Number(current.toFixed(6)))).toEqual([5.3, 0, 5.3, 0]);
    expect(Math.max(...pulses.map(({ voltage }) => voltage))).toBeLessThan(1.3);
  });

  it('comes back at its next try once the overload is gone', () => {
    const [, waiting, back] = play(module, [
      [sinks(6), 0.3],
      [open, 0.4],
      [open, 0.2],
    ]);
    expect(waiting?.voltage).toBe(0);
    expect(back?.voltage).toBeCloseTo(15.21, 6);
  });

  it('is found in the right part of its period after a week', () => {
    const [early, week] = play(module, [
      [sinks(6), 0.05],
      [sinks(6), 0.8 * 756_000],
    ]);
    expect(week?.current).toBeCloseTo(early?.current ?? Number.NaN, 6);
  });
});

describe('a latching module', () => {
  it('stays off until its input is cycled', () => {
    const module = k1({ style: 'latch-off', current: 5.3 });
    const [, off] = play(module, [
      [sinks(6), 0.1],
      [open, 3600],
    ]);
    expect(off?.voltage).toBe(0);
    const again = cycled(module, off?.circuit ?? freshCircuit([], 0), open);
    const later = advance(alone(module), again, open, again.at + 0.1);
    expect(outputOf(alone(module), later, open).voltage).toBeCloseTo(15.21, 6);
  });
});

describe('a constant-power module', () => {
  const module = k1({ style: 'constant-power', current: 5.3 });
  const power = 5.3 * (15.21 - 0.018 * 5.3);

  it('gives way along its hyperbola, then shuts down at 60 % and keeps trying', () => {
    const [knee, onHyperbola, , shut, back] = play(module, [
      [sinks(5.3), 1],
      [sinks(7), 1],
      [sinks(power / (0.6 * 15.21) + 0.05), 0.01],
      [sinks(9), 0.2],
      [sinks(7), 0.7],
    ]);
    expect(knee?.voltage).toBeCloseTo(15.21 - 0.018 * 5.3, 9);
    expect(onHyperbola?.voltage).toBeCloseTo(power / 7, 9);
    expect(shut).toMatchObject({ voltage: 0, current: 0 });
    expect(back?.voltage).toBeCloseTo(power / 7, 6);
  });
});

describe('warming', () => {
  const limit: ModuleLimit = { style: 'constant-current', current: 5.3 };
  const module = k1(limit, { thermal, ratedCurrent: 4 });

  it('rises to 63.2 % of its end in one time constant, in one step or in a thousand', () => {
    const [once] = play(module, [[sinks(4), 720]]);
    const often = play(
      module,
      Array.from({ length: 1000 }, () => [sinks(4), 0.72] as const),
    ).at(-1);
    expect(once?.state.rise).toBeCloseTo(35 * (1 - Math.exp(-1)), 9);
    expect(often?.state.rise).toBeCloseTo(once?.state.rise ?? Number.NaN, 9);
  });

  it('lets a current go that was held cold, at the moment the limit passes it', () => {
    // The limit passes 5.2 A at a rise of (1 − 5.2/5.3)/0.002 = 9.434 K, on the way to 35·(5.2/4)² = 59.15 K.
    const moment = -720 * Math.log(1 - (1 - 5.2 / 5.3) / 0.002 / (35 * 1.3 ** 2));
    const [before, after] = play(module, [
      [sinks(5.2), moment - 0.001],
      [sinks(5.2), 0.002],
    ]);
    expect(before?.voltage).toBeGreaterThan(15);
    expect(after?.voltage).toBeLessThan(1.3);
  });

  it('lets a hiccuping module cool, try, warm and trip again for an hour', () => {
    const cycling = k1(hiccup, { thermal, ratedCurrent: 4 });
    const [hour] = play(cycling, [[sinks(5.2), 3600]]);
    // It settles about the rise at which its limit is what is drawn.
    expect(hour?.state.rise).toBeGreaterThan(8);
    expect(hour?.state.rise).toBeLessThan(10.5);
  });
});

describe('for any module in any state', () => {
  const limits: fc.Arbitrary<ModuleLimit> = fc.constantFrom<ModuleLimit>(
    { style: 'constant-current', current: 5 },
    { style: 'foldback', current: 5, shortCircuit: 1.5 },
    { style: 'constant-power', current: 5 },
    { style: 'hiccup', current: 5, period: 0.7 },
    { style: 'latch-off', current: 5 },
  );
  const acts = fc.array(
    fc.tuple(
      fc.oneof(
        fc.constant(open),
        fc.double({ min: 0, max: 9, noNaN: true }).map(sinks),
        fc
          .double({ min: 0, max: 16, noNaN: true })
          .map((voltage): LoadLaw => ({ kind: 'voltage', voltage, leads: 0.035 })),
      ),
      fc.double({ min: 0.06, max: 400, noNaN: true }),
    ),
    { minLength: 1, maxLength: 8 },
  );

  it('what flows satisfies both the module’s curve and the load’s law, or nothing flows', () => {
    fc.assert(
      fc.property(limits, acts, (limit, played) => {
        const module = k1(limit, { thermal, ratedCurrent: 4 });
        const results = play(module, played);
        for (const [
          index,
          {
            circuit: { at },
            state,
            voltage,
            current,
          },
        ] of results.entries()) {
          const law = played[index]?.[0] ?? open;
          expect(current).toBeGreaterThanOrEqual(0);
          expect(voltage).toBeGreaterThanOrEqual(0);
          if (voltage === 0 && current === 0) continue;
          // Still coming up: the load's law holds, and the module has charge to give.
          if (state.phase.kind === 'held' && at - state.phase.since < 0.1) continue;
          expect(Math.abs(currentDrawn(law, voltage) - current)).toBeLessThan(1e-6);
          const trying = state.phase.kind === 'retrying' && limit.style === 'constant-power';
          if (!trying)
            expect(Math.abs(currentAtVoltage(curveOf(module, state.rise), voltage) - current)).toBeLessThan(
              1e-6,
            );
        }
      }),
      { numRuns: 300 },
    );
  });

  it('many short steps lead where one long step leads, while nothing trips', () => {
    fc.assert(
      fc.property(
        limits,
        fc.double({ min: 0, max: 4, noNaN: true }),
        fc.integer({ min: 2, max: 40 }),
        (limit, current, steps) => {
          const module = k1(limit, { thermal, ratedCurrent: 4 });
          const [once] = play(module, [[sinks(current), 600]]);
          const often = play(
            module,
            Array.from({ length: steps }, () => [sinks(current), 600 / steps] as const),
          ).at(-1);
          expect(often?.voltage).toBeCloseTo(once?.voltage ?? Number.NaN, 9);
          expect(often?.state.rise).toBeCloseTo(once?.state.rise ?? Number.NaN, 9);
        },
      ),
    );
  });
});
