import { describe, expect, it } from 'vitest';
import { openBench } from '../../src/bench/open-bench.js';
import { checkAllIsOff, checkMeters, checkOpenCircuitVoltage } from '../../src/bench/pre-flight.js';
import { nursery, type NurseryChange } from './nursery-bench.js';

async function opened(change: NurseryChange = {}) {
  const place = await nursery(change);
  return { ...place, bench: await place.open() };
}

describe('before anything is switched on', () => {
  it('an input that is off and a module with the voltage of its nameplate are fine', async () => {
    const { bench, simulation } = await opened();
    await checkAllIsOff(bench);
    await checkOpenCircuitVoltage(bench, 15);
    expect(simulation.world.load.input).toBe('off');
  });

  it('an input that is on already stops the run: somebody else may be at work', async () => {
    const { bench, simulation, clock } = await opened();
    simulation.world.setLoad({ input: 'on', setCurrent: 1 }, clock.now());
    await expect(checkAllIsOff(bench)).rejects.toMatchObject({
      code: 'PRE_FLIGHT',
      exitCode: 3,
      message: 'before anything was switched on: the input of the load at simulated:standard-load is on',
    });
  });

  it.each<[string, NurseryChange, RegExp, RegExp]>([
    [
      'no voltage',
      { simulation: { faults: [{ at: 0, what: 'module-dead' }] } },
      /^before anything was switched on: the module reads -?\d+(\.\d+)? m?V$/,
      /plugged in/,
    ],
    [
      'reversed leads',
      { simulation: { faults: [{ at: 0, what: 'reversed' }] } },
      /: the module reads -15\.\d+ V$/,
      /swap the leads/,
    ],
    [
      'another module than the file says',
      { module: { openCircuitVoltage: 24.2 } },
      /: the module reads 24\.\d+ V and its nameplate says 15 V$/,
      /right module file/,
    ],
    [
      'a voltage that is too low',
      { module: { openCircuitVoltage: 9 } },
      /reads \d+(\.\d+)? V and its nameplate says 15 V$/,
      /right module/,
    ],
  ])('%s stops the run with advice', async (_, change, message, advice) => {
    const { bench } = await opened(change);
    await expect(checkOpenCircuitVoltage(bench, 15)).rejects.toMatchObject({
      code: 'PRE_FLIGHT',
      message: expect.stringMatching(message) as string,
      advice: expect.stringMatching(advice) as string,
    });
  });

  it('a voltage within a quarter of the nameplate is taken, as tired modules have it', async () => {
    const { bench } = await opened({ module: { openCircuitVoltage: 12 } });
    await expect(checkOpenCircuitVoltage(bench, 15)).resolves.toBeCloseTo(12, 1);
  });

  it('a voltage that can not be read stops the run', async () => {
    // Asked for a resistance, a meter on a live output shows overload.
    const { bench } = await opened({
      file: 'nursery-short',
      meter: {
        readings: {
          voltage: { kind: 'number', ask: [{ text: 'MEAS:RES?' }], dimension: 'voltage', factor: 1 },
        },
      },
    });
    await expect(checkOpenCircuitVoltage(bench, 15)).rejects.toMatchObject({
      message: 'before anything was switched on: the voltage of the module could not be read',
    });
  });

  it('the load looks where the bench file says so, whatever a meter beside it reads', async () => {
    const { bench } = await opened({ bench: { voltageFrom: 'load-terminals' }, meterReads: '3.1' });
    await expect(checkOpenCircuitVoltage(bench, 15)).resolves.toBeCloseTo(15.2, 1);
    const blind = await opened({ bench: { voltageFrom: 'load-terminals' }, meterReads: '9.91E37' });
    await expect(checkOpenCircuitVoltage(blind.bench, 15)).resolves.toBeCloseTo(15.2, 1);
  });

  it('the load looks where there is no meter', async () => {
    const place = await nursery({ simulation: { faults: [{ at: 0, what: 'reversed' }] } });
    const { description, drivers } = place;
    const bench = await openBench({
      bench: { ...description, voltageFrom: 'load-terminals' },
      drivers: { load: drivers.load },
      clock: place.clock,
      connect: () => Promise.resolve(place.simulation.connect('load', drivers.load)),
      onInput: () => undefined,
      onNotice: () => undefined,
    });
    await expect(checkOpenCircuitVoltage(bench, 15)).rejects.toThrow(/the module reads -1\d(\.\d+)? V$/);
  });

  it.each([
    [
      'at another place',
      '0.151',
      /^before anything was switched on: with the input off the meter reads 151\.0 mV and the load 15\.\d+ V$/,
    ],
    ['with swapped probes', '-15.2', /the meter reads -15\.20 V and the load 15\.\d+ V$/],
    ['set to something that is not dc voltage', '14.6', /the meter reads 14\.60 V and the load 15\.\d+ V$/],
  ])('a meter %s does not read what the load reads, and both are named', async (_, meterReads, message) => {
    const { bench } = await opened({ meterReads });
    await expect(checkOpenCircuitVoltage(bench, 15)).rejects.toMatchObject({
      code: 'PRE_FLIGHT',
      message: expect.stringMatching(message) as string,
      advice: expect.stringMatching(/^are the meter's probes at the output .*\?$/) as string,
    });
  });

  it('meter and load may differ by what both promise, and 2 % more', async () => {
    const { bench } = await opened({ meterReads: '15.0' });
    await expect(checkOpenCircuitVoltage(bench, 15)).resolves.toBeCloseTo(15, 9);
  });

  it('a meter that says what it is set to is asked, and named when it is the wrong thing', async () => {
    const { bench, clock } = await opened({ simulation: { faults: [{ at: 1, what: 'meter-wrong-mode' }] } });
    await expect(checkMeters(bench)).resolves.toBeUndefined();
    await clock.sleep(2);
    await expect(checkMeters(bench)).rejects.toMatchObject({
      code: 'WRONG_PLACE',
      exitCode: 3,
      what: 'meter-in-wrong-mode',
      advice: expect.stringContaining('set it to dc voltage') as string,
    });
  });

  it('a meter that can not say what it is set to is not asked', async () => {
    const { bench } = await opened({ file: 'nursery-short' });
    await expect(checkMeters(bench)).resolves.toBeUndefined();
  });
});
