import { expect, it } from 'vitest';
import { planAsJson, planAsText } from '../../src/cli/plan-shown.js';
import { makePlan, type Plan } from '../../src/run/plan.js';
import { stepKinds } from '../../src/steps/index.js';
import { nursery } from '../bench/nursery-bench.js';
import { k1, k7 } from '../steps/one-step.js';
import { procedureOf } from '../run/rehearsal.js';

async function planOn(file: string, module = k1): Promise<Plan> {
  const { description, drivers } = await nursery({ file });
  return makePlan(procedureOf(['open-circuit: { for: 1 s }']), [module], description, drivers, stepKinds);
}

it('a plan says what the source feeds the module with, and that no more power than that is asked for', async () => {
  const plan = await planOn('nursery-source', k7);
  expect(planAsText(plan)).toContain(
    '\nnever above 8 A (the bench), 18.75 V (the nameplate), 96 W (the source)\n' +
      'fed by the source: 24 V, 4 A at most; off for 5 s to clear a latch\n',
  );
  expect(planAsJson(plan)).toMatchObject({ source: { voltage: 24, current: 4, offFor: 5 } });
});

it('and nothing of it where there is none', async () => {
  const plan = await planOn('nursery');
  expect(planAsText(plan)).not.toContain('source');
  expect(planAsJson(plan)).not.toHaveProperty('source');
});
