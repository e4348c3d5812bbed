import { describe, expect, it } from 'vitest';
import { makePlan, type Plan } from '../../src/run/plan.js';
import { stepKinds } from '../../src/steps/index.js';
import { nursery, type NurseryChange } from '../bench/nursery-bench.js';
import { k1 } from '../steps/one-step.js';
import { procedureOf } from './rehearsal.js';

async function planOf(
  steps: readonly string[],
  change: NurseryChange & { readonly rated?: { readonly voltage: number; readonly current: number } } = {},
): Promise<Plan> {
  const { description, drivers } = await nursery(change);
  const module = { ...k1, rated: change.rated ?? k1.rated };
  return makePlan(procedureOf(steps), [module], description, drivers, stepKinds);
}

describe('a plan', () => {
  it('says what will be done, for how long, and what may never be exceeded', async () => {
    const plan = await planOf([
      'open-circuit: { for: 5 s }',
      'load-ramp: { to: 100 % of rated-current, points: 21, dwell: 500 ms, readings: 5 }',
    ]);
    expect(plan.steps.map(({ summary }) => summary)).toEqual([
      'reads the idle module for 5 s',
      '21 points from 0 A to 100 % of rated-current',
    ]);
    expect(plan.duration).toBeCloseTo(5 + 21 * (0.5 + 5 * 0.1), 9);
    expect(plan.ceilings.current).toEqual({ value: 8, setBy: 'the bench' });
    expect(plan.known).toEqual({ 'rated-voltage': 15, 'rated-current': 4 });
    expect(plan.module).toBe(plan.modules[0]);
  });

  it('may refer to what a step before has measured, whose size is not known yet', async () => {
    await expect(
      planOf(['dropout-search: { ceiling: 8 A }', 'load-ramp: { to: 300 % of dropout-current }']),
    ).resolves.toBeDefined();
  });

  it('may go right up to what the bench allows', async () => {
    await expect(planOf(['load-ramp: { to: 8 A }'])).resolves.toBeDefined();
  });
});

describe('a plan is refused, at file, line and column, when', () => {
  it.each<[string, readonly string[], NurseryChange, string]>([
    [
      'it refers to something that no step before measures',
      ['load-ramp: { to: 80 % of dropout-current }', 'dropout-search: { ceiling: 8 A }'],
      {},
      'rehearsal.yaml:7:5: load-ramp.to: refers to dropout-current, which no step before this one measures',
    ],
    [
      'it goes beyond the current that the bench allows',
      ['open-circuit: { for: 1 s }', 'load-ramp: { to: 9 A }'],
      {},
      'rehearsal.yaml:8:5: load-ramp.to: 9 A is more than the bench allows (8 A)',
    ],
    [
      'a share comes to more than the load is rated for',
      ['dropout-search: { ceiling: 200 % of rated-current }'],
      { load: { ratings: { current: 6 } } },
      "rehearsal.yaml:7:5: dropout-search.ceiling: 8 A is more than the load's rating allows (6 A)",
    ],
    [
      'it comes to more power than the load is rated for',
      ['load-ramp: { to: 8 A }'],
      { load: { ratings: { power: 100 } } },
      "rehearsal.yaml:7:5: load-ramp.to: 8 A at 15 V is 120 W, more than the load's rating allows (100 W)",
    ],
    [
      'the module itself is beyond the bench',
      ['open-circuit: { for: 1 s }'],
      { limits: { voltage: 12 } },
      'K1 is rated 15 V and the bench allows 12 V',
    ],
  ])('%s', async (_, steps, change, message) => {
    await expect(planOf(steps, change)).rejects.toMatchObject({
      code: 'PLAN',
      exitCode: 65,
      advice: 'nothing was switched on',
      message,
    });
  });

  it('with every problem there is, one a line', async () => {
    await expect(
      planOf(
        [
          'load-ramp: { from: 9 A, to: 10 A }',
          'load-ramp: { to: 50 % of dropout-current }',
          'dropout-search: { ceiling: 20 A }',
        ],
        { limits: { voltage: 12 } },
      ),
    ).rejects.toMatchObject({
      problems: [
        'K1 is rated 15 V and the bench allows 12 V',
        'rehearsal.yaml:7:5: load-ramp.from: 9 A is more than the bench allows (8 A)',
        'rehearsal.yaml:7:5: load-ramp.to: 10 A is more than the bench allows (8 A)',
        'rehearsal.yaml:8:5: load-ramp.to: refers to dropout-current, which no step before this one measures',
        'rehearsal.yaml:9:5: dropout-search.ceiling: 20 A is more than the bench allows (8 A)',
      ],
    });
  });
});
