import { describe, expect, it } from 'vitest';
import type { SimulatedFault } from '../../src/files/simulation-section.js';
import { exactInstruments, nursery, type NurseryChange } from './nursery-bench.js';

const file = 'nursery-source';
const fromDriver = (await nursery({ file })).drivers.source?.operations ?? {};
const forever = new AbortController().signal;

async function opened(change: NurseryChange = {}) {
  const noticed: string[] = [];
  const place = await nursery({ file, onNotice: (text) => noticed.push(text), ...change });
  const bench = await place.open();
  const { source } = bench;
  if (source === undefined) throw new Error('there is no source on this bench');
  const { world, began } = place.simulation;
  const there = () => world.sourceAt(place.clock.now() - began);
  const volts = (): number => world.look([place.clock.now() - began])[0]?.moduleVoltage ?? Number.NaN;
  return { ...place, bench, source, world, there, volts, noticed };
}

/** One that feeds K7. */
async function feeding(change: NurseryChange = {}) {
  const place = await opened(change);
  await place.source.prepare();
  await place.source.on();
  await place.clock.sleep(1);
  return place;
}

function withFault(fault: SimulatedFault): NurseryChange {
  return { simulation: { instruments: exactInstruments, faults: [fault] } };
}

describe('the source of a bench', () => {
  it('is told what to feed with, and its output is not touched', async () => {
    const { source, there, volts } = await opened();
    await source.prepare();
    expect(there()).toEqual({ output: 'off', setVoltage: 24, setCurrent: 4 });
    expect(await source.isOn()).toBe(false);
    expect(volts()).toBe(0);
  });

  it('feeds the module when it is on, and not when it is off', async () => {
    const { source, there, volts, clock } = await opened();
    await source.prepare();
    await source.on();
    await clock.sleep(1);
    expect(there().output).toBe('on');
    expect(volts()).toBeCloseTo(15.08, 3);
    await source.confirm();
    await source.off();
    expect(there().output).toBe('off');
    expect(volts()).toBe(0);
  });

  it('that says it is off when it was told to be on stops the run', async () => {
    const { source } = await opened({
      source: { operations: { ...fromDriver, 'output-on': [{ text: '*CLS' }] } },
    });
    await expect(source.on()).rejects.toMatchObject({
      code: 'DISOBEYED',
      exitCode: 69,
      message: 'the source at simulated:dc-source was told to switch its output on and says that it is off',
    });
  });

  it.each(['output-off', 'make-safe'])('that says it is on after %s stops the run', async (operation) => {
    const { source } = await feeding({
      source: { operations: { ...fromDriver, [operation]: [{ text: '*CLS' }] } },
    });
    await expect(operation === 'make-safe' ? source.makeSafe() : source.off()).rejects.toMatchObject({
      code: 'DISOBEYED',
      message: expect.stringMatching(/^the source at .* says that (its output|it) is on$/) as string,
      advice: 'switch it off by hand, or unplug the module from it',
    });
  });

  it('takes the input away for as long as the bench says, and gives it back: a latch is cleared', async () => {
    const { source, bench, volts, clock } = await feeding();
    await bench.load.setCurrent(5, 15);
    await bench.load.inputOn();
    await bench.load.inputOff();
    await clock.sleep(10);
    expect(volts()).toBe(0);
    const before = clock.now();
    await source.cycle(forever);
    expect(clock.now() - before).toBeGreaterThan(5);
    expect(clock.now() - before).toBeLessThan(6);
    await clock.sleep(1);
    expect(volts()).toBeCloseTo(15.08, 2);
  });

  it('stays off when the run is stopped while it is off', async () => {
    const { source, there } = await feeding();
    const stopped = new Error('stopped with Ctrl-C');
    await expect(source.cycle(AbortSignal.abort(stopped))).rejects.toBe(stopped);
    expect(there().output).toBe('off');
  });
});

describe('a source that does not feed the module as it was told ends the run', () => {
  it('when somebody has switched it off at its panel', async () => {
    const { source, world, clock, simulation } = await feeding();
    world.setSource({ output: 'off' }, clock.now() - simulation.began);
    await expect(source.confirm()).rejects.toMatchObject({
      code: 'SOURCE_WENT_OFF',
      exitCode: 3,
      message:
        'the output of the source at simulated:dc-source was on when it was last heard of, and is off now',
    });
  });

  it('when it has lost its power, and answers again', async () => {
    const { source, clock, there, volts } = await feeding(
      withFault({ at: 3, what: 'source-restarted', for: 1 }),
    );
    await clock.sleep(2.5);
    await expect(source.confirm()).rejects.toMatchObject({ code: 'SOURCE_WENT_OFF' });
    // Nobody switches it on again, not knowing why it went.
    expect(there().output).toBe('off');
    expect(volts()).toBe(0);
  });

  it('when its own limit comes before that of the module', async () => {
    const { source, bench } = await feeding({
      module: { limit: { style: 'latch-off', current: 6.2 } },
      limits: { power: 150 },
    });
    await bench.load.setCurrent(2.5, 15);
    await bench.load.inputOn();
    await source.confirm();
    await bench.load.setCurrent(5.9, 15);
    await expect(source.confirm()).rejects.toMatchObject({
      code: 'SOURCE_SAGS',
      exitCode: 3,
      message: expect.stringMatching(
        /^the source at simulated:dc-source gives 2\d\.\d V and was told 24\.0 V$/,
      ) as string,
      told: 24,
    });
  });

  it('but not when it sags for a moment only, as when a module starts', async () => {
    const { source, world, clock, simulation } = await feeding();
    world.setSource({ setVoltage: 18 }, clock.now() - simulation.began);
    const before = clock.now();
    const confirmed = source.confirm();
    while (clock.now() < before + 0.1) await Promise.resolve();
    world.setSource({ setVoltage: 24 }, clock.now() - simulation.began);
    await confirmed;
    expect(clock.now() - before).toBeGreaterThan(0.1);
    world.setSource({ setVoltage: 18 }, clock.now() - simulation.began);
    await expect(source.confirm()).rejects.toMatchObject({ code: 'SOURCE_SAGS' });
  });

  it('but for one that was not asked to feed anything', async () => {
    const { source } = await opened();
    await expect(source.confirm()).resolves.toBeUndefined();
    await source.isOn();
    await expect(source.confirm()).resolves.toBeUndefined();
  });

  it('and one that cannot read its own voltage is taken at its word', async () => {
    const { drivers } = await nursery({ file });
    const { 'output-state': state } = drivers.source?.readings ?? {};
    if (state === undefined) throw new Error('no such reading');
    const { source, bench } = await feeding({
      module: { limit: { style: 'latch-off', current: 6.2 } },
      limits: { power: 150 },
      source: { readings: { 'output-state': state } },
    });
    await bench.load.setCurrent(5.9, 15);
    await bench.load.inputOn();
    await expect(source.confirm()).resolves.toBeUndefined();
  });
});

describe('a source whose line was lost', () => {
  it('and that is on as before goes on, and is told nothing', async () => {
    const { source, clock, noticed, there, bench } = await feeding(
      withFault({ at: 3, what: 'source-lost', for: 1 }),
    );
    await clock.sleep(2.5);
    await source.confirm();
    expect(there().output).toBe('on');
    expect(bench.gaps).toBeGreaterThan(0);
    expect(noticed.at(-1)).toMatch(/it answers again after .*; its output is still on$/);
  });

  it('and that lost its power while it was off is told again what it must know', async () => {
    const { source, clock, there } = await opened(withFault({ at: 3, what: 'source-restarted', for: 1 }));
    await source.prepare();
    expect(await source.isOn()).toBe(false);
    await clock.sleep(4);
    await source.on();
    expect(there()).toEqual({ output: 'on', setVoltage: 24, setCurrent: 4 });
  });

  it('and that is on though it was off ends the run', async () => {
    const { source, clock, world, simulation } = await opened(
      withFault({ at: 3, what: 'source-lost', for: 1 }),
    );
    await source.prepare();
    expect(await source.isOn()).toBe(false);
    world.setSource({ output: 'on' }, clock.now() - simulation.began);
    await clock.sleep(4);
    await expect(source.isOn()).rejects.toMatchObject({
      code: 'DISOBEYED',
      message: 'the source at simulated:dc-source was off and is on now that it answers again',
    });
  });
});
