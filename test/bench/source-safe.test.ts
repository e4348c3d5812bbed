import { describe, expect, it } from 'vitest';
import {
  loadMayStillBeOn,
  makeSafe,
  makeSourceSafe,
  makeSourceSafeUnopened,
  sourceMayStillBeOn,
} from '../../src/bench/make-safe.js';
import type { Connection } from '../../src/instrument/connection.js';
import { exactInstruments, nursery, type NurseryChange } from './nursery-bench.js';

const file = 'nursery-source';
const fromDriver = (await nursery({ file })).drivers.source?.operations ?? {};

/** K7 fed, and the load at work on it. */
async function atWork(change: NurseryChange = {}) {
  const place = await nursery({ file, ...change });
  const bench = await place.open();
  if (bench.source === undefined) throw new Error('there is no source on this bench');
  await bench.load.prepare();
  await bench.source.prepare();
  await bench.source.on();
  await place.clock.sleep(1);
  await bench.load.setCurrent(2, 15);
  await bench.load.inputOn();
  const { world, began } = place.simulation;
  return { ...place, bench, world, output: () => world.sourceAt(place.clock.now() - began).output };
}

describe('the source of a bench is made safe', () => {
  it('by its output being off, and read back', async () => {
    const { bench, output, lines } = await atWork();
    expect(output()).toBe('on');
    expect(await makeSourceSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(output()).toBe('off');
    expect(lines).toHaveLength(3);
  });

  it('over a new line when the old one was lost, and that is the only one then', async () => {
    const { bench, output, lines } = await atWork();
    await lines[2]?.close();
    expect(await makeSourceSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(output()).toBe('off');
    expect(lines).toHaveLength(4);
    expect(bench.instruments.map(({ post }) => post)).toEqual(['load', 'meter', 'source']);
    expect(await bench.source?.isOn()).toBe(false);
  });

  it('though the bench was cut, after the load, which waits for nobody', async () => {
    const { bench, world, output } = await atWork();
    await bench.cut();
    expect(await makeSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(world.load.input).toBe('off');
    expect(output()).toBe('on');
    expect(await makeSourceSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(output()).toBe('off');
  });

  it('and where it is gone for good the load is off no later for that, and whoever is there is told', async () => {
    const { bench, world, clock } = await atWork({
      simulation: { instruments: exactInstruments, faults: [{ at: 4, what: 'source-silent' }] },
    });
    await clock.sleep(4);
    const before = clock.now();
    expect(await makeSafe(bench)).toEqual({ kind: 'confirmed' });
    expect(clock.now() - before).toBeLessThan(0.2);
    expect(world.load.input).toBe('off');
    expect(await makeSourceSafe(bench)).toMatchObject({
      kind: 'unconfirmed',
      why: expect.stringMatching(/did not answer/) as string,
      advice: sourceMayStillBeOn,
    });
    expect(sourceMayStillBeOn).not.toBe(loadMayStillBeOn);
  });

  it('and one that says it is on all the same is not believed to be off', async () => {
    const { bench } = await atWork({
      source: { operations: { ...fromDriver, 'make-safe': [{ text: '*CLS' }] } },
    });
    expect(await makeSourceSafe(bench)).toMatchObject({
      kind: 'unconfirmed',
      why: 'the source at simulated:dc-source was made safe and says that its output is on',
    });
  });

  it('where there is one', async () => {
    const bench = await (await nursery()).open();
    expect(await makeSourceSafe(bench)).toBeUndefined();
  });
});

describe('the source of a bench that is not open is made safe', () => {
  it('over a line of its own: what makes it safe is told before anything is asked', async () => {
    const { description, drivers, clock, simulation } = await nursery({ file });
    simulation.world.setSource({ output: 'on', setVoltage: 24, setCurrent: 4 }, 0);
    const sent: string[] = [];
    const safe = await makeSourceSafeUnopened({
      bench: description,
      drivers,
      clock,
      connect: (_address, driver, post) =>
        Promise.resolve(heard(simulation.connect(post, driver), (text) => sent.push(text))),
    });
    expect(safe).toEqual({ safety: { kind: 'confirmed' }, address: 'simulated:dc-source' });
    expect(sent.slice(0, 3)).toEqual(['', 'OUTP OFF', '*IDN?']);
    expect(simulation.world.sourceAt(clock.now()).output).toBe('off');
  });

  it('and where nobody answers that is said, with its address', async () => {
    const { description, drivers, clock } = await nursery({ file });
    const parts = { bench: description, drivers, clock };
    expect(
      await makeSourceSafeUnopened({ ...parts, connect: () => Promise.reject(new Error('nobody there')) }),
    ).toMatchObject({
      safety: { kind: 'unconfirmed', why: 'nobody there', advice: sourceMayStillBeOn },
      address: 'simulated:',
    });
  });

  it('where there is one', async () => {
    const { description, drivers, clock } = await nursery();
    const connect = () => Promise.reject(new Error('nothing is asked for'));
    expect(await makeSourceSafeUnopened({ bench: description, drivers, clock, connect })).toBeUndefined();
  });
});

/** The same line, and each message that is sent over it told. */
function heard(line: Connection, tell: (text: string) => void): Connection {
  return {
    address: line.address,
    receive: (within) => line.receive(within),
    close: () => line.close(),
    write: (bytes) => {
      tell(Buffer.from(bytes).toString().trimEnd());
      return line.write(bytes);
    },
  };
}
