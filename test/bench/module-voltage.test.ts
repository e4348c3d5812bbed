import { describe, expect, it } from 'vitest';
import { moduleVoltage, voltageResolution } from '../../src/bench/module-voltage.js';
import type { Taken } from '../../src/bench/sample.js';
import { nursery } from './nursery-bench.js';

const value = (of: Taken['of'], what: Taken['what'], number: number): Taken => ({
  of,
  what,
  measurement: { kind: 'value', value: number },
});
const taken = [value('meter', 'voltage', 15.1), value('load', 'voltage', 14.9), value('load', 'current', 4)];
const accuracyOf = (resolution: number) => ({ voltage: { ofReading: 0, fixed: 0, resolution } });

describe('the voltage at the module', () => {
  it("is the meter's where the bench file says that the meter is there", async () => {
    const bench = await (await nursery({ meter: { accuracy: accuracyOf(0.002) } })).open();
    expect(moduleVoltage(bench, taken)).toBe(15.1);
    expect(voltageResolution(bench)).toBe(0.002);
  });

  it("is the load's and what the leads lose while the meter's probes are elsewhere", async () => {
    const bench = await (await nursery()).open();
    const elsewhere: Taken = { ...value('meter', 'voltage', 0.2), at: 'ballast-of-K1' };
    // 35 mΩ x 4 A
    expect(moduleVoltage(bench, [elsewhere, ...taken.slice(1)])).toBeCloseTo(15.04, 12);
    expect(moduleVoltage(bench, taken.slice(1))).toBeCloseTo(15.04, 12);
  });

  it('is not made up from the load where the meter was read and had no value', async () => {
    const bench = await (await nursery()).open();
    const blind: Taken = { of: 'meter', what: 'voltage', measurement: { kind: 'overload' } };
    expect(moduleVoltage(bench, [blind, ...taken.slice(1)])).toBeNaN();
  });

  it("is the load's and what the leads lose otherwise, even with a meter on the bench", async () => {
    const place = await nursery({
      bench: { voltageFrom: 'load-terminals' },
      load: { accuracy: accuracyOf(0.005) },
    });
    const bench = await place.open();
    // 35 mΩ x 4 A
    expect(moduleVoltage(bench, taken)).toBeCloseTo(15.04, 12);
    expect(moduleVoltage(bench, taken.slice(0, 2))).toBeNaN();
    expect(voltageResolution(bench)).toBe(0.005);
  });
});
