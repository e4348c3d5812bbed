import { expect, it } from 'vitest';
import { timedSideBySide } from './side-by-side.js';

it('times both in turns, who begins changing with each round', async () => {
  const turns: string[] = [];
  await timedSideBySide({
    ours: () => turns.push('ours'),
    rival: () => turns.push('rival'),
    rounds: 2,
    unmeasured: 1,
  });
  expect(turns).toEqual(['rival', 'ours', 'ours', 'rival', 'rival', 'ours']);
});

it('waits for what takes its time, and counts no turn that only warms up', async () => {
  let turn = 0;
  const slowAtFirst = () => new Promise((resolve) => setTimeout(resolve, (turn += 1) === 1 ? 400 : 20));
  const { ours, rival, ratio } = await timedSideBySide({ ours: slowAtFirst, rival: () => 0, rounds: 1 });
  expect(ours).toBeGreaterThan(0.015);
  expect(ours).toBeLessThan(0.39);
  expect(ratio).toBeCloseTo(ours / rival, 12);
});
