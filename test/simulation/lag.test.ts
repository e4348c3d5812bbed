import { describe, expect, it } from 'vitest';
import { Lag } from '../../src/simulation/lag.js';

describe('after a step of what it sees an instrument', () => {
  it('lags behind by all of it at first, and by less than a ten-thousandth when it has settled', () => {
    const lag = new Lag(0.02);
    lag.step(5, { voltage: 15, current: -4 });
    expect(lag.of('voltage', 5)).toBe(15);
    expect(lag.of('current', 5)).toBe(-4);
    expect(lag.of('voltage', 5.002)).toBeCloseTo(15 / Math.E, 9);
    expect(lag.of('voltage', 5.02)).toBeLessThan(15e-4);
  });

  it('carries what was left of one step into the next', () => {
    const lag = new Lag(0.02);
    lag.step(0, { voltage: 1, current: 0 });
    lag.step(0.002, { voltage: 1, current: 0 });
    expect(lag.of('voltage', 0.002)).toBeCloseTo(1 + 1 / Math.E, 9);
  });

  it('does not lag where its driver gives no settling time', () => {
    const lag = new Lag(0);
    lag.step(0, { voltage: 15, current: 4 });
    expect(lag.of('voltage', 0)).toBe(0);
  });
});
