import { describe, expect, it } from 'vitest';
import { mostCycles } from '../../src/steps/clear-latch.js';
import { exactInstruments } from '../bench/nursery-bench.js';
import { type Stage, stage, type StageChange } from './one-step.js';

const fed: StageChange = {
  file: 'nursery-source',
  simulation: { instruments: exactInstruments },
  module: { noise: 0 },
};
const search = { from: '2.5 A', ceiling: '5 A', resolution: '10 mA' };

/** The source's output at the moment of each event, as it really was. */
async function watched(change: StageChange = fed) {
  const seen: { readonly event: string; readonly output: string; readonly fed: boolean }[] = [];
  const there: Stage = await stage({
    ...change,
    onEvent: ({ event, t }) => {
      const { world, began } = there.simulation;
      const [now] = world.look([t - began]);
      seen.push({ event, output: world.sourceAt(t - began).output, fed: now?.phase !== 'off' });
    },
  });
  return { ...there, seen };
}

describe('a module that latches off, and that a source feeds', () => {
  it('is found and closed in on with nobody there, and the truth lies in the bracket', async () => {
    const { perform, the, simulation } = await watched();
    await perform('dropout-search', search);
    const ended = new Map(the('point-ended').map(({ point, outcome }) => [point, outcome]));
    const probes = the('point-began').filter(({ phase }) =>
      ['start', 'climb', 'halve', 'return'].includes(phase),
    );
    const at = (outcome: string): number[] =>
      probes.filter(({ point }) => ended.get(point) === outcome).map(({ set }) => set.current ?? 0);
    const held = Math.max(...at('held'));
    const dropped = Math.min(...at('dropped'));
    expect(dropped - held).toBeLessThanOrEqual(0.0101);
    // Warm by a kelvin or two, it drops out a little below its 3.4 A.
    expect(dropped).toBeGreaterThan(3.38);
    expect(held).toBeLessThan(3.4);
    expect(the('prompt')).toEqual([]);
    expect(simulation.world.load.input).toBe('off');
  });

  it('is told of as one that stays off until its input is cycled, each time', async () => {
    const { perform, the } = await watched();
    await perform('dropout-search', search);
    const outcomes = the('recovery').map(({ outcome }) => outcome);
    expect(outcomes.length).toBeGreaterThan(2);
    expect(outcomes).toEqual(
      outcomes.map((_, index) => (index % 2 === 0 ? 'stayed-off' : 'came-back-after-cycling')),
    );
    const cycles = the('notice').filter(({ text }) => text.includes('takes its input away'));
    expect(cycles).toHaveLength(outcomes.length / 2);
    expect(cycles[0]?.text).toBe(
      'the module has latched off; the source at simulated:dc-source takes its input away for 5 s (1 of at most 12 times in this step)',
    );
  });

  it('is read only while it is fed: what it gives in between is no measurement', async () => {
    const { perform, seen } = await watched();
    await perform('dropout-search', search);
    const readings = seen.filter(({ event }) => event === 'reading');
    expect(readings.length).toBeGreaterThan(100);
    expect(readings.every(({ output, fed }) => output === 'on' && fed)).toBe(true);
  });

  it('has its input taken away only while the load is off', async () => {
    const there = await stage(fed);
    const together: string[] = [];
    there.simulation.world.onStep((before) => {
      const { world, began } = there.simulation;
      const { output } = world.sourceAt(there.clock.now() - began);
      if (output === 'off' && (world.load.input === 'on' || before.current > 0))
        together.push(world.load.input);
    });
    await there.perform('dropout-search', search);
    expect(there.the('recovery').length).toBeGreaterThan(0);
    expect(together).toEqual([]);
  });

  it('is not cycled without end: a step that has done so often enough goes no further', async () => {
    const { perform, the } = await watched({
      ...fed,
      // Its limit comes down with each probe, so that the search never closes.
      module: {
        noise: 0,
        ratedCurrent: 1,
        thermal: { riseAtRated: 100, timeConstant: 20, ambient: 23, limitPerKelvin: -0.005 },
      },
    });
    await perform('dropout-search', { ...search, resolution: '1 mA', recovery: '200 ms', watch: '0 s' });
    const cycled = the('recovery').filter(({ outcome }) => outcome === 'came-back-after-cycling');
    expect(cycled).toHaveLength(mostCycles);
    expect(the('recovery').at(-1)?.outcome).toBe('stayed-off');
    expect(the('notice').at(-1)?.text).toBe(
      'the module has latched off; its input was cycled 12 times in this step, and is not cycled again',
    );
  });

  it('and that an earlier step has left latched is brought back before a step that needs its voltage', async () => {
    const { perform, the, bench, clock } = await watched({
      ...fed,
      known: { 'open-circuit-voltage': 15.08 },
    });
    await bench.load.setCurrent(5, 15);
    await bench.load.inputOn();
    await bench.load.inputOff();
    await clock.sleep(1);
    await perform('recovery-check', { overload: '4 A', times: 1, recovery: '1 s' });
    expect(the('notice').map(({ text }) => text)).toEqual([
      expect.stringMatching(/takes its input away for 5 s \(1 of/) as string,
      expect.stringMatching(/takes its input away for 5 s \(2 of/) as string,
    ]);
    expect(the('recovery').map(({ outcome }) => outcome)).toEqual(['stayed-off', 'came-back-after-cycling']);
  });

  it('ends the trace of its limit and the check of its recovery, as it does by hand', async () => {
    for (const [kind, given] of [
      ['limit-trace', { points: 6, ceiling: '5 A' }],
      ['recovery-check', { overload: '4 A' }],
    ] as const) {
      const { perform, the, simulation } = await watched({
        ...fed,
        known: { 'open-circuit-voltage': 15.08 },
      });
      await perform(kind, given);
      expect(the('recovery').map(({ outcome }) => outcome)).toEqual([
        'stayed-off',
        'came-back-after-cycling',
      ]);
      expect(simulation.world.load.input).toBe('off');
    }
  });

  it('and that stays off though its input was cycled ends the run', async () => {
    const { perform, the } = await watched({
      ...fed,
      simulation: { instruments: exactInstruments, faults: [{ at: 8, what: 'module-dead' }] },
    });
    await expect(perform('dropout-search', { ...search, from: '1 A' })).rejects.toMatchObject({
      code: 'MODULE_STAYS_OFF',
      message: 'the module stays off after an overload, even after its input was cycled',
    });
    expect(the('recovery').map(({ outcome }) => outcome)).toEqual(['stayed-off', 'stayed-off']);
  });
});

describe('what a module does while its source does not feed it is not made anything of', () => {
  it.each([
    ['loses its power', { at: 6, what: 'source-restarted', for: 0.5 }],
    ['loses its power while nobody asks', { at: 4.5, what: 'source-restarted', for: 0.01 }],
  ] as const)('when it %s', async (_, fault) => {
    const { perform, the, bench } = await watched({
      ...fed,
      simulation: { instruments: exactInstruments, faults: [fault] },
    });
    await expect(perform('dropout-search', { ...search, from: '1 A', climb: 40 })).rejects.toMatchObject({
      code: 'SOURCE_WENT_OFF',
      exitCode: 3,
    });
    expect(the('point-ended').filter(({ outcome }) => outcome === 'dropped')).toEqual([]);
    expect(the('recovery')).toEqual([]);
    expect(await bench.source?.isOn()).toBe(false);
  });

  it('when it comes to its own limit first', async () => {
    const { perform, the } = await watched({
      ...fed,
      module: { noise: 0, limit: { style: 'constant-current', current: 6.2 } },
    });
    await expect(perform('load-ramp', { from: '1 A', to: '5.9 A', points: 8 })).rejects.toMatchObject({
      code: 'SOURCE_SAGS',
    });
    // 24 V and 4 A, less what is lost in the module, come to some 5.4 A at 15 V.
    const reached = the('point-ended').filter(({ outcome }) => outcome === 'held');
    expect(reached).toHaveLength(7);
    expect(the('point-ended').filter(({ outcome }) => outcome === 'dropped')).toEqual([]);
  });
});
