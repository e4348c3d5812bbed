import { expect, it } from 'vitest';
import { stage } from './one-step.js';

it('the wait step lets the time pass and touches nothing', async () => {
  const { perform, clock, events, shown } = await stage();
  const began = clock.now();
  await perform('wait', { for: '90 min' });
  expect(clock.now() - began).toBeCloseTo(5400, 9);
  expect(events).toEqual([]);
  expect(shown).toEqual([{ note: 'waiting' }]);
});

it('the wait step ends at once when the run is stopped', async () => {
  const { perform, clock } = await stage({ signal: AbortSignal.abort(new Error('stopped')) });
  const began = clock.now();
  await expect(perform('wait', { for: '90 min' })).rejects.toThrow('stopped');
  expect(clock.now()).toBe(began);
});
