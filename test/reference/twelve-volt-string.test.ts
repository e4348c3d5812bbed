import { describe, expect, it } from 'vitest';
import { buildSeries } from '../../src/arrangement/build-series.js';
import { madeProfile } from '../arrangement/made-profile.js';

/**
 * Common practice, no published source: three 12 V bricks with labels of 2.5 A in series, bricks that read
 * 12.2 to 12.3 V with no load and hold regulation to about 3.5 A.
 */
describe('three 12 V bricks in series', () => {
  const brick = (name: string, openCircuit: number, usable: number) =>
    madeProfile(name, {
      openCircuit,
      droop: 0.02,
      usable,
      dropout: usable + 0.1,
      recommended: 2.5,
      label: { voltage: 12, current: 2.5 },
    });
  const build = buildSeries([brick('W1', 12.27, 3.6), brick('W2', 12.31, 3.4), brick('W3', 12.22, 3.7)], {
    load: undefined,
  });

  it('give 36 to 37 V, loaded or not', () => {
    for (const { low, high } of [build.openVoltage, build.voltageAtLoad]) {
      expect(low).toBeGreaterThan(36);
      expect(high).toBeLessThan(37);
    }
  });

  it('are good for the label of one, and the weakest gives way first at about 3.5 A', () => {
    expect(build.recommended.current).toBe(2.5);
    expect(build.weakest).toMatchObject({ module: 'W2', sure: true });
    expect(build.usable.value).toBeCloseTo(3.4, 1);
  });

  it('stay touch-safe, the uppermost 0 V at about 24 V', () => {
    expect(build.beyondTouchable).toBe(false);
    expect(build.rails[2]?.float.value).toBeCloseTo(24.5, 0);
  });
});
