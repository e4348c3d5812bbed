import { describe, expect, it } from 'vitest';
import { ceilingsOf, ceilingText } from '../../src/bench/ceilings.js';
import { groupBench } from './group-bench.js';
import { nursery } from './nursery-bench.js';

describe('what may never be exceeded on a bench', () => {
  it("is the bench's own limit where that is the strictest", async () => {
    const { description, drivers } = await nursery();
    expect(ceilingsOf(description, drivers)).toEqual({
      voltage: { value: 60, setBy: 'the bench' },
      current: { value: 8, setBy: 'the bench' },
      power: { value: 150, setBy: 'the bench' },
    });
  });

  it('is what the load stands where the bench would allow more', async () => {
    const { description, drivers } = await nursery({
      limits: { voltage: 400, current: 100, power: 900 },
      load: { ratings: { voltage: 80, current: 40, power: 200 } },
    });
    expect(ceilingsOf(description, drivers)).toEqual({
      voltage: { value: 80, setBy: "the load's rating" },
      // 5 % below it the load has room for its own error before it protects itself.
      current: { value: 38, setBy: "the load's rating less 5 %" },
      power: { value: 200, setBy: "the load's rating" },
    });
  });

  it('is what the meter stands where it is at the module and stands less', async () => {
    const { description, drivers } = await nursery({ meter: { ratings: { voltage: 30 } } });
    expect(ceilingsOf(description, drivers).voltage).toEqual({ value: 30, setBy: "the meter's rating" });
    expect(ceilingsOf(description, { load: drivers.load }).voltage.setBy).toBe('the bench');
  });

  it('is what the scanner stands, all of whose relays see the whole', async () => {
    const { description, drivers } = await groupBench({ drivers: { scanner: { ratings: { voltage: 42 } } } });
    expect(ceilingsOf(description, drivers).voltage).toEqual({ value: 42, setBy: "the scanner's rating" });
  });

  it('is never more than the source gives, as no module gives what it does not get', async () => {
    const { description, drivers } = await nursery({ file: 'nursery-source' });
    expect(ceilingsOf(description, drivers).power).toEqual({ value: 96, setBy: 'the source' });
  });

  it("is the bench's limit where the drivers promise nothing", async () => {
    const { description, drivers } = await nursery({ load: { ratings: {} }, meter: { ratings: {} } });
    expect(ceilingsOf(description, drivers)).toMatchObject({
      voltage: { setBy: 'the bench' },
      current: { setBy: 'the bench' },
      power: { setBy: 'the bench' },
    });
  });

  it('is laid to the bench where both say the same', async () => {
    const { description, drivers } = await nursery({ limits: { power: 200 } });
    expect(ceilingsOf(description, drivers).power).toEqual({ value: 200, setBy: 'the bench' });
  });

  it('is what the procedure allows where that is less, each quantity by itself', async () => {
    const { description, drivers } = await nursery({ limits: { temperature: 90 } });
    const procedure = { voltage: 16, current: 9, power: 80, temperature: 75 };
    expect(ceilingsOf(description, drivers, { ratedVoltage: 15, procedure })).toEqual({
      voltage: { value: 16, setBy: 'the procedure' },
      current: { value: 8, setBy: 'the bench' },
      power: { value: 80, setBy: 'the procedure' },
      temperature: { value: 75, setBy: 'the procedure' },
    });
  });

  it('is the nameplate and a quarter more, where nobody allows less', async () => {
    const { description, drivers } = await nursery({ limits: { temperature: 90 } });
    const ceilings = ceilingsOf(description, drivers, { ratedVoltage: 15, procedure: { temperature: 95 } });
    expect(ceilings.voltage).toEqual({ value: 18.75, setBy: 'the nameplate' });
    expect(ceilings.temperature).toEqual({ value: 90, setBy: 'the bench' });
    expect(ceilingsOf(description, drivers, { ratedVoltage: 48 }).voltage.value).toBe(60);
  });

  it('is written without the digits that reckoning makes', () => {
    expect(ceilingText({ value: 1.1 * 12, setBy: 'the procedure' }, 'voltage')).toBe('13.2 V');
    expect(ceilingText({ value: 8, setBy: 'the bench' }, 'current')).toBe('8 A');
  });
});
