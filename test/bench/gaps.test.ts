import { describe, expect, it } from 'vitest';
import { makeSafe } from '../../src/bench/make-safe.js';
import type { SimulatedFault } from '../../src/files/simulation-section.js';
import { groupBench } from './group-bench.js';
import { exactInstruments, nursery, type NurseryChange } from './nursery-bench.js';

async function opened(faults: readonly SimulatedFault[], change: NurseryChange = {}) {
  const told: [state: string, confirmed: boolean][] = [];
  const notices: string[] = [];
  const place = await nursery({
    ...change,
    simulation: { instruments: exactInstruments, ...change.simulation, faults },
    onInput: (state, confirmed) => told.push([state, confirmed]),
    onNotice: (text) => notices.push(text),
  });
  const bench = await place.open();
  await bench.load.prepare();
  return { ...place, bench, told, notices };
}

describe('a load whose connection drops', () => {
  it('is opened again, its input read first, and goes on as it was', async () => {
    const { bench, clock, simulation, told, notices, lines } = await opened([
      { at: 10, what: 'load-lost', for: 0.6 },
    ]);
    await bench.load.inputOn();
    await bench.load.setCurrent(2, 15.2);
    told.length = 0;
    await clock.sleep(10 - clock.now());
    expect(await bench.load.readCurrent()).toEqual({ kind: 'value', value: 2 });
    expect(simulation.world.load).toMatchObject({ input: 'on', setCurrent: 2 });
    expect(told).toEqual([['on', true]]);
    expect(notices).toEqual([
      'simulated:standard-load: connection lost: the simulated instrument is gone; ' +
        'it answers again after 760 ms; its input is still on',
    ]);
    expect(bench).toMatchObject({ gaps: 1, latestGap: notices[0] });
    // One that answers needs no other.
    expect(lines).toHaveLength(3);
  });

  it('is not waited for any longer than some seconds, and the error is that of the loss', async () => {
    const { bench, clock, notices } = await opened([{ at: 10, what: 'load-lost' }]);
    await bench.load.inputOn();
    await clock.sleep(10 - clock.now());
    await expect(bench.load.readCurrent()).rejects.toMatchObject({
      code: 'CONNECTION_LOST',
      exitCode: 69,
      message: 'simulated:standard-load: connection lost: the simulated instrument is gone',
    });
    expect(clock.now()).toBeGreaterThan(13);
    expect(clock.now()).toBeLessThan(16);
    expect(notices.at(-1)).toMatch(
      /connection lost: the simulated instrument is gone; tried again 5 times in 3\.8 s, in vain: simulated:standard-load: the simulated instrument is gone$/,
    );
    const gaveUp = clock.now();
    // What was sought in vain is not sought anew by whoever asks next.
    await expect(bench.load.unload()).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
    expect(clock.now()).toBe(gaveUp);
    expect(bench.gaps).toBe(1);
  });

  it('and lost its power while it was on ends the run, and is not switched on again', async () => {
    const { bench, clock, simulation, told } = await opened([{ at: 10, what: 'load-restarted', for: 0.6 }]);
    await bench.load.inputOn();
    await bench.load.setCurrent(2, 15.2);
    told.length = 0;
    await clock.sleep(10 - clock.now());
    await expect(bench.load.readCurrent()).rejects.toMatchObject({
      code: 'LOAD_WENT_OFF',
      exitCode: 3,
      message: /^the input of the load at simulated:standard-load was on .* and is off now/,
    });
    expect(told).toEqual([['off', true]]);
    expect(simulation.world.load.input).toBe('off');
  });

  it('and lost its power while it was off is told again what it was told', async () => {
    const { bench, clock, simulation, told, notices } = await opened([
      { at: 10, what: 'load-restarted', for: 0.6 },
    ]);
    await bench.load.inputOff();
    await bench.load.mode('voltage');
    await bench.load.setVoltage(14);
    const before = simulation.world.load;
    expect(before).toMatchObject({ mode: 'voltage', setVoltage: 14, protection: { current: 8.8 } });
    told.length = 0;
    await clock.sleep(10 - clock.now());
    expect(simulation.world.loadAt(10)).toMatchObject({ mode: 'current', setVoltage: 0, protection: {} });
    await bench.load.readVoltage();
    expect(simulation.world.load).toEqual({ ...before, setCurrent: 0 });
    expect(told).toEqual([['off', true]]);
    expect(notices.at(-1)).toMatch(/; its input is still off$/);
  });

  it('as it is being switched on is switched on then, and no record is without it', async () => {
    const { bench, clock, simulation, told } = await opened([{ at: 10, what: 'load-restarted', for: 0.6 }]);
    await bench.load.inputOff();
    await bench.load.setCurrent(1.5, 15.2);
    told.length = 0;
    await clock.sleep(10 - clock.now());
    await bench.load.inputOn();
    expect(simulation.world.load).toMatchObject({ input: 'on', setCurrent: 1.5 });
    expect(told).toEqual([
      ['on', false],
      ['off', true],
      ['on', false],
      ['on', true],
    ]);
  });

  it('and was switched on by somebody else meanwhile ends the run', async () => {
    const { bench, clock, simulation, told } = await opened([{ at: 10, what: 'load-lost', for: 0.6 }]);
    await bench.load.inputOff();
    told.length = 0;
    await clock.sleep(10 - clock.now());
    simulation.world.setLoad({ input: 'on' }, 10);
    await expect(bench.load.readVoltage()).rejects.toMatchObject({
      code: 'DISOBEYED',
      message: 'the load at simulated:standard-load was off and is on now that it answers again',
      advice: expect.stringMatching(/^somebody at its panel, another program/) as string,
    });
    expect(told).toEqual([['on', true]]);
  });

  it('is not waited for while it is made safe: that has its own way', async () => {
    const { bench, clock, simulation, notices } = await opened([{ at: 10, what: 'load-lost', for: 0.5 }]);
    await bench.load.inputOn();
    await clock.sleep(10 - clock.now());
    expect(await makeSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(simulation.world.load.input).toBe('off');
    expect(bench.gaps).toBe(0);
    expect(notices).toEqual([]);
  });

  it('is not waited for once the bench was cut', async () => {
    const { bench, clock } = await opened([]);
    await bench.load.inputOn();
    await bench.cut();
    const cut = clock.now();
    await expect(bench.load.readCurrent()).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
    expect([clock.now(), bench.gaps]).toEqual([cut, 0]);
  });
});

describe('an answer that does not come as it should', () => {
  it('is asked for once more', async () => {
    const { bench, notices } = await opened([], {
      meterReads: (count) => (count === 1 ? '#?!' : '15.1'),
    });
    const taken = await bench.sample(() => undefined, { compared: false });
    expect(taken[0]).toMatchObject({ of: 'meter', measurement: { kind: 'value', value: 15.1 } });
    expect(bench.gaps).toBe(1);
    expect(notices.at(-1)).toMatch(
      /^virtual: answered "READ\?" with "#\?!" where a bare number was expected; asked again, it answered after \d+ ms$/,
    );
  });

  it('ends the run when it stays away, naming the address, the question and what came', async () => {
    const { bench, clock } = await opened([], { meterReads: '#?!' });
    const began = clock.now();
    await expect(bench.sample(() => undefined)).rejects.toMatchObject({
      code: 'REPLY_NOT_UNDERSTOOD',
      exitCode: 69,
      message: 'virtual: answered "READ?" with "#?!" where a bare number was expected',
    });
    expect(clock.now() - began).toBeLessThan(10);
  });

  it('of a meter that is silent for a moment does not end the run', async () => {
    const { bench, clock } = await opened([{ at: 10, what: 'meter-silent', for: 2 }]);
    await clock.sleep(10 - clock.now());
    const taken = await bench.sample(() => undefined);
    expect(taken.map(({ measurement }) => measurement.kind)).toEqual(['value', 'value', 'value']);
    expect(bench.gaps).toBe(1);
  });
});

describe('what is read on both sides of a gap', () => {
  // The meter reads nothing though the load has 15 V: time and again that is another place.
  const elsewhere = { meterReads: '0.001' };

  it('contradicts nothing, neither in a sample nor in the looks after it', async () => {
    const { bench, clock } = await opened([{ at: 10, what: 'load-lost', for: 0.3 }], elsewhere);
    await clock.sleep(9.99 - clock.now());
    await expect(bench.sample(() => undefined)).resolves.toHaveLength(3);
    expect(bench.gaps).toBe(1);
    await expect(bench.sample(() => undefined)).rejects.toMatchObject({ code: 'WRONG_PLACE' });
    expect(bench.gaps).toBe(1);
  });

  it('nor where the gap comes only as it is looked at again', async () => {
    const { bench, clock } = await opened([{ at: 10, what: 'load-lost', for: 0.3 }], elsewhere);
    await clock.sleep(9.95 - clock.now());
    await expect(bench.sample(() => undefined)).resolves.toHaveLength(3);
    expect(bench.gaps).toBe(1);
  });
});

describe('a scanner whose connection drops', () => {
  it.each(['scanner-lost', 'scanner-restarted'] as const)(
    'holds the right channel closed again when it is asked next: %s',
    async (what) => {
      const place = await groupBench({ faults: [{ at: 5, what, for: 0.4 }] });
      const bench = await place.open();
      await place.clock.sleep(5 - place.clock.now() - 0.001);
      const taps = [1, 2, 3].map((place_) => ({ place: place_, at: `ballast-of-K${place_}` }));
      const taken = await bench.sample(() => undefined, { taps });
      expect(taken.map(({ measurement }) => measurement.kind)).not.toContain('not-a-number');
      expect(bench.gaps).toBe(1);
      await bench.places.confirm();
      expect(bench.gaps).toBe(1);
    },
  );

  it('and that lost its power after it was asked last is found out by asking', async () => {
    const place = await groupBench({ faults: [{ at: 5, what: 'scanner-restarted', for: 0.4 }] });
    const bench = await place.open();
    await bench.sample(() => undefined);
    await place.clock.sleep(6 - place.clock.now());
    expect(bench.gaps).toBe(0);
    await bench.places.confirm();
    expect(bench.gaps).toBe(1);
  });
});

describe('a meter that lost its power', () => {
  it('measures again what it was told to measure', async () => {
    const { bench, clock } = await opened([{ at: 10, what: 'meter-restarted', for: 0.4 }]);
    await bench.meter?.perform('measure-resistance');
    await clock.sleep(10 - clock.now());
    expect(await bench.meter?.flag('measures-resistance')).toBe(true);
  });
});
