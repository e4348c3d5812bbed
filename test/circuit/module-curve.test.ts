import { describe, expect, it } from 'vitest';
import {
  type CurveLimit,
  type ModuleCurve,
  currentAtSag,
  currentAtVoltage,
  knee,
  voltageAtCurrent,
  withLimitScaled,
} from '../../src/circuit/module-curve.js';
import fc from '../property.js';

const line = { openCircuitVoltage: 15, droopResistance: 0.1 };
const constantCurrent: ModuleCurve = { ...line, limit: { style: 'constant-current', current: 5 } };
const foldback: ModuleCurve = { ...line, limit: { style: 'foldback', current: 5, shortCircuit: 1 } };
const constantPower: ModuleCurve = { ...line, limit: { style: 'constant-power', current: 5 } };

// Worked by hand: the knee lies at 15 V − 0.1 Ω · 5 A = 14.5 V; P = 14.5 V · 5 A = 72.5 W; halfway down
// the foldback line (7.25 V) the current is halfway between 5 A and 1 A.
describe('a module curve', () => {
  it.each([
    [constantCurrent, 14.8, 2],
    [constantCurrent, 7, 5],
    [constantCurrent, 0, 5],
    [foldback, 14.8, 2],
    [foldback, 7.25, 3],
    [foldback, 0, 1],
    [constantPower, 14.8, 2],
    [constantPower, 7.25, 10],
    [constantCurrent, 15, 0],
    [constantCurrent, 16, 0],
  ])('%# delivers the expected current when held at a voltage', (curve, voltage, current) => {
    expect(currentAtVoltage(curve, voltage)).toBeCloseTo(current, 12);
  });

  it.each([
    [constantCurrent, 0, 15],
    [constantCurrent, 5, 14.5],
    [constantCurrent, 5.01, 0],
    [foldback, 3, 14.7],
    [foldback, 6, 0],
    [constantPower, 10, 7.25],
  ])('%# stands at the expected voltage when a current is drawn', (curve, current, voltage) => {
    expect(voltageAtCurrent(curve, current)).toBeCloseTo(voltage, 12);
  });

  it.each([
    // 5 % of 15 V is 0.75 V: beyond the knee's 0.5 V, so the limit decides.
    [constantCurrent, 0.05, 5],
    [foldback, 0.05, 5],
    [constantPower, 0.05, 72.5 / 14.25],
    // 2 % is 0.3 V: the droop alone reaches it at 3 A.
    [constantCurrent, 0.02, 3],
    [constantPower, 0.02, 3],
  ])('%# drops out where the sag is reached', (curve, sag, current) => {
    expect(currentAtSag(curve, sag)).toBeCloseTo(current, 12);
  });

  it('without droop holds its voltage up to the limit', () => {
    const stiff: ModuleCurve = { ...constantCurrent, droopResistance: 0 };
    expect(voltageAtCurrent(stiff, 4.9)).toBe(15);
    expect(currentAtVoltage(stiff, 14.999)).toBe(5);
    expect(currentAtSag(stiff, 0.05)).toBe(5);
  });

  it('whose droop uses up the whole voltage before the limit ends at its short-circuit current', () => {
    const soft: ModuleCurve = { ...constantCurrent, droopResistance: 10 };
    expect(knee(soft)).toEqual({ voltage: 0, current: 1.5 });
    expect(currentAtVoltage(soft, 0)).toBeCloseTo(1.5, 12);
  });

  // From the knee at 14.5 V and 5 A the voltage falls by 2 V for each ampere: 7 V at 8.75 A.
  it('with a sloping limit gives way ampere by ampere', () => {
    const sloping: ModuleCurve = { ...line, limit: { style: 'constant-current', current: 5, slope: 2 } };
    expect(currentAtVoltage(sloping, 7)).toBeCloseTo(8.75, 12);
    expect(currentAtVoltage(sloping, 0)).toBeCloseTo(12.25, 12);
    expect(voltageAtCurrent(sloping, 8.75)).toBeCloseTo(7, 12);
    expect(voltageAtCurrent(sloping, 13)).toBe(0);
    expect(currentAtSag(sloping, 0.05)).toBeCloseTo(5.125, 12);
    expect(withLimitScaled(sloping, 0.9).limit).toEqual({
      style: 'constant-current',
      current: 4.5,
      slope: 2,
    });
  });

  it('takes current back through its reverse resistance only, if it has one', () => {
    const sinking: ModuleCurve = { ...constantCurrent, reverseResistance: 0.5 };
    expect(currentAtVoltage(sinking, 16)).toBe(-2);
    expect(currentAtVoltage(sinking, 15)).toBe(0);
    expect(currentAtVoltage(constantCurrent, 16)).toBe(0);
  });

  it('keeps its shape when warming lowers the limit', () => {
    const warm = withLimitScaled(foldback, 0.9);
    expect(warm.limit).toEqual({ style: 'foldback', current: 4.5, shortCircuit: 0.9 });
    expect(voltageAtCurrent(warm, 4)).toBe(voltageAtCurrent(foldback, 4));
  });
});

describe('for any module', () => {
  const limit = fc.oneof(
    fc.record({
      style: fc.constant('constant-current' as const),
      current: fc.double({ min: 0.5, max: 20, noNaN: true }),
    }),
    fc
      .record({
        current: fc.double({ min: 0.5, max: 20, noNaN: true }),
        share: fc.double({ min: 0.05, max: 0.9, noNaN: true }),
      })
      .map(({ current, share }): CurveLimit => ({
        style: 'foldback',
        current,
        shortCircuit: current * share,
      })),
    fc.record({
      style: fc.constant('constant-power' as const),
      current: fc.double({ min: 0.5, max: 20, noNaN: true }),
    }),
  );
  const modules: fc.Arbitrary<ModuleCurve> = fc.record({
    openCircuitVoltage: fc.double({ min: 3, max: 60, noNaN: true }),
    droopResistance: fc.double({ min: 0.001, max: 0.1, noNaN: true }),
    limit,
  });

  it('current at a voltage undoes voltage at a current on the regulated line', () => {
    fc.assert(
      fc.property(modules, fc.double({ min: 0, max: 0.999, noNaN: true }), (module, share) => {
        const current = share * module.limit.current;
        expect(currentAtVoltage(module, voltageAtCurrent(module, current))).toBeCloseTo(current, 6);
      }),
    );
  });

  it('at the dropout current the voltage has sagged by the share, or the limit is reached', () => {
    fc.assert(
      fc.property(modules, fc.double({ min: 0.01, max: 0.3, noNaN: true }), (module, sag) => {
        const current = currentAtSag(module, sag);
        const sagged = module.openCircuitVoltage * (1 - sag);
        expect(voltageAtCurrent(module, current * 0.999)).toBeGreaterThan(sagged * 0.999);
        expect(voltageAtCurrent(module, current * 1.001)).toBeLessThan(sagged);
      }),
    );
  });
});
