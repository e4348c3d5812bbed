import { describe, expect, it } from 'vitest';
import type { Tap, Taken } from '../../src/bench/sample.js';
import { ask } from '../simulation/bench-parts.js';
import { groupBench, type GroupChange, module } from './group-bench.js';

const tapsIn = (circuit: 'parallel' | 'series'): readonly Tap[] =>
  ['K1', 'K2', 'K3'].map((name, index) => ({
    place: index + 1,
    at: `${circuit === 'parallel' ? 'ballast' : 'output'}-of-${name}`,
  }));

/** The group with 6 A drawn from it, and a way to sample every place of it. */
async function loaded(change: GroupChange = {}, amps = 6) {
  const place = await groupBench(change);
  const bench = await place.open();
  await bench.load.prepare();
  await bench.load.setCurrent(amps, 13);
  await bench.load.inputOn();
  await place.clock.sleep(1);
  const taps = tapsIn(change.circuit ?? 'parallel');
  const read = async (): Promise<Map<string, number>> =>
    valuesIn(await bench.sample(() => undefined, { taps }));
  return { ...place, bench, taps, read };
}

function valuesIn(taken: readonly Taken[]): Map<string, number> {
  return new Map(
    taken.map(({ of, at, what, measurement }) => [
      at ?? `${of} ${what}`,
      measurement.kind === 'value' ? measurement.value : Number.NaN,
    ]),
  );
}

/** Two at 12.34 V and one at 12.28 V, each through 18 mΩ + 50 mΩ; by Kirchhoff's laws. */
const bus = (12.34 + 12.34 + 12.28) / 3 - (6 * 0.068) / 3;
const currents = [12.34, 12.34, 12.28].map((volts) => (volts - bus) / 0.068);

describe('the places of a group', () => {
  it.each(['scanner', 'meters'] as const)(
    'are read with %s, plus when current flows out',
    async (measuredBy) => {
      const { read } = await loaded({ measuredBy });
      const taken = await read();
      expect([...taken.keys()]).toEqual([
        ...['meter voltage', 'ballast-of-K1', 'ballast-of-K2', 'ballast-of-K3'],
        ...['load voltage', 'load current'],
      ]);
      expect(taken.get('meter voltage')).toBeCloseTo(bus, 3);
      for (const [index, amps] of currents.entries()) {
        expect(taken.get(`ballast-of-K${index + 1}`)).toBeCloseTo(0.05 * amps, 4);
      }
    },
  );

  it('are told apart from which instrument read them', async () => {
    const { bench, taps } = await loaded({ measuredBy: 'meters' });
    const taken = await bench.sample(() => undefined, { taps });
    expect(taken.map(({ of }) => of)).toEqual(['meter', 'meter-1', 'meter-2', 'meter-3', 'load', 'load']);
  });

  it('are not within reach where an operator moves the meter: then it is read where it was put', async () => {
    const { bench, read, simulation } = await loaded({ measuredBy: 'operator' });
    expect([...(await read()).keys()]).toEqual(['meter voltage', 'load voltage', 'load current']);
    await simulation.operator.act('probe ballast of K3');
    bench.places.movedTo('ballast-of-K3');
    const taken = await read();
    expect([...taken.keys()]).toEqual(['ballast-of-K3', 'load voltage', 'load current']);
    expect(taken.get('ballast-of-K3')).toBeCloseTo(0.05 * (currents[2] ?? NaN), 4);
    await simulation.operator.act('probe the output');
    bench.places.movedTo(undefined);
    expect((await read()).get('meter voltage')).toBeCloseTo(bus, 3);
  });

  it('of a stack are the outputs of its modules', async () => {
    const { read } = await loaded({ circuit: 'series' }, 2);
    const taken = await read();
    expect(taken.get('output-of-K1')).toBeCloseTo(12.34 - 2 * 0.018, 4);
    expect(taken.get('output-of-K3')).toBeCloseTo(12.28 - 2 * 0.018, 4);
    expect(taken.get('meter voltage')).toBeCloseTo(12.34 + 12.34 + 12.28 - 3 * 2 * 0.068, 3);
  });
});

describe('a scanner', () => {
  it('has its relay settled before the meter is read', async () => {
    const settling = 0.5;
    const { read, clock } = await loaded({ drivers: { scanner: { settling } } });
    const before = clock.now();
    await read();
    expect(clock.now() - before).toBeGreaterThan(4 * settling);
  });

  it('has all its channels open when the bench is closed', async () => {
    const { bench, line, read } = await loaded();
    await read();
    await bench.close();
    expect(await ask(line('scanner'), 'ROUT:CLOS:STAT?')).toBe('(@)');
  });

  it('whose relay is stuck is noticed and named before the meter is read at the wrong place', async () => {
    const { read } = await loaded({ faults: [{ at: 0, what: 'scanner-stuck' }] });
    await expect(read()).rejects.toMatchObject({
      code: 'WRONG_PLACE',
      exitCode: 3,
      what: 'scanner-stuck',
      channel: 101,
      closed: 110,
      message:
        'the scanner at simulated:routed-scanner was told to close channel 101 and says that channel 110 is',
    });
  });

  it('that says what it was told, and sticks at a ballast, is noticed by what the load has', async () => {
    const { read, clock } = await loaded({ faults: [{ at: 3, what: 'scanner-stuck-unnoticed' }] });
    await read();
    await clock.sleep(3);
    await expect(read()).rejects.toMatchObject({
      code: 'WRONG_PLACE',
      exitCode: 3,
      what: 'probes-elsewhere',
      message: expect.stringMatching(
        /^the meter reads \d+\.\d+ mV where the load has 1[12]\.\d+ V at its /,
      ) as string,
    });
  });

  it('that says what it was told, and sticks at the output, reads that for all', async () => {
    const { read } = await loaded({ faults: [{ at: 0, what: 'scanner-stuck-unnoticed' }] });
    const taken = await read();
    expect(taken.get('ballast-of-K1')).toBeCloseTo(bus, 3);
    expect(taken.get('ballast-of-K3')).toBeCloseTo(bus, 3);
  });

  it('that falls silent, or is gone, stops what is being done', async () => {
    const silent = await loaded({ faults: [{ at: 0.9, what: 'scanner-silent' }] });
    await expect(silent.read()).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT', exitCode: 69 });
    const lost = await loaded({ faults: [{ at: 0.9, what: 'scanner-lost' }] });
    await expect(lost.read()).rejects.toMatchObject({ code: 'CONNECTION_LOST', exitCode: 69 });
  });
});

describe('a meter', () => {
  it('in the wrong mode is noticed and named where it has no value', async () => {
    const { read } = await loaded({
      measuredBy: 'operator',
      faults: [{ at: 0.9, what: 'meter-wrong-mode' }],
    });
    await expect(read()).rejects.toMatchObject({
      code: 'WRONG_PLACE',
      exitCode: 3,
      what: 'meter-in-wrong-mode',
      message: 'the meter at simulated:configured-meter says that it does not measure dc voltage',
    });
  });

  it('that has no value and can not be asked why has no value', async () => {
    const readings = {
      voltage: { kind: 'number', ask: [{ text: 'READ?' }], dimension: 'voltage', factor: 1 },
    } as const;
    const { read } = await loaded({
      measuredBy: 'operator',
      faults: [{ at: 0.9, what: 'meter-wrong-mode' }],
      drivers: { meter: { readings } },
    });
    expect((await read()).get('meter voltage')).toBeNaN();
  });

  it('whose probes are swapped at one place reads below zero there, and nowhere else', async () => {
    const faults = [{ at: 0, what: 'probes-reversed', of: 'K2' }] as const;
    for (const measuredBy of ['scanner', 'meters'] as const) {
      const taken = await (await loaded({ measuredBy, faults })).read();
      expect(taken.get('ballast-of-K1')).toBeCloseTo(0.05 * (currents[0] ?? NaN), 4);
      expect(taken.get('ballast-of-K2')).toBeCloseTo(-0.05 * (currents[1] ?? NaN), 4);
    }
  });

  it('of one place with a broken lead reads about nothing, and the others read on', async () => {
    const { read } = await loaded({
      measuredBy: 'meters',
      faults: [{ at: 0, what: 'lead-broken', of: 'K2' }],
    });
    const taken = await read();
    expect(Math.abs(taken.get('ballast-of-K2') ?? NaN)).toBeLessThan(0.02);
    expect(taken.get('ballast-of-K1')).toBeCloseTo(0.05 * (currents[0] ?? NaN), 4);
    expect(taken.get('meter voltage')).toBeCloseTo(bus, 3);
  });
});

describe('a ballast', () => {
  it('of another value than the bench file says shows in what is read across it', async () => {
    const modules = [module('K1', 12.34), module('K2', 12.34, { ballast: 0.1 }), module('K3', 12.34)];
    const taken = await (await loaded({ modules })).read();
    const [k1 = NaN, k2 = NaN] = [taken.get('ballast-of-K1'), taken.get('ballast-of-K2')];
    // The one behind 100 mΩ gives 68/118 of the others' current, across twice their resistance.
    expect(k2 / k1).toBeCloseTo((2 * 68) / 118, 3);
  });
});

describe('a thermometer', () => {
  it('is read when it is wanted', async () => {
    const { bench } = await loaded();
    const taken = await bench.sample(() => undefined, { temperature: true });
    expect(taken.find(({ of }) => of === 'thermometer')).toEqual({
      of: 'thermometer',
      what: 'temperature',
      measurement: { kind: 'value', value: 23 },
    });
    const without = await bench.sample(() => undefined);
    expect(without.map(({ of }) => of)).not.toContain('thermometer');
  });
});
