import { describe, expect, it } from 'vitest';
import { expression } from '../../src/files/expression.js';
import { makeSafe, makeSafeUnopened } from '../../src/bench/make-safe.js';
import { openBench } from '../../src/bench/open-bench.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import type { InputState } from '../../src/bench/load.js';
import { toyDriver, toyLoad } from '../instrument/fixtures/toy-load.js';
import { VirtualLine } from '../instrument/fixtures/virtual-line.js';
import { nursery, type NurseryChange } from './nursery-bench.js';

const fromDriver = (await nursery()).drivers.load;

/** A bench with the load at work on K1, at 4 A. */
async function atWork(change: NurseryChange = {}) {
  const told: [InputState, boolean][] = [];
  const place = await nursery({ onInput: (...each) => told.push(each), ...change });
  const bench = await place.open();
  await bench.load.prepare();
  await bench.load.setCurrent(4, 15);
  await bench.load.inputOn();
  return { ...place, bench, told, world: place.simulation.world };
}

describe('a bench is made safe', () => {
  it('by the load being put off and read back', async () => {
    const { bench, world, told, lines } = await atWork();
    expect(world.load.input).toBe('on');
    expect(await makeSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(world.load.input).toBe('off');
    expect(told.at(-1)).toEqual(['off', true]);
    expect(lines).toHaveLength(2);
  });

  it('though the load was off already', async () => {
    const { bench } = await atWork();
    await bench.load.inputOff();
    expect(await makeSafe(bench)).toEqual({ kind: 'confirmed' });
  });

  it('over a new line when the old one was lost, and that is the only one then', async () => {
    const { bench, world, lines } = await atWork();
    await lines[0]?.close();
    expect(await makeSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(world.load.input).toBe('off');
    expect(lines).toHaveLength(3);
    expect(bench.instruments).toHaveLength(2);
    expect(await bench.load.isOn()).toBe(false);
  });

  it('though the load complains about how it was told', async () => {
    const { bench, world, lines } = await atWork({
      load: {
        operations: { ...fromDriver.operations, 'make-safe': [{ text: 'INP OFF' }, { text: 'LAMP OFF' }] },
      },
    });
    expect(await makeSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(world.load.input).toBe('off');
    expect(lines).toHaveLength(2);
  });

  it('though the journal can take nothing more, which it is told at every turn', async () => {
    let full = false;
    const listen = (): void => {
      if (full) throw new Error('the disk is full');
    };
    const { bench, world, lines } = await atWork({ onInput: listen, onNotice: listen });
    full = true;
    // An error that is still in the load's queue is a notice when the line is opened again.
    await lines[0]?.write(Buffer.from('LAMP ON\n'));
    await lines[0]?.close();
    expect(await makeSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(world.load.input).toBe('off');
    // Otherwise what can't be recorded is not done.
    await expect(bench.load.inputOn()).rejects.toThrow('the disk is full');
  });
});

describe('on a line that is new a load is told to be safe before it is asked anything', () => {
  /** A load at the end of lines that keep what was sent; what it answers may change. */
  async function listening(answers: Record<string, string | undefined>) {
    const toy = toyLoad({ replies: answers });
    const clock = new VirtualClock(new Date(0));
    const lines: VirtualLine[] = [];
    const parts = {
      bench: (await nursery()).description,
      drivers: { load: toyDriver },
      clock,
      connect: () => {
        const line = new VirtualLine(clock, toy.react);
        lines.push(line);
        return Promise.resolve(line);
      },
    };
    toy.state.input = '1';
    return { parts, toy, lines };
  }
  const unheard = { onInput: () => undefined, onNotice: () => undefined };

  it('when the open one is of no use any more', async () => {
    const answers: Record<string, string | undefined> = {};
    const { parts, toy, lines } = await listening(answers);
    const bench = await openBench({ ...parts, ...unheard });
    for (const question of ['*IDN?', 'SYST:ERR?', 'INP?']) answers[question] = undefined;
    expect(await makeSafe(bench)).toMatchObject({ kind: 'unconfirmed' });
    expect(lines.map(({ sent }) => sent.slice(0, 3))).toEqual([
      ['*IDN?', 'SYST:ERR?', '*CLS'],
      ['', 'INP OFF', '*IDN?'],
      ['', 'INP OFF', '*IDN?'],
    ]);
    expect(toy.state.input).toBe('0');
  });

  it('when there was none', async () => {
    const { parts, toy, lines } = await listening({});
    expect(await makeSafeUnopened(parts)).toEqual({ safety: { kind: 'confirmed' }, address: 'virtual:' });
    expect(toy.state.input).toBe('0');
    expect(lines.map(({ sent }) => sent.slice(0, 2))).toEqual([['', 'INP OFF']]);
  });

  it('twice when there was none and it does not answer', async () => {
    const { parts, lines } = await listening({ '*IDN?': undefined });
    const { safety } = await makeSafeUnopened(parts);
    expect(safety).toMatchObject({
      kind: 'unconfirmed',
      advice: expect.stringContaining('THE LOAD MAY STILL BE ON') as string,
    });
    expect(lines.map(({ sent }) => sent)).toEqual([
      ['', 'INP OFF', '*IDN?'],
      ['', 'INP OFF', '*IDN?'],
    ]);
  });
});

describe('that a bench is safe is not claimed', () => {
  it('when another load of the same make answers at its address, be it off', async () => {
    const clock = new VirtualClock(new Date(0));
    const ours = toyLoad();
    const another = toyLoad({ replies: { '*IDN?': 'NURSERY,LOAD,K2,1.0' } });
    let lost = false;
    const line = new VirtualLine(clock, (...heard) => (lost ? [] : ours.react(...heard)));
    const swapped = [0, 1].map(() => new VirtualLine(clock, another.react));
    const lines = [line, ...swapped].values();
    const bench = await openBench({
      bench: (await nursery()).description,
      drivers: { load: toyDriver },
      clock,
      connect: () => Promise.resolve(lines.next().value ?? new VirtualLine(clock, () => [])),
      onInput: () => undefined,
      onNotice: () => undefined,
    });
    await bench.load.inputOn();
    lost = true;
    expect(await makeSafe(bench)).toMatchObject({
      kind: 'unconfirmed',
      why: 'virtual: answers as "NURSERY,LOAD,K2,1.0" and answered as "NURSERY,LOAD,K1,1.0" before',
      advice: expect.stringContaining('THE LOAD MAY STILL BE ON') as string,
    });
    expect([ours.state.input, another.state.input]).toEqual(['1', '0']);
    expect(swapped.map(({ sent }) => sent.slice(0, 3))).toEqual([
      ['', 'INP OFF', '*IDN?'],
      ['', 'INP OFF', '*IDN?'],
    ]);
  });

  it('when the load says that it is still on, though it was told thrice', async () => {
    const { bench, told, world } = await atWork({
      load: { operations: { ...fromDriver.operations, 'make-safe': [{ text: '*CLS' }] } },
    });
    expect(await makeSafe(bench)).toMatchObject({
      kind: 'unconfirmed',
      why: 'the load at simulated:standard-load was made safe and says that its input is on',
      advice:
        'THE LOAD MAY STILL BE ON. Switch its input off at its front panel, or unplug the module, before you touch the leads.',
    });
    expect(world.load.input).toBe('on');
    expect(told.slice(-3)).toEqual([
      ['off', false],
      ['off', false],
      ['off', false],
    ]);
  });

  it('when the load lies about its state', async () => {
    const { bench, world } = await atWork({
      load: {
        readings: {
          ...fromDriver.readings,
          'input-state': { kind: 'flag', ask: [{ text: 'INP?' }], trueWhen: expression('^[01]$') },
        },
      },
    });
    expect(await makeSafe(bench)).toMatchObject({ kind: 'unconfirmed' });
    expect(world.load.input).toBe('off');
  });

  it('when the load is gone for good, and that is said and not thrown', async () => {
    const { bench, clock, lines } = await atWork({
      simulation: { faults: [{ at: 10, what: 'load-lost' }] },
    });
    await clock.sleep(20);
    expect(await makeSafe(bench)).toMatchObject({
      kind: 'unconfirmed',
      why: 'simulated:standard-load: the simulated instrument is gone',
    });
    // Twice on a line of its own, the second time after a pause.
    expect(lines).toHaveLength(2);
    expect(clock.now()).toBeCloseTo(21, 1);
    await expect(bench.close()).resolves.toBeUndefined();
  });

  it('when the load is silent; it is told all the same, and nobody waits for long', async () => {
    const { bench, clock } = await atWork({ simulation: { faults: [{ at: 10, what: 'load-silent' }] } });
    await clock.sleep(20);
    const began = clock.now();
    expect(await makeSafe(bench)).toMatchObject({
      kind: 'unconfirmed',
      why: expect.stringMatching(/did not answer/) as string,
    });
    expect(clock.now() - began).toBeLessThan(10);
  });

  it('leaves at most one line to the load open at a time', async () => {
    const { bench, lines } = await atWork({
      load: { operations: { ...fromDriver.operations, 'make-safe': [{ text: '*CLS' }] } },
    });
    await makeSafe(bench);
    const load = lines.filter((_, index) => index !== 1);
    expect(load).toHaveLength(3);
    for (const line of load.slice(0, -1)) {
      await expect(line.write(Buffer.from('*CLS\n'))).rejects.toThrow(/closed/);
    }
    await expect(load.at(-1)?.write(Buffer.from('*CLS\n'))).resolves.toBe(0);
  });
});
