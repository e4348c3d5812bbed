import { describe, expect, it } from 'vitest';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { exactInstruments } from '../bench/nursery-bench.js';
import { stage, type StageChange } from './one-step.js';

const exact: StageChange = { simulation: { instruments: exactInstruments }, module: { noise: 0 } };
const search = { ceiling: '200 % of rated-current', resolution: '100 mA' };

describe('after an overload', () => {
  it('the time of a module that comes back lies between the last look without it and the first with it', async () => {
    const { perform, the } = await stage(exact);
    await perform('dropout-search', search);
    const [recovery] = the('recovery');
    expect(recovery).toMatchObject({ outcome: 'came-back' });
    // It tries once in 800 ms, and then needs some milliseconds to fill its capacitors.
    expect(recovery?.within).toBeGreaterThan(0);
    expect(recovery?.within).toBeLessThan(0.9);
    expect((recovery?.within ?? 0) - (recovery?.after ?? 0)).toBeLessThan(0.1);
    expect(recovery?.after).toBeGreaterThanOrEqual(0);
  });

  it('a module may take no longer than was allowed', async () => {
    const { perform, the } = await stage({ ...exact, file: 'nursery-latch-off' });
    await perform('dropout-search', { ...search, recovery: '1 s' });
    expect(the('recovery')).toMatchObject([{ outcome: 'stayed-off', after: 1, within: 1 }]);
    const off = the('input').find(({ state }) => state === 'off');
    expect((the('recovery')[0]?.t ?? 0) - (off?.t ?? 0)).toBeLessThan(1.3);
  });

  it('a module that stays off though its input was cycled ends the run', async () => {
    const { perform, the, simulation } = await stage({
      ...exact,
      simulation: { instruments: exactInstruments, faults: [{ at: 3, what: 'module-dead' }] },
      operator: (bench) => simulatedOperator(bench.simulation),
    });
    await expect(perform('dropout-search', search)).rejects.toMatchObject({
      code: 'MODULE_STAYS_OFF',
      exitCode: 3,
      message: 'the module stays off after an overload, even after its input was cycled',
    });
    expect(the('recovery').map(({ outcome }) => outcome)).toEqual(['stayed-off', 'stayed-off']);
    expect(the('prompt')).toHaveLength(1);
    expect(simulation.world.load.input).toBe('off');
  });

  it('someone who does not want to go on ends the run', async () => {
    const refusal = new Error('I am going home');
    const { perform } = await stage({
      ...exact,
      file: 'nursery-latch-off',
      operator: {
        present: true,
        acknowledge: () => Promise.resolve('operator'),
        ask: () => Promise.reject(refusal),
      },
    });
    await expect(perform('dropout-search', search)).rejects.toBe(refusal);
  });
});
