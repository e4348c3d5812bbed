import { describe, expect, it } from 'vitest';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { trueValues } from '../../src/simulation/true-values.js';
import { exactInstruments } from '../bench/nursery-bench.js';
import { randomCase } from '../whole/random-case.js';
import { stage } from './one-step.js';
import { dropoutsOf, probesOf } from './probes-of.js';

describe('over twenty modules of 4 A, for 10 mA', () => {
  it(
    'the search is within the resolution, with a median of at most 30 points and 6 dropouts',
    { timeout: 60_000 },
    async () => {
      const points: number[] = [];
      const dropouts: number[] = [];
      for (let seed = 1; seed <= 20; seed += 1) {
        const { truth } = randomCase(seed);
        const limit = { ...truth.limit, current: 4.2 + 0.175 * seed };
        const bench = await stage({
          operator: ({ simulation }) => simulatedOperator(simulation),
          limits: { current: 9, power: 190 },
          module: { limit, noise: truth.noise, unsteadyAbove: 0.97 * limit.current },
          simulation: { seed, instruments: exactInstruments },
        });
        await bench.perform('open-circuit', { for: '1 s' });
        const before = probesOf(bench).length;
        await bench.perform('dropout-search', { ceiling: '200 % of rated-current' });
        const probes = probesOf(bench).slice(before);
        points.push(probes.length);
        dropouts.push(dropoutsOf(probes).length);
        const [module] = bench.description.simulation?.modules ?? [];
        if (module === undefined) throw new Error('there is no module');
        const dropout = trueValues({ leads: 0 }, module).dropoutCurrent(0.05);
        const found = bench.known['dropout-current'];
        if (found === undefined) expect(dropout).toBeGreaterThan(7.9);
        else expect(Math.abs(found - dropout)).toBeLessThanOrEqual(Math.max(0.01, 0.005 * dropout));
      }
      const medianOf = (values: number[]): number =>
        values.sort((one, other) => one - other)[Math.floor(values.length / 2)] ?? Number.NaN;
      expect(medianOf(points)).toBeLessThanOrEqual(30);
      expect(medianOf(dropouts)).toBeLessThanOrEqual(6);
      expect(points.at(-1)).toBeLessThanOrEqual(40);
      expect(dropouts.at(-1)).toBeLessThanOrEqual(8);
    },
  );
});
