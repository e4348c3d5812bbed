import { describe, expect, it } from 'vitest';
import { trueCircuit } from '../../src/simulation/true-circuit.js';
import { brick, under, voltagesOf, worldOf } from './circuit-play.js';

const group = (change = {}) =>
  ({
    circuit: 'parallel',
    leads: 0.035,
    modules: [brick('K1', 12.343, change), brick('K2', 12.338, change)],
  }) as const;

describe('the truth about a group', () => {
  it('hiccuping bricks joined directly hold until the hog is at its limit, and no further', () => {
    const truth = trueCircuit(group());
    // I1 + I2 with I1 = 3.7 A and I1 − I2 = 5 mV / 1.5 mΩ.
    const failing = 2 * 3.7 - 0.005 / 0.0015;
    expect(truth.dropoutCurrent(0.05)).toBeCloseTo(failing, 6);
    expect(truth.firstAtItsLimit?.module).toBe('K1');
    expect(truth.firstAtItsLimit?.load).toBeCloseTo(failing, 6);
    expect(truth.currentsAt(2)).toEqual([2, 0]);
    expect(truth.imbalanceAt(2)).toBe(2);
  });

  it('those that stay at their limit hold up to the sum of their limits', () => {
    const truth = trueCircuit(group({ limit: { style: 'constant-current', current: 3.7 } }));
    expect(truth.dropoutCurrent(0.05)).toBeCloseTo(7.4, 6);
    expect(truth.firstAtItsLimit?.load).toBeCloseTo(2 * 3.7 - 0.005 / 0.0015, 6);
  });

  it('a hair below its dropout the simulated group holds, a hair above it does not', () => {
    for (const style of ['hiccup', 'latch-off', 'constant-current'] as const) {
      const limit = style === 'hiccup' ? { style, current: 3.7, period: 0.8 } : { style, current: 3.7 };
      const facts = group({ limit, ballast: 0.05 });
      const dropout = trueCircuit(facts).dropoutCurrent(0.05);
      const world = worldOf(facts.circuit, facts.modules);
      expect(under(world, dropout - 1e-6, 1).moduleVoltage).toBeGreaterThan(12);
      expect(under(world, dropout + 1e-6, 2).moduleVoltage).toBeLessThan(1.5);
    }
  });

  it('follows the warming of its modules', () => {
    const thermal = { riseAtRated: 35, timeConstant: 600, ambient: 23, limitPerKelvin: -0.002 };
    const facts = group({ thermal, limit: { style: 'constant-current', current: 3.7 } });
    expect(trueCircuit(facts, [10, 20]).dropoutCurrent(0.05)).toBeCloseTo(3.7 * (0.98 + 0.96), 6);
  });
});

describe('the truth about a stack', () => {
  const modules = [12.34, 12.338, 12.336].map((volts, place) =>
    brick(`K${place + 1}`, volts, {
      ballast: 0.05,
      ...(place === 1 && { limit: { style: 'hiccup', current: 3.6, period: 0.8 } as const }),
    }),
  );
  const truth = trueCircuit({ circuit: 'series', leads: 0.035, modules });

  it('its rails float at what lies below them, its weakest module ends it', () => {
    expect(truth.openCircuitVoltage).toBeCloseTo(37.014, 9);
    expect(truth.railVoltagesAt(0).map((volts) => Number(volts.toFixed(6)))).toEqual([0, 12.34, 24.678]);
    const [, , top = 0] = truth.railVoltagesAt(3.5);
    expect(top).toBeCloseTo(24.678 - 2 * 3.5 * 0.0515, 9);
    expect(truth.firstAtItsLimit).toMatchObject({ module: 'K2' });
    expect(truth.firstAtItsLimit?.load).toBeCloseTo(3.6, 6);
    expect(truth.dropoutCurrent(0.05)).toBeCloseTo(3.6, 6);
  });

  it('is what the simulated stack shows', () => {
    const moment = under(worldOf('series', modules), 3, 1);
    expect(moment.moduleVoltage).toBeCloseTo(truth.voltageAt(3), 9);
    expect(voltagesOf(moment)).toEqual(truth.moduleVoltagesAt(3));
  });
});
