import { describe, expect, it } from 'vitest';
import { exactInstruments } from '../bench/nursery-bench.js';
import { stage } from './one-step.js';

const twoPoints = { from: '1 A', to: '2 A', points: 2, dwell: '100 ms', readings: 3 };

describe('a point', () => {
  it('is journalled as set, read and ended, every reading by instrument, in the order it happened', async () => {
    const { perform, events } = await stage();
    await perform('load-ramp', { ...twoPoints, readings: 2 });
    const point = (number: number, current: number) => [
      { event: 'point-began', step: 1, point: number, phase: 'ramp', set: { current } },
      ...[1, 2].flatMap((sample) =>
        [
          { of: 'meter', what: 'voltage' },
          { of: 'load', what: 'voltage' },
          { of: 'load', what: 'current' },
        ].map((which) => ({ event: 'reading', step: 1, point: number, sample, ...which })),
      ),
      { event: 'point-ended', step: 1, point: number, outcome: 'held' },
    ];
    expect(events).toMatchObject([
      { event: 'input', state: 'on', confirmed: false },
      { event: 'input', state: 'on', confirmed: true },
      ...point(1, 1),
      ...point(2, 2),
      { event: 'input', state: 'off', confirmed: true },
    ]);
    const times = events.map(({ t }) => t);
    expect(times).toEqual(times.toSorted((one, other) => one - other));
  });

  it('is read only once it has settled: the dwell, or what an instrument needs where that is longer', async () => {
    for (const [settling, least] of [
      [0, 0.1],
      [0.7, 0.7],
    ] as const) {
      const { perform, the } = await stage({ meter: { settling } });
      await perform('load-ramp', twoPoints);
      const [began] = the('point-began');
      const [first] = the('reading');
      expect((first?.t ?? 0) - (began?.t ?? 0)).toBeGreaterThanOrEqual(least);
    }
  });

  it('that is beyond a guard is in the record before the run stops', async () => {
    const { perform, events } = await stage({
      limits: { voltage: 15 },
      module: { noise: 0 },
      simulation: { instruments: exactInstruments },
    });
    await expect(perform('open-circuit')).rejects.toMatchObject({
      code: 'GUARD_TRIPPED',
      guard: 'over-voltage',
    });
    expect(events.at(-1)).toMatchObject({ event: 'reading', of: 'load', what: 'current' });
    expect(events.find((event) => event.event === 'reading')).toMatchObject({ of: 'meter', value: 15.21 });
  });

  it('that shows an overload is in the record as no value before the run stops', async () => {
    const { perform, the } = await stage({ meterReads: '9.9E37' });
    await expect(perform('open-circuit')).rejects.toMatchObject({
      guard: 'over-voltage',
      message: 'the meter shows overload instead of a voltage',
    });
    expect(the('reading').at(0)).toMatchObject({ of: 'meter', value: null, problem: 'overload' });
  });

  it('is not taken for a dropout where one reading gave no value, and is read until one does', async () => {
    // SCPI-99: 9.91E37 is not a number.
    const { perform, the } = await stage({
      meterReads: (count) => (count === 1 || count === 3 ? '9.91E37' : '15.2'),
    });
    await perform('load-ramp', twoPoints);
    expect(the('point-ended').map(({ outcome }) => outcome)).toEqual(['held', 'held']);
    const samples = the('reading').filter(({ what, point }) => what === 'current' && point === 1);
    expect(samples.map(({ sample }) => sample)).toEqual([1, 2, 3, 4]);
  });

  it.each(['load-ramp', 'dropout-search'])(
    'stops the run, and drops nothing, where a %s sees nothing any more',
    async (step) => {
      const { perform, the } = await stage({ meterReads: (count) => (count > 8 ? '9.91E37' : '15.2') });
      const parameters = step === 'load-ramp' ? { ...twoPoints, points: 20 } : { ceiling: '5 A' };
      await expect(perform(step, parameters)).rejects.toMatchObject({
        code: 'GUARD_TRIPPED',
        guard: 'no-reading',
        message: '3 times in a row the voltage could not be read',
      });
      expect(the('point-ended').map(({ outcome }) => outcome)).not.toContain('dropped');
      expect(the('reading').filter(({ of }) => of === 'meter')).toHaveLength(11);
    },
  );

  it('shows whoever watches what was set and what flows', async () => {
    const { perform, shown } = await stage();
    await perform('load-ramp', twoPoints);
    expect(shown).toHaveLength(6);
    expect(shown[0]?.setCurrent).toBe(1);
    expect(shown[0]?.voltage).toBeCloseTo(15.19, 1);
    expect(shown[0]?.current).toBeCloseTo(1, 1);
  });

  it("takes the module's voltage from the load and the leads where no meter is at the module", async () => {
    const place = { voltageFrom: 'load-terminals' } as const;
    const { perform, shown, the } = await stage({
      bench: place,
      module: { noise: 0 },
      simulation: { instruments: exactInstruments },
    });
    await perform('load-ramp', { ...twoPoints, from: '4 A', to: '4 A' });
    const terminals = the('reading').find(({ of, what }) => of === 'load' && what === 'voltage');
    // 15.21 V - 18 mΩ x 4 A at the module, 35 mΩ x 4 A less at the terminals.
    expect(terminals?.value).toBeCloseTo(14.998, 3);
    expect(shown[0]?.voltage).toBeCloseTo(15.138, 3);
  });

  it('is left at once when the run is stopped, between two questions', async () => {
    const stop = new AbortController();
    const reason = new Error('the gardener needs the bench');
    const { perform, the, clock } = await stage({
      signal: stop.signal,
      onEvent: (event) => {
        if (event.event === 'reading' && event.sample === 2 && event.what === 'current') stop.abort(reason);
      },
    });
    const running = perform('load-ramp', { ...twoPoints, dwell: '60 s', readings: 1000 });
    await expect(running).rejects.toBe(reason);
    expect(the('reading')).toHaveLength(6);
    expect(clock.now()).toBeLessThan(61);
  });

  it('is not even begun when the run was stopped before', async () => {
    const { perform, the } = await stage({ signal: AbortSignal.abort(new Error('stopped')) });
    await expect(perform('load-ramp', twoPoints)).rejects.toThrow('stopped');
    expect(the('point-began')).toEqual([]);
  });
});
