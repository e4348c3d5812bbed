import { describe, expect, it } from 'vitest';
import { makePlan, type Plan } from '../../src/run/plan.js';
import { stepKinds } from '../../src/steps/index.js';
import { nursery, type NurseryChange } from '../bench/nursery-bench.js';
import { groupBench } from '../bench/group-bench.js';
import { k1 } from '../steps/one-step.js';
import { procedureOf } from './rehearsal.js';

interface PlanChange extends NurseryChange {
  readonly rated?: { readonly voltage: number; readonly current: number };
}

async function planOf(steps: readonly string[], change: PlanChange = {}): Promise<Plan> {
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
    expect(plan.underTest).toMatchObject({
      circuit: 'single',
      name: 'K1',
      rated: { voltage: 15, current: 4 },
    });
  });

  it('never goes beyond the limits of its procedure, and says whose they are', async () => {
    const limits = '{ voltage: 110 % of rated-voltage, current: 110 % of rated-current, power: 70 W }';
    const { description, drivers } = await nursery();
    const planned = (to: string): Plan =>
      makePlan(
        procedureOf([`load-ramp: { to: ${to} }`], '[]', '[]', limits),
        [k1],
        description,
        drivers,
        stepKinds,
      );
    const { ceilings } = planned('110 % of rated-current');
    expect(ceilings.voltage).toEqual({ value: 16.5, setBy: 'the procedure' });
    expect(ceilings.current).toEqual({ value: 1.1 * 4, setBy: 'the procedure' });
    expect(() => planned('4.5 A')).toThrow('load-ramp.to: 4.5 A is more than the procedure allows (4.4 A)');
  });

  it('may refer to what a step before has measured, whose size is not known yet', async () => {
    await expect(
      planOf(['dropout-search: { ceiling: 8 A }', 'load-ramp: { to: 300 % of dropout-current }']),
    ).resolves.toBeDefined();
  });

  it('may stay at one current', async () => {
    await expect(planOf(['load-ramp: { from: 2 A, to: 2 A }'])).resolves.toBeDefined();
  });

  it('is for one module: others are refused by name, and other names in the simulation are not', async () => {
    const { description, drivers } = await nursery({ module: { name: 'brick' } });
    const plan = (...others: string[]): Plan =>
      makePlan(
        procedureOf(['open-circuit: { for: 1 s }']),
        [k1, ...others.map((name) => ({ ...k1, name }))],
        description,
        drivers,
        stepKinds,
      );
    expect(plan().underTest.name).toBe('K1');
    expect(() => plan('K2')).toThrow('the procedure tests one module, K1; K2 was given too');
    expect(() => plan('K2', 'K3')).toThrow(
      expect.objectContaining({
        code: 'PLAN',
        exitCode: 65,
        message: 'the procedure tests one module, K1; K2, K3 were given too',
      }),
    );
  });

  it('may go right up to what the bench allows', async () => {
    await expect(planOf(['load-ramp: { to: 8 A }'])).resolves.toBeDefined();
  });
});

describe('the time that a plan takes', () => {
  const steps = ['sharing-log: { to: 4 A, points: 10, dwell: 1 s, readings: 5 }'];
  const timeFor = async (measuredBy: 'scanner' | 'operator'): Promise<number> => {
    const { description, drivers } = await groupBench({ measuredBy });
    const procedure = { ...procedureOf(steps), circuit: 'parallel' } as const;
    const [k2, k3] = ['K2', 'K3'].map((name) => ({ ...k1, name }));
    if (k2 === undefined || k3 === undefined) throw new Error('three modules');
    return makePlan(procedure, [k1, k2, k3], description, drivers, stepKinds).duration;
  };

  it('holds the plugs that are pulled, and the probes that are moved through as many passes as places', async () => {
    const [atOnce, byHand] = [await timeFor('scanner'), await timeFor('operator')];
    // Ten points of 3.5 s; four proofs, three of them with two hands at a plug.
    expect(atOnce).toBeGreaterThan(35 + 3 * 2 * 10);
    expect(atOnce).toBeLessThan(200);
    expect(byHand).toBeGreaterThan(2 * atOnce - 100);
    expect(byHand).toBeGreaterThan(3 * 25 + 3 * 2 * 10 + 4 * 10);
  });
});

it('a stack is not begun by a procedure that never shows that its modules are isolated', async () => {
  const { description, drivers } = await groupBench({ circuit: 'series' });
  const plan = (...steps: string[]): Plan =>
    makePlan(
      { ...procedureOf(steps), circuit: 'series' },
      [k1, { ...k1, name: 'K2' }, { ...k1, name: 'K3' }],
      description,
      drivers,
      stepKinds,
    );
  const check = 'stack-check: { to: 2 A }';
  expect(() => plan('open-circuit: {}', check)).toThrow(
    'rehearsal.yaml:8:5: stack-check: there is no isolation-check before it, and it needs one',
  );
  expect(() => plan('isolation-check: {}', check)).not.toThrow();
});

describe('a plan is refused, at file, line and column, when', () => {
  it.each<[string, readonly string[], PlanChange, string]>([
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
      'a soak shall end at a temperature that nobody measures',
      ['soak: { current: 4 A, limit: 60 °C }'],
      {},
      'rehearsal.yaml:7:5: soak: needs a thermometer, and the bench has none',
    ],
    [
      'a share comes to more than the load is rated for',
      ['dropout-search: { ceiling: 200 % of rated-current }'],
      { load: { ratings: { current: 6 } } },
      "rehearsal.yaml:7:5: dropout-search.ceiling: 8 A is more than the load's rating less 5 % allows (5.7 A)",
    ],
    [
      'it comes to more power than the load is rated for',
      ['load-ramp: { to: 8 A }'],
      { load: { ratings: { power: 100 } } },
      "rehearsal.yaml:7:5: load-ramp.to: 8 A at 15 V and 3 % is 123.6 W, more than the load's rating allows (100 W)",
    ],
    [
      'a share comes to a crooked number of amperes',
      ['load-ramp: { to: 240 % of rated-current }'],
      { rated: { voltage: 15, current: 3.7 } },
      'rehearsal.yaml:7:5: load-ramp.to: 8.88 A is more than the bench allows (8 A)',
    ],
    [
      'it comes to the power that the bench allows, which the module passes as it gives a little more',
      ['load-ramp: { to: 4 A }'],
      { limits: { power: 60 } },
      'rehearsal.yaml:7:5: load-ramp.to: 4 A at 15 V and 3 % is 61.80 W, more than the bench allows (60 W)',
    ],
    [
      'a search begins above its ceiling',
      ['dropout-search: { from: 5 A, ceiling: 100 % of rated-current }'],
      {},
      'rehearsal.yaml:7:5: dropout-search.from: 5 A is above ceiling, 4 A; it must be lower',
    ],
    [
      'a search begins at its ceiling',
      ['dropout-search: { ceiling: 100 % of rated-current }'],
      {},
      'rehearsal.yaml:7:5: dropout-search.from: 4 A is the same as ceiling, 4 A; it must be lower',
    ],
    [
      'a ramp falls',
      ['load-ramp: { from: 2 A, to: 1 A }'],
      {},
      'rehearsal.yaml:7:5: load-ramp.from: 2 A is above to, 1 A; it must be no higher',
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
      advice:
        'nothing was switched on; mend the procedure, the bench or the module file, and look again with --dry-run',
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
