import { describe, expect, it } from 'vitest';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { exactInstruments } from '../bench/nursery-bench.js';
import { stage, type StageChange } from './one-step.js';

const exact: StageChange = {
  simulation: { instruments: exactInstruments },
  known: { 'open-circuit-voltage': 15.21 },
};

describe('the check of the recovery', () => {
  it('overloads as often as asked, and times each return', async () => {
    const { perform, the, simulation, tried } = await stage(exact);
    await perform('recovery-check', { overload: '6 A', times: 4 });
    const overloads = the('point-began').filter(({ phase }) => phase === 'overload');
    expect(overloads.map(({ set }) => set.current)).toEqual([6, 6, 6, 6]);
    expect(the('recovery').map(({ outcome }) => outcome)).toEqual(Array(4).fill('came-back'));
    expect(tried).toEqual({ dropped: 6 });
    expect(simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
  });

  it('ends the overloads at different moments of a module that tries again, so that their spread shows', async () => {
    const { perform, the } = await stage({ ...exact, module: { noise: 0 } });
    // A multiple of its period: all alike if each were as long as the other.
    await perform('recovery-check', { overload: '6 A', for: '1.6 s', times: 8 });
    const times = the('recovery').map(({ within }) => within);
    expect(Math.max(...times) - Math.min(...times)).toBeGreaterThan(0.3);
    expect(Math.max(...times)).toBeLessThan(0.9);
  });

  it.each([
    ['its dropout current', { 'dropout-current': 5 }, 6.5],
    ['its rated current', {}, 5.2],
    ['what the bench allows, where that is less', { 'dropout-current': 7 }, 8],
  ])('takes 130 %% of %s when not told', async (_, known, expected) => {
    const { perform, the } = await stage({ ...exact, known: { ...exact.known, ...known } });
    await perform('recovery-check', { times: 1 });
    const [overload] = the('point-began').filter(({ phase }) => phase === 'overload');
    expect(overload?.set.current).toBeCloseTo(expected, 9);
  });

  it('says that there was no overload where the module held it', async () => {
    const { perform, the, tried, simulation } = await stage(exact);
    await perform('recovery-check', { overload: '4.5 A' });
    expect(the('notice').map(({ text }) => text)).toEqual([
      'no overload was reached: the module held 4.50 A; there is nothing to recover from',
    ]);
    expect(the('recovery')).toEqual([]);
    expect(tried).toEqual({ held: 4.5 });
    expect(simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
  });

  it('has the input of a module that latches cycled once, and leaves it at that', async () => {
    const { perform, the } = await stage({
      ...exact,
      file: 'nursery-latch-off',
      operator: (bench) => simulatedOperator(bench.simulation),
    });
    await perform('recovery-check', { overload: '6 A', times: 3 });
    expect(the('recovery').map(({ outcome }) => outcome)).toEqual(['stayed-off', 'came-back-after-cycling']);
    expect(the('prompt')).toHaveLength(1);
  });

  it('ends with a notice where nobody can cycle it, and a second check is left out', async () => {
    const { perform, the, simulation } = await stage({ ...exact, file: 'nursery-latch-off' });
    await perform('recovery-check', { overload: '6 A', recovery: '1 s' });
    await perform('recovery-check', { overload: '6 A' });
    expect(the('notice').map(({ text }) => text)).toEqual([
      'the module has latched off and nobody is here to cycle its input',
      'the module gives no voltage; this step is left out',
    ]);
    expect(simulation.world.load.input).toBe('off');
  });
});
