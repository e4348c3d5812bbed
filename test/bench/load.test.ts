import { describe, expect, it } from 'vitest';
import type { InputState } from '../../src/bench/load.js';
import { nursery, type NurseryChange } from './nursery-bench.js';

const { operations } = (await nursery()).drivers.load;

async function opened(change: NurseryChange = {}) {
  const told: [InputState, boolean][] = [];
  const place = await nursery({ onInput: (...change) => told.push(change), ...change });
  const bench = await place.open();
  return { ...place, bench, load: bench.load, world: place.simulation.world, told };
}

describe('the load of a bench', () => {
  it('is made ready without its input being touched: at 0 A, with its own protections set', async () => {
    const { load, world, told } = await opened();
    await load.prepare();
    expect(world.load).toMatchObject({ input: 'off', mode: 'current', setCurrent: 0 });
    expect(told).toEqual([]);
  });

  it("protects itself a little above the bench's ceiling, so that its own error there is no dropout", async () => {
    const { load, world } = await opened({
      limits: { current: 5 },
      simulation: {
        instruments: { load: { errors: { 'set-current': { gain: 0.004, offset: 0.01, resolution: 0 } } } },
      },
    });
    await load.prepare();
    await load.inputOn();
    await load.setCurrent(5, 15);
    expect(world.load.protection.current).toBeCloseTo(5.5, 9);
    expect(world.load.input).toBe('on');
  });

  it('never protects itself beyond its own rating, which it would refuse', async () => {
    const { load, world } = await opened({ limits: { current: 100 } });
    await load.prepare();
    expect(world.load.protection.current).toBe(40);
  });

  it('is ready without protections where its driver has none', async () => {
    const { load, world } = await opened({ file: 'nursery-short' });
    await load.prepare();
    expect(world.load).toMatchObject({ input: 'off', mode: 'current', protection: {} });
  });

  it('tells of its input before it goes on, and of either once it was read back', async () => {
    const { load, world, told } = await opened();
    await load.inputOn();
    expect(world.load.input).toBe('on');
    await load.inputOff();
    expect(world.load.input).toBe('off');
    expect(told).toEqual([
      ['on', false],
      ['on', true],
      ['off', true],
    ]);
  });

  it.each([8.001, 1000, Number.POSITIVE_INFINITY, Number.NaN])(
    'refuses to be set to %d A before anything is sent',
    async (amps) => {
      const { load, world, clock } = await opened();
      await load.setCurrent(1, 15);
      const before = clock.now();
      await expect(load.setCurrent(amps, 15)).rejects.toMatchObject({
        code: 'BEYOND_CEILING',
        exitCode: 3,
        setBy: 'the bench',
        message: expect.stringMatching(/ was asked for and the bench allows 8 A$/) as string,
      });
      expect(world.load.setCurrent).toBe(1);
      // Each message takes its time on the line.
      expect(clock.now()).toBe(before);
    },
  );

  it('refuses more power than is allowed at the voltage that the module has, before anything is sent', async () => {
    const { load, world, clock } = await opened({ limits: { power: 60 } });
    await load.setCurrent(4, 15);
    const before = clock.now();
    await expect(load.setCurrent(4, 15.21)).rejects.toMatchObject({
      code: 'BEYOND_CEILING',
      exitCode: 3,
      setBy: 'the bench',
      message: '4.000 A at 15.21 V, which is 60.84 W, was asked for and the bench allows 60 W',
    });
    await expect(load.setCurrent(1, Number.NaN)).rejects.toMatchObject({ code: 'BEYOND_CEILING' });
    expect(world.load.setCurrent).toBe(4);
    expect(clock.now()).toBe(before);
  });

  it('leaves room between the highest set-point and where it protects itself, up to its rating', async () => {
    const { load, bench, world } = await opened({
      limits: { current: 100 },
      load: { ratings: { current: 4.6 } },
      simulation: {
        instruments: { load: { errors: { 'set-current': { gain: 0.004, offset: 0.01, resolution: 0 } } } },
      },
    });
    await load.prepare();
    await load.inputOn();
    await load.setCurrent(bench.ceilings.current.value, 15);
    expect(world.load.setCurrent).toBeCloseTo(4.37, 9);
    expect(world.load.protection.current).toBe(4.6);
    expect(world.load.input).toBe('on');
    await load.unload();
    expect(world.load.setCurrent).toBe(0);
  });

  it('takes a current that came out a hair below zero for none', async () => {
    const { load, world } = await opened();
    await load.setCurrent(-1e-17, 15);
    expect(world.load.setCurrent).toBe(0);
  });

  it('that says it is off when it was told to be on stops the run', async () => {
    const { load, told } = await opened({
      load: { operations: { ...operations, 'input-on': [{ text: '*CLS' }] } },
    });
    await expect(load.inputOn()).rejects.toMatchObject({
      code: 'DISOBEYED',
      exitCode: 69,
      message: 'the load at simulated:standard-load was told to switch its input on and says that it is off',
      advice: expect.stringMatching(/^look at its panel: what does it protect itself against/) as string,
    });
    expect(told).toEqual([
      ['on', false],
      ['off', true],
    ]);
  });

  it('that says it is on when it was told to be off stops the run', async () => {
    const { load, told } = await opened({
      load: { operations: { ...operations, 'input-off': [{ text: '*CLS' }] } },
    });
    await load.inputOn();
    await expect(load.inputOff()).rejects.toMatchObject({
      code: 'DISOBEYED',
      message: 'the load at simulated:standard-load was told to switch its input off and says that it is on',
      advice: expect.stringMatching(/^switch it off by hand/) as string,
    });
    expect(told).toEqual([
      ['on', false],
      ['on', true],
      ['off', false],
    ]);
  });
});
