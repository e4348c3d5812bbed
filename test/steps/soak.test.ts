import { describe, expect, it } from 'vitest';
import { stage, type StageChange, type Stage } from './one-step.js';

const bench: StageChange = { file: 'nursery-soak', known: { 'open-circuit-voltage': 15.21 } };

const looksOf = ({ the }: Stage) => the('point-began').filter(({ phase }) => phase === 'soak');

function temperaturesOf({ the }: Stage): readonly number[] {
  return the('reading').flatMap(({ of, value }) => (of === 'thermometer' && value !== null ? [value] : []));
}

describe('a soak', () => {
  it('holds a current until the temperature has settled, with a look each time', async () => {
    const there = await stage(bench);
    await there.perform('soak', { current: '100 % of rated-current', every: '20 s' });
    const looks = looksOf(there);
    expect(new Set(looks.map(({ set }) => set.current))).toEqual(new Set([4]));
    for (const [index, { t }] of looks.entries()) {
      if (index > 0) expect(t - (looks[index - 1]?.t ?? 0)).toBeCloseTo(20, 6);
    }
    expect(temperaturesOf(there).at(-1)).toBeGreaterThan(56);
    expect(there.the('notice').map(({ text }) => text)).toEqual([
      expect.stringMatching(/^settled after 5\d\.\d min$/) as string,
    ]);
    expect(there.the('input').map(({ state, confirmed }) => [state, confirmed])).toEqual([
      ['off', true],
      ['on', false],
      ['on', true],
      ['off', true],
    ]);
    expect(there.simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
    expect(there.tried).toEqual({ held: 4 });
  });

  it('looks at the cold module first, with the input off', async () => {
    const there = await stage(bench);
    await there.perform('soak', { current: '4 A', for: '10 s', every: '5 s' });
    const [first] = looksOf(there);
    const cold = there.the('point-began').filter(({ phase, t }) => phase === 'idle' && t < (first?.t ?? 0));
    const read = there
      .the('reading')
      .filter(({ of, point }) => of === 'thermometer' && cold.some((one) => one.point === point));
    expect(read.length).toBeGreaterThanOrEqual(10);
    for (const { value } of read) expect(Math.abs((value ?? 0) - 23)).toBeLessThan(2);
  });

  it('ends when its time is up, and says that it had not settled', async () => {
    const there = await stage(bench);
    await there.perform('soak', { current: '4 A', for: '5 min' });
    expect(looksOf(there)).toHaveLength(30);
    expect(there.the('notice').map(({ text }) => text)).toEqual([
      'not settled after 4.85 min; the soak ends here',
    ]);
  });

  it('ends at its limit of temperature, with the load off: a finding and no failure', async () => {
    const there = await stage(bench);
    await there.perform('soak', { current: '4 A', limit: '40 °C' });
    expect(there.the('notice')[0]?.text).toMatch(
      /^after .* min the module reads 40\.\d °C, above its limit of 40 °C; the soak ends here$/,
    );
    expect(there.simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
  });

  it('is stopped by the guard of the bench where it has no limit of its own', async () => {
    const there = await stage({ ...bench, limits: { temperature: 40 } });
    await expect(there.perform('soak', { current: '4 A' })).rejects.toMatchObject({
      code: 'GUARD_TRIPPED',
      guard: 'over-temperature',
    });
  });

  it('settles by the voltage where nothing measures the temperature', async () => {
    const there = await stage({ ...bench, file: 'nursery' });
    await there.perform('soak', { current: '4 A', over: '2 min' });
    expect(temperaturesOf(there)).toEqual([]);
    expect(there.the('notice')[0]?.text).toMatch(/^settled after 2\.\d\d min$/);
  });

  it('does not go on where the temperature can not be read any more', async () => {
    const there = await stage({
      ...bench,
      thermometerReads: (count) => (count < 40 ? '31.2' : '9.91E37'),
    });
    await expect(there.perform('soak', { current: '4 A', limit: '60 °C' })).rejects.toMatchObject({
      code: 'GUARD_TRIPPED',
      guard: 'no-reading',
      message: '3 times in a row the temperature could not be read',
    });
    expect(temperaturesOf(there).length).toBeGreaterThan(5);
  });

  it('ends where the limit comes down on the current as the module warms, and the module comes back', async () => {
    const there = await stage(bench);
    await there.perform('soak', { current: '5.1 A' });
    const outcomes = looksOf(there).map(
      ({ point }) => there.the('point-ended').find((one) => one.point === point)?.outcome,
    );
    expect(outcomes.at(0)).toBe('held');
    expect(outcomes.at(-1)).toBe('dropped');
    expect(outcomes.filter((outcome) => outcome === 'dropped')).toHaveLength(1);
    expect(there.the('recovery').map(({ outcome }) => outcome)).toEqual(['came-back']);
    expect(there.the('notice')[0]?.text).toMatch(/the module did not hold the current any more/);
    expect(there.tried).toEqual({ dropped: 5.1 });
    expect(there.simulation.world.load).toMatchObject({ input: 'off', setCurrent: 0 });
  });

  it('shows how warm it is and how long it has been, and keeps showing that time passes', async () => {
    const there = await stage(bench);
    await there.perform('soak', { current: '4 A', for: '3 min', every: '30 s' });
    expect(there.shown.some(({ temperature }) => (temperature ?? 0) > 23)).toBe(true);
    const notes = there.shown.flatMap(({ note }) => (note === undefined ? [] : [note]));
    expect(notes).toContain('soaking for 2 min of 3 min at most');
    expect(notes.length).toBeGreaterThan(100);
  });

  it('of a day asks for a look each ten seconds and no more', async () => {
    const there = await stage(bench);
    await there.perform('soak', {
      current: '4 A',
      for: '24 h',
      'settled-within': '0.001 K',
      over: '10 min',
      readings: 2,
    });
    expect(looksOf(there).length).toBeLessThanOrEqual(8640);
    expect(there.the('reading').length).toBeLessThan(8640 * 2 * 4.1);
  }, 60_000);
});
