import { describe, expect, it } from 'vitest';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { exactInstruments } from '../bench/nursery-bench.js';
import { stage, type Stage, type StageChange } from './one-step.js';

const exact: StageChange = {
  simulation: { instruments: exactInstruments },
  known: { 'open-circuit-voltage': 15.21 },
};

/** The voltages that were held, and the mean of the currents read there. */
function traceOf({ the }: Stage): readonly { readonly volts: number; readonly amps: number }[] {
  return the('point-began')
    .filter(({ phase }) => phase === 'trace')
    .map(({ point, set }) => {
      const currents = the('reading').filter((one) => one.point === point && one.what === 'current');
      const amps = currents.reduce((sum, { value }) => sum + (value ?? Number.NaN), 0) / currents.length;
      return { volts: set.voltage ?? Number.NaN, amps };
    });
}

/** A bench on which a step before has seen where the module drops out. */
async function searched(change: StageChange = exact): Promise<Stage> {
  const there = await stage(change);
  there.tried.dropped = 5.3;
  return there;
}

const atRest = { input: 'off', mode: 'current', setCurrent: 0 };

describe('the trace of a limit', () => {
  it('goes down evenly from just below open circuit to the least voltage of the load', async () => {
    const there = await searched({ ...exact, file: 'nursery-constant-current' });
    await there.perform('limit-trace', { points: 5 });
    const trace = traceOf(there);
    // The second is one between, to see how the current goes on.
    expect(trace.map(({ volts }) => volts)).toEqual(
      [14.9058, 14.7775, 11.4294, 7.9529, 4.4765, 1].map((volts) => expect.closeTo(volts, 2) as number),
    );
    expect(trace.at(-1)?.volts).toBe(1);
    for (const { amps } of trace) expect(amps).toBeCloseTo(5.28, 1);
    expect(there.simulation.world.load).toMatchObject(atRest);
  });

  it('does not lock a folding-back module up, which a constant-current load would', async () => {
    const there = await searched({ ...exact, file: 'nursery-foldback' });
    await there.perform('limit-trace', { points: 8 });
    const amps = traceOf(there).map((point) => point.amps);
    for (const [index, current] of amps.entries()) {
      if (index > 0) expect(current).toBeLessThan(amps[index - 1] ?? 0);
    }
    // On the line from 5.3 A at its knee to 1.2 A into a short, a little less for its warmth.
    expect(amps.at(-1)).toBeCloseTo(1.2 + ((5.3 - 1.2) * 1.05) / 15.11, 1);
    expect(there.the('recovery')).toEqual([]);
  });

  it('watches each point long enough to see a module try again', async () => {
    const there = await searched(exact);
    await there.perform('limit-trace', { points: 3 });
    for (const { point } of there.the('point-began').filter(({ phase }) => phase === 'trace')) {
      const currents = there
        .the('reading')
        .filter((one) => one.point === point && one.what === 'current')
        .map(({ value }) => value ?? 0);
      expect(Math.max(...currents)).toBeGreaterThan(5);
      expect(Math.min(...currents)).toBeLessThan(0.1);
    }
  });

  it('is no longer with a slow meter, only sparser', async () => {
    const there = await stage({
      ...exact,
      simulation: {
        instruments: { ...exactInstruments, meter: { errors: {}, readingTime: 0.4 } },
      },
    });
    await there.perform('limit-trace', { points: 2, readings: 2 });
    const [began] = there.the('point-began').filter(({ phase }) => phase === 'trace');
    const ended = there.the('point-ended').find(({ point }) => point === began?.point);
    expect((ended?.t ?? 0) - (began?.t ?? 0)).toBeLessThan(3);
  });

  it('lets the module rest between two points, and steps down without a pause where none is asked for', async () => {
    const resting = await searched({ ...exact, file: 'nursery-constant-current' });
    await resting.perform('limit-trace', { from: '14.9 V', to: '14.8 V', points: 3, watch: '0 s' });
    expect(resting.the('input').flatMap(({ state, confirmed }) => (confirmed ? [state] : []))).toEqual([
      'off',
      ...['on', 'off', 'on', 'off', 'on', 'off'],
      'off',
    ]);
    const hurrying = await searched({ ...exact, file: 'nursery-constant-current' });
    await hurrying.perform('limit-trace', {
      from: '14.9 V',
      to: '14.8 V',
      points: 3,
      watch: '0 s',
      rest: '0 s',
    });
    expect(hurrying.the('input').flatMap(({ state, confirmed }) => (confirmed ? [state] : []))).toEqual([
      'off',
      'on',
      'off',
    ]);
  });

  it('changes the mode, and the voltage from whatever it was, only with the input off', async () => {
    const seen: string[] = [];
    const there = await searched({ ...exact, file: 'nursery-constant-current' });
    there.simulation.world.onStep(() => {
      const { input, mode, setVoltage } = there.simulation.world.load;
      seen.push(`${input} ${mode} ${setVoltage > 0 ? 'some' : 'none'}`);
    });
    await there.perform('limit-trace', { from: '14.9 V', to: '14.8 V', points: 2, watch: '0 s' });
    expect(seen).not.toContain('on current none');
    expect(seen).not.toContain('on voltage none');
    expect(seen.filter((state, index) => state !== seen[index - 1])).toEqual([
      'off current none',
      'off voltage none',
      'off voltage some',
      'on voltage some',
      'off voltage some',
      'on voltage some',
      'off voltage some',
      'off current some',
    ]);
  });

  it('ends where a module latches off, once its input was cycled', async () => {
    const there = await stage({
      ...exact,
      file: 'nursery-latch-off',
      operator: (bench) => simulatedOperator(bench.simulation),
    });
    await there.perform('limit-trace', { points: 6 });
    expect(there.the('recovery').map(({ outcome }) => outcome)).toEqual([
      'stayed-off',
      'came-back-after-cycling',
    ]);
    expect(there.the('notice').at(-1)?.text).toBe('the module has latched off; the trace ends here');
    expect(traceOf(there).length).toBeLessThan(3);
    expect(there.simulation.world.load).toMatchObject(atRest);
  });

  it('ends before a constant-power module would give more than the bench allows', async () => {
    const there = await stage({ ...exact, file: 'nursery-constant-power' });
    await there.perform('limit-trace', { points: 20 });
    const amps = traceOf(there).map((point) => point.amps);
    expect(Math.max(...amps)).toBeGreaterThan(7);
    expect(Math.max(...amps)).toBeLessThan(8);
    expect(there.the('notice').at(-1)?.text).toMatch(
      /^at 9\.\d\d V the module would give about 8\.\d\d A, more than is allowed; the trace ends here$/,
    );
    expect(there.simulation.world.load).toMatchObject(atRest);
  });

  it('takes a point between where the current grew so steeply that the next could be too much', async () => {
    const there = await searched({ ...exact, file: 'nursery-constant-current' });
    await there.perform('limit-trace', { points: 2, watch: '0 s' });
    const volts = traceOf(there).map((point) => point.volts);
    expect(volts).toEqual([expect.closeTo(14.91, 2), expect.closeTo(14.78, 2), 1]);
    expect(there.the('notice')).toEqual([]);
  });

  it('ends before a module that nothing limits gives more than was allowed', async () => {
    const there = await stage({
      ...exact,
      module: { droopResistance: 0.25, limit: { style: 'hiccup', current: 20, period: 0.8 } },
    });
    await there.perform('limit-trace', { ceiling: '6 A' });
    const amps = traceOf(there).map((point) => point.amps);
    expect(Math.max(...amps)).toBeGreaterThan(5);
    expect(Math.max(...amps)).toBeLessThan(6);
    expect(there.the('notice').at(-1)?.text).toMatch(/more than is allowed; the trace ends here$/);
  });

  it('begins in small steps where nobody knows the limit, and never lets more flow than was allowed', async () => {
    for (const change of [
      { file: 'nursery-constant-current' },
      { module: { droopResistance: 0.02, limit: { style: 'hiccup', current: 20, period: 0.8 } } },
    ] as const) {
      const there = await stage({ ...exact, ...change });
      await there.perform('limit-trace', { ceiling: '5 A' });
      const trace = traceOf(there);
      expect(trace[0]?.volts).toBeCloseTo(15.134, 3);
      expect(Math.max(...trace.map(({ amps }) => amps))).toBeGreaterThan(4);
      expect(Math.max(...trace.map(({ amps }) => amps))).toBeLessThan(5);
      expect(there.the('notice').at(-1)?.text).toMatch(/more than is allowed; the trace ends here$/);
    }
  });

  it('ends before the power is more than the bench allows', async () => {
    const there = await stage({ ...exact, file: 'nursery-constant-current', limits: { power: 60 } });
    await there.perform('limit-trace');
    const watts = traceOf(there).map(({ volts, amps }) => volts * amps);
    expect(Math.max(...watts)).toBeGreaterThan(50);
    expect(Math.max(...watts)).toBeLessThan(60);
    expect(there.the('notice').at(-1)?.text).toMatch(/more than is allowed; the trace ends here$/);
    expect(there.simulation.world.load).toMatchObject(atRest);
  });

  it('is stopped by a guard, and leaves the load as it was', async () => {
    const there = await stage({ ...exact, file: 'nursery-constant-current', limits: { power: 60 } });
    // It dropped out early once, and does not any more.
    there.tried.dropped = 3;
    await expect(there.perform('limit-trace')).rejects.toMatchObject({ code: 'GUARD_TRIPPED' });
    expect(there.simulation.world.load).toMatchObject(atRest);
  });

  it('is left out for a module that gives no voltage', async () => {
    const there = await stage({
      ...exact,
      simulation: { faults: [{ at: 0, what: 'module-dead' }], instruments: exactInstruments },
    });
    await there.perform('limit-trace');
    expect(traceOf(there)).toEqual([]);
    expect(there.the('notice').map(({ text }) => text)).toEqual([
      'the module gives no voltage; this step is left out',
    ]);
  });

  it('refuses to go upwards', async () => {
    const there = await stage(exact);
    await expect(there.perform('limit-trace', { from: '5 V', to: '6 V' })).rejects.toMatchObject({
      code: 'TRACE_RISES',
      message: 'a limit-trace goes downwards, and was asked to go from 5.000 V to 6.000 V',
    });
    expect(there.the('input')).toEqual([]);
  });
});
