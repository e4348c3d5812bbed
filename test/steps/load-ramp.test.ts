import { describe, expect, it } from 'vitest';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { exactInstruments } from '../bench/nursery-bench.js';
import { stage } from './one-step.js';

describe('the load ramp', () => {
  it('takes its points evenly from the first to the last current, shares worked out', async () => {
    const { perform, the, simulation } = await stage();
    await perform('load-ramp', { to: '100 % of rated-current', points: 5, dwell: '100 ms', readings: 2 });
    expect(the('point-began').map(({ set, phase }) => [set.current, phase])).toEqual([
      [0, 'ramp'],
      [1, 'ramp'],
      [2, 'ramp'],
      [3, 'ramp'],
      [4, 'ramp'],
    ]);
    expect(the('point-ended').map(({ outcome }) => outcome)).toEqual(Array(5).fill('held'));
    expect(the('notice')).toEqual([]);
    expect(simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
  });

  it('goes back down through the same points where asked, the highest taken twice', async () => {
    const { perform, the, simulation } = await stage();
    await perform('load-ramp', { to: '4 A', points: 3, dwell: '100 ms', readings: 2, back: true });
    expect(the('point-began').map(({ set, phase }) => [phase, set.current])).toEqual([
      ['ramp', 0],
      ['ramp', 2],
      ['ramp', 4],
      ['down', 4],
      ['down', 2],
      ['down', 0],
    ]);
    expect(the('input').map(({ state, confirmed }) => [state, confirmed])).toEqual([
      ['on', false],
      ['on', true],
      ['off', true],
    ]);
    expect(simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
  });

  it('does not go back down where the module gave up', async () => {
    const { perform, the, tried } = await stage();
    await perform('load-ramp', { from: '5 A', to: '7 A', points: 3, readings: 2, back: true });
    expect(the('point-began').map(({ phase }) => phase)).not.toContain('down');
    expect(tried).toEqual({ held: 5, dropped: 6 });
  });

  it.each(['nursery', 'nursery-foldback', 'nursery-constant-current', 'nursery-latch-off'])(
    'ends where the module of the bench %s gives up, says so, and unloads it',
    async (file) => {
      const { perform, the, simulation } = await stage({
        file,
        simulation: { instruments: exactInstruments },
        operator: (bench) => simulatedOperator(bench.simulation),
      });
      await perform('load-ramp', { from: '4 A', to: '8 A', points: 9, dwell: '300 ms', readings: 3 });
      const [ramp, recovery] = [the('point-began').slice(0, 4), the('point-began').slice(4)];
      expect(ramp.map(({ set }) => set.current)).toEqual([4, 4.5, 5, 5.5]);
      expect(recovery.map(({ phase }) => phase)).toContain('recovery');
      expect(
        the('point-ended')
          .slice(0, 4)
          .map(({ outcome }) => outcome),
      ).toEqual(['held', 'held', 'held', 'dropped']);
      expect(the('recovery').at(-1)?.outcome).toMatch(/^came-back/);
      expect(the('notice').map(({ text }) => text)).toEqual([
        'the module did not hold this point; the ramp ends here',
      ]);
      // The dropout is not prolonged: one sample was enough.
      expect(the('reading').filter(({ point }) => point === 4)).toHaveLength(3);
      expect(the('input').map(({ state, confirmed }) => [state, confirmed])).toEqual([
        ['on', false],
        ['on', true],
        ['off', true],
      ]);
      expect(simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
    },
  );

  it('ends where the module has sagged as far as was allowed', async () => {
    const { perform, the } = await stage({
      simulation: { instruments: exactInstruments },
      module: { droopResistance: 0.3 },
      known: { 'open-circuit-voltage': 15.21 },
    });
    await perform('load-ramp', { to: '4 A', points: 9, readings: 2, sag: '5 %' });
    // 5 % of 15.21 V over 0.3 Ω is 2.5 A.
    const ramp = the('point-began').filter(({ phase }) => phase === 'ramp');
    expect(ramp.map(({ set }) => set.current)).toEqual([0, 0.5, 1, 1.5, 2, 2.5, 3]);
  });

  it('asks the load for no more power than the bench allows at the voltage that was measured', async () => {
    const { perform, the, simulation } = await stage({
      limits: { power: 60 },
      known: { 'open-circuit-voltage': 15.21, 'dropout-current': 5.3 },
    });
    await expect(
      perform('load-ramp', { from: '2 A', to: '80 % of dropout-current', points: 5, readings: 2 }),
    ).rejects.toMatchObject({
      code: 'BEYOND_CEILING',
      message: '4.240 A at 15.21 V, which is 64.49 W, was asked for and the bench allows 60 W',
    });
    expect(simulation.world.load.setCurrent).toBeCloseTo(3.68, 9);
    expect(the('point-ended').map(({ outcome }) => outcome)).toEqual(['held', 'held', 'held', 'held']);
  });

  it('ends exactly at its last current, so that rounding carries it over no limit', async () => {
    for (const to of [4.7, 5.1, 3.3]) {
      const { perform, the } = await stage({ limits: { current: to } });
      await perform('load-ramp', { from: '0.1 A', to: `${to} A`, points: 8, dwell: '0 s', readings: 2 });
      expect(the('point-began').at(-1)?.set.current).toBe(to);
    }
  });

  it('asks the load for no more than the bench allows, and stops the run at that', async () => {
    const { perform, the, simulation } = await stage({ limits: { current: 3 } });
    await expect(perform('load-ramp', { to: '4 A', points: 5, readings: 2 })).rejects.toMatchObject({
      code: 'BEYOND_CEILING',
    });
    expect(simulation.world.load.setCurrent).toBe(3);
    expect(the('point-ended')).toHaveLength(4);
  });
});
