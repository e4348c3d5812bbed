import { describe, expect, it } from 'vitest';
import { exactInstruments } from '../bench/nursery-bench.js';
import { stage } from './one-step.js';

describe('the open-circuit step', () => {
  it('reads the idle module, point after point, with the input off', async () => {
    const { perform, the, simulation, known } = await stage({
      simulation: { instruments: exactInstruments },
      module: { noise: 0 },
    });
    await perform('open-circuit', { for: '3 s' });
    expect(the('input').map(({ state, confirmed }) => [state, confirmed])).toEqual([['off', true]]);
    expect(the('point-began').length).toBeGreaterThan(3);
    expect(new Set(the('point-began').map(({ phase }) => phase))).toEqual(new Set(['idle']));
    expect(the('point-began').map(({ point }) => point)).toEqual(
      the('point-began').map((_, index) => index + 1),
    );
    expect(new Set(the('point-ended').map(({ outcome }) => outcome))).toEqual(new Set(['measured']));
    expect(known['open-circuit-voltage']).toBeCloseTo(15.21, 3);
    expect(simulation.world.load.input).toBe('off');
  });

  it('takes about as long as it was told', async () => {
    const { perform, clock } = await stage();
    const began = clock.now();
    await perform('open-circuit', { for: '20 s' });
    expect(clock.now() - began).toBeGreaterThanOrEqual(20);
    expect(clock.now() - began).toBeLessThan(22);
  });

  it('switches off a load that was left on', async () => {
    const { perform, bench, simulation, the } = await stage();
    await bench.load.setCurrent(1, 15);
    await bench.load.inputOn();
    await perform('open-circuit', { for: '1 s' });
    expect(simulation.world.load.input).toBe('off');
    expect(the('input').map(({ state, confirmed }) => [state, confirmed])).toEqual([
      ['on', false],
      ['on', true],
      ['off', true],
    ]);
  });

  it('stops the run where the meter gives no value three times in a row, each of them in the record', async () => {
    // SCPI-99: 9.91E37 is not a number.
    const { perform, known, the } = await stage({ meterReads: '9.91E37' });
    await expect(perform('open-circuit', { for: '1 s' })).rejects.toMatchObject({
      code: 'GUARD_TRIPPED',
      guard: 'no-reading',
    });
    const readings = the('reading').filter(({ of }) => of === 'meter');
    expect(readings).toHaveLength(3);
    expect(readings.every(({ value, problem }) => value === null && problem === 'not-a-number')).toBe(true);
    expect(known).not.toHaveProperty('open-circuit-voltage');
  });
});
