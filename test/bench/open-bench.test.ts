import { describe, expect, it } from 'vitest';
import { expression } from '../../src/files/expression.js';
import { openBench } from '../../src/bench/open-bench.js';
import { toyDriver, toyLoad } from '../instrument/fixtures/toy-load.js';
import { VirtualLine } from '../instrument/fixtures/virtual-line.js';
import { nursery } from './nursery-bench.js';

describe('a bench that is opened', () => {
  it('has its instruments identified and nothing switched on', async () => {
    const { open, simulation } = await nursery();
    const bench = await open();
    expect(bench.instruments.map(({ post, instrument }) => [post, instrument.identity])).toEqual([
      ['load', 'railproof,simulated load,K-bench,1'],
      ['meter', 'railproof,simulated meter,K-bench,1'],
    ]);
    expect(simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
  });

  it('reads all there is to read at one moment, the current last', async () => {
    const bench = await (await nursery()).open();
    const heard: unknown[] = [];
    const taken = await bench.sample((one) => heard.push(one));
    expect(heard).toEqual(taken);
    expect(taken.map(({ of, what }) => `${of} ${what}`)).toEqual([
      'meter voltage',
      'load voltage',
      'load current',
    ]);
    expect(taken.map(({ measurement }) => measurement.kind)).toEqual(['value', 'value', 'value']);
  });

  it('closes what it had opened when the second instrument does not answer', async () => {
    const { open, lines } = await nursery({ simulation: { faults: [{ at: 0, what: 'meter-silent' }] } });
    await expect(open()).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT', exitCode: 69 });
    expect(lines).toHaveLength(2);
    for (const line of lines) await expect(line.write(Buffer.from('*IDN?\n'))).rejects.toThrow(/closed/);
  });

  it('gives its instruments their panels back when another does not answer', async () => {
    const { description, drivers, clock } = await nursery();
    const load = toyLoad();
    const opening = openBench({
      ...{ bench: description, clock, onInput: () => undefined, onNotice: () => undefined },
      drivers: { load: { ...toyDriver, local: [{ text: 'SYST:LOC' }] }, meter: drivers.meter },
      connect: (_address, _driver, role) =>
        Promise.resolve(new VirtualLine(clock, role === 'load' ? load.react : () => [])),
    });
    await expect(opening).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    expect(load.told.slice(-2)).toEqual(['INP?', 'SYST:LOC']);
  });

  it('says that the load is on when another instrument fails, and leaves it as it was found', async () => {
    const { open, lines, simulation } = await nursery({
      simulation: { faults: [{ at: 0, what: 'meter-silent' }] },
    });
    simulation.world.setLoad({ input: 'on', setCurrent: 4 }, 0);
    await expect(open()).rejects.toMatchObject({
      code: 'FOUND_ON',
      exitCode: 69,
      message: expect.stringMatching(
        /did not answer.*; and the input of the load at simulated:standard-load is on$/,
      ) as string,
      advice: expect.stringContaining('`railproof safe` switches it off') as string,
      cause: expect.objectContaining({ code: 'INSTRUMENT_SILENT' }) as Error,
    });
    expect(simulation.world.load.input).toBe('on');
    for (const line of lines) await expect(line.write(Buffer.from('*IDN?\n'))).rejects.toThrow(/closed/);
  });

  it('asks no further instrument who it is once the run is stopped, and closes what it had opened', async () => {
    const wish = new Error('stopped with Ctrl-C');
    const place = await nursery({ opening: AbortSignal.abort(wish) });
    await expect(place.open()).rejects.toBe(wish);
    expect(place.lines).toHaveLength(1);
    await expect(place.lines[0]?.write(Buffer.from('*IDN?\n'))).rejects.toThrow('closed here');
  });

  it('closes the only one it had opened when that is not what its driver is for', async () => {
    const { open, lines } = await nursery({ load: { identity: expression('^PUMP') } });
    await expect(open()).rejects.toMatchObject({ code: 'WRONG_INSTRUMENT' });
    expect(lines).toHaveLength(1);
    await expect(lines[0]?.write(Buffer.from('*IDN?\n'))).rejects.toThrow(/closed/);
  });

  it('hands its instruments back when it is closed, and closing never fails', async () => {
    const notices: string[] = [];
    const { open, lines } = await nursery({
      onNotice: (text) => notices.push(text),
      load: { release: [{ text: 'INP OFF' }] },
    });
    const bench = await open();
    await lines[1]?.close();
    await expect(bench.close()).resolves.toBeUndefined();
    for (const line of lines) await expect(line.write(Buffer.from('*IDN?\n'))).rejects.toThrow(/closed/);
    await expect(bench.close()).resolves.toBeUndefined();
    expect(notices).toEqual([]);
  });
});
