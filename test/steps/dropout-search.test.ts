import { describe, expect, it } from 'vitest';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { exactInstruments } from '../bench/nursery-bench.js';
import { stage, type StageChange } from './one-step.js';
import { dropoutsOf, type Probe, probesOf } from './probes-of.js';

const toTwice = { ceiling: '200 % of rated-current' };

/** Nothing warms and nothing swings, and the instruments are exact: the limit is where it is. */
const plain: StageChange = {
  simulation: { instruments: exactInstruments },
  module: { noise: 0, thermal: { riseAtRated: 0, timeConstant: 720, ambient: 23, limitPerKelvin: 0 } },
};
const withOperator: Pick<StageChange, 'operator'> = {
  operator: ({ simulation }) => simulatedOperator(simulation),
};

describe('the search for the dropout', () => {
  it('ends with what held and what dropped no further apart than the resolution', async () => {
    const bench = await stage(plain);
    await bench.perform('dropout-search', { ...toTwice, resolution: '10 mA' });
    const probes = probesOf(bench).filter(({ set }) => set !== undefined);
    const held = Math.max(...probes.filter(({ outcome }) => outcome === 'held').map(({ set }) => set ?? 0));
    const dropped = Math.min(...dropoutsOf(probes).map(({ set }) => set ?? Infinity));
    expect(dropped - held).toBeGreaterThan(0);
    expect(dropped - held).toBeLessThanOrEqual(0.01 + 1e-9);
    expect(held).toBeLessThan(5.3 + 1e-6);
    expect(dropped).toBeGreaterThan(5.3 - 1e-6);
    expect(bench.known['dropout-current']).toBeCloseTo((held + dropped) / 2, 9);
  });

  it('watches the first overload for as long as it was told, and only the first', async () => {
    for (const readingTime of [0.02, 0.5]) {
      const { meter, load } = exactInstruments;
      const instruments = {
        load: load ?? { errors: {} },
        meter: { errors: meter?.errors ?? {}, readingTime },
      };
      const bench = await stage({ ...plain, simulation: { instruments } });
      await bench.perform('dropout-search', { ...toTwice, watch: '2 s' });
      const overloads = bench.the('point-began').filter(({ phase }) => phase === 'overload');
      expect(overloads).toHaveLength(1);
      const [began] = overloads;
      const unloaded = bench.the('input').find(({ state, t }) => state === 'off' && t > (began?.t ?? 0));
      const lasted = (unloaded?.t ?? 0) - (began?.t ?? 0);
      expect(lasted).toBeGreaterThanOrEqual(2);
      expect(lasted).toBeLessThan(2.05);
    }
  });

  it('looks at an overload three times at least, as fewer tell nothing, and then ends it', async () => {
    const { meter, load } = exactInstruments;
    const instruments = {
      load: load ?? { errors: {} },
      meter: { errors: meter?.errors ?? {}, readingTime: 1 },
    };
    const bench = await stage({ ...plain, simulation: { instruments } });
    await bench.perform('dropout-search', { ...toTwice, watch: '2 s' });
    const began = bench.the('point-began').find(({ phase }) => phase === 'overload');
    expect(bench.the('reading').filter(({ point }) => point === began?.point)).toHaveLength(9);
  });

  it('does not watch an overload when told not to', async () => {
    const bench = await stage(plain);
    await bench.perform('dropout-search', { ...toTwice, watch: '0 s' });
    expect(bench.the('point-began').filter(({ phase }) => phase === 'overload')).toEqual([]);
    expect(bench.known['dropout-current']).toBeCloseTo(5.3, 1);
  });

  it('takes the load off after every dropout, waits for the module and proves the good current again', async () => {
    const bench = await stage({ ...plain, ...withOperator });
    await bench.perform('dropout-search', toTwice);
    const story = bench.events
      .filter(({ event }) => ['point-ended', 'input', 'recovery'].includes(event))
      .map((event) => {
        if (event.event === 'input') return `input ${event.state}${event.confirmed ? '' : ' told'}`;
        if (event.event === 'recovery') return event.outcome;
        const point = 'point' in event ? event.point : 0;
        const began = bench.the('point-began').find((one) => one.point === point);
        const outcome = event.event === 'point-ended' ? event.outcome : '';
        return `${began?.phase ?? ''} ${outcome}`;
      });
    const dropouts = story.flatMap((entry, index) => (/^(climb|halve) dropped$/.test(entry) ? [index] : []));
    expect(dropouts.length).toBeGreaterThan(0);
    for (const index of dropouts) {
      const after = story.slice(index + 1).filter((entry) => !entry.startsWith('overload'));
      expect(after.slice(0, 6)).toEqual([
        'input off',
        'recovery held',
        'came-back',
        'input on told',
        'input on',
        'return held',
      ]);
    }
  });

  it('begins every probe at a current that was proved to be good', async () => {
    const bench = await stage(plain);
    await bench.perform('dropout-search', toTwice);
    const probes = probesOf(bench).filter(({ set, phase }) => set !== undefined && phase !== 'overload');
    let held = 0;
    let before: Probe | undefined;
    for (const probe of probes) {
      // From one probe to the next the load is never at a current that had dropped.
      if (before?.outcome === 'dropped') expect(probe).toMatchObject({ phase: 'return', set: held });
      if (probe.outcome === 'held') held = Math.max(held, probe.set ?? 0);
      before = probe;
    }
    expect(bench.simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
  });

  it('goes up to its ceiling and no further where the module holds it', async () => {
    const bench = await stage(plain);
    await bench.perform('dropout-search', { ceiling: '5 A' });
    const probes = probesOf(bench);
    expect(dropoutsOf(probes)).toEqual([]);
    expect(Math.max(...probes.map(({ set }) => set ?? 0))).toBe(5);
    expect(probes.map(({ phase }) => phase)).toEqual(['start', ...Array<string>(10).fill('climb')]);
    expect(bench.known).not.toHaveProperty('dropout-current');
    expect(bench.simulation.world.load.input).toBe('off');
  });

  it("goes up to the bench's own limit without the load's protection being taken for a dropout", async () => {
    const gain = { gain: 0.004, offset: 0.005, resolution: 0 };
    const { load, meter } = exactInstruments;
    const bench = await stage({
      ...plain,
      limits: { current: 5 },
      simulation: {
        instruments: {
          load: { errors: { ...load?.errors, 'set-current': gain } },
          meter: meter ?? { errors: {} },
        },
      },
    });
    await bench.perform('dropout-search', { ceiling: '5 A' });
    expect(dropoutsOf(probesOf(bench))).toEqual([]);
  });

  it('begins no higher than its ceiling', async () => {
    const bench = await stage(plain);
    await bench.perform('dropout-search', { from: '4 A', ceiling: '3 A' });
    expect(probesOf(bench)).toEqual([{ phase: 'start', set: 3, outcome: 'held' }]);
  });

  it('finds the dropout of a module that does not even hold where it begins', async () => {
    const bench = await stage({
      ...plain,
      module: { ...plain.module, limit: { style: 'constant-current', current: 2.5 } },
    });
    await bench.perform('dropout-search', toTwice);
    expect(probesOf(bench)[0]).toEqual({ phase: 'start', set: 4, outcome: 'dropped' });
    expect(Math.abs((bench.known['dropout-current'] ?? 0) - 2.5)).toBeLessThanOrEqual(0.01);
  });

  it('asks for the input to be cycled when the module has latched off, and goes on', async () => {
    const bench = await stage({ file: 'nursery-latch-off', ...plain, ...withOperator });
    await bench.perform('dropout-search', toTwice);
    expect(bench.the('prompt').length).toBeGreaterThan(0);
    expect(new Set(bench.the('prompt').map(({ act }) => act))).toEqual(new Set(['cycle input']));
    expect(bench.the('answer').map(({ name, answer }) => [name, answer])).toEqual(
      bench.the('prompt').map(() => ['cycle-input', 'done']),
    );
    const outcomes = bench.the('recovery').map(({ outcome }) => outcome);
    expect(new Set(outcomes)).toEqual(new Set(['stayed-off', 'came-back-after-cycling']));
    expect(Math.abs((bench.known['dropout-current'] ?? 0) - 5.3)).toBeLessThanOrEqual(0.01);
  });

  it('gives up on a module that has latched off when nobody is there, says so, and leaves the load off', async () => {
    const bench = await stage({ file: 'nursery-latch-off', ...plain });
    await bench.perform('dropout-search', toTwice);
    expect(bench.the('prompt')).toEqual([]);
    expect(bench.the('recovery')).toMatchObject([{ outcome: 'stayed-off', after: 10, within: 10 }]);
    expect(bench.the('notice').map(({ text }) => text)).toEqual([
      'the module has latched off and nobody is here to cycle its input',
    ]);
    expect(dropoutsOf(probesOf(bench))).toHaveLength(1);
    expect(bench.simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
  });

  it('closes in on where the module begins to swing, without one more dropout', async () => {
    const steady = await stage(plain);
    await steady.perform('dropout-search', toTwice);
    const swinging = await stage({ ...plain, module: { ...plain.module, unsteadyAbove: 4.95 } });
    await swinging.perform('dropout-search', toTwice);
    const looks = probesOf(swinging).filter(({ phase }) => phase === 'steadiness');
    expect(looks.length).toBeGreaterThan(0);
    expect(looks.every(({ outcome }) => outcome === 'held')).toBe(true);
    expect(Math.min(...looks.map(({ set }) => Math.abs((set ?? 0) - 4.95)))).toBeLessThanOrEqual(0.02);
    expect(dropoutsOf(probesOf(swinging)).length).toBe(dropoutsOf(probesOf(steady)).length);
  });

  it('follows a limit that comes down as the module warms', async () => {
    const bench = await stage({
      ...plain,
      module: {
        noise: 0,
        thermal: { riseAtRated: 35, timeConstant: 20, ambient: 23, limitPerKelvin: -0.002 },
      },
    });
    await bench.perform('dropout-search', toTwice);
    const found = bench.known['dropout-current'] ?? 0;
    expect(found).toBeGreaterThan(4.6);
    expect(found).toBeLessThan(5.3);
    expect(bench.the('point-began').length).toBeLessThan(100);
    expect(bench.simulation.world.load.input).toBe('off');
  });

  it('is left at once when the run is stopped in the middle of it', async () => {
    const stop = new AbortController();
    const bench = await stage({
      ...plain,
      signal: stop.signal,
      onEvent: ({ event }) => {
        if (event === 'recovery') stop.abort(new Error('stopped'));
      },
    });
    await expect(bench.perform('dropout-search', toTwice)).rejects.toThrow('stopped');
    expect(bench.the('recovery')).toHaveLength(1);
    expect(bench.the('point-began').at(-1)).toMatchObject({ phase: 'recovery' });
  });
});
