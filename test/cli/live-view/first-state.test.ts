import { describe, expect, it } from 'vitest';
import { firstState } from '../../../src/cli/live-view/first-state.js';
import { loadPlan } from '../../../src/cli/load-plan.js';

const began = new Date('2026-12-02T09:15:00Z');
const loaded = await loadPlan({
  procedure: 'real-limit',
  bench: 'fixtures/benches/nursery.yaml',
  modules: ['fixtures/modules/K1.yaml'],
});

describe('a page that is opened before anything was done', () => {
  const state = firstState(loaded, { began });

  it('shows what is to be done, on what, and how long that takes', () => {
    expect(state.run).toMatchObject({
      title: 'What one module really delivers',
      procedure: 'real-limit',
      module: 'K1',
      rated: { voltage: 15, current: 4 },
      bench: 'nursery bench',
      simulated: true,
      began: '2026-12-02T09:15:00.000Z',
      done: 0,
    });
    expect(state.run.steps.map(({ kind }) => kind)).toEqual([
      ...['open-circuit', 'load-ramp', 'dropout-search', 'limit-trace', 'recovery-check'],
    ]);
    const planned = state.run.steps.reduce((sum, { duration }) => sum + duration, 0);
    expect(state).toMatchObject({ step: 0, elapsed: 0, ended: undefined, input: undefined });
    expect(state.remaining).toBeCloseTo(planned);
  });

  it('shows the wiring and the cautions, in the order in which they will be asked, each waiting', () => {
    expect(state.cautions.map(({ name, by }) => [name, by])).toEqual(
      ['wiring', ...loaded.plan.cautions].map((name) => [name, undefined]),
    );
    expect(state.cautions[0]?.text.split('\n')).toEqual(loaded.plan.procedure.wiring);
    for (const { text } of state.cautions) expect(text).toMatch(/\S/);
  });
});
