import { describe, expect, it } from 'vitest';
import type { ModuleLimit } from '../../src/files/simulation-section.js';
import { trueValues } from '../../src/simulation/true-values.js';
import { hiccup, k1, simulationOf, wireUp } from './bench-parts.js';

const limits: readonly ModuleLimit[] = [
  hiccup,
  { style: 'constant-current', current: 5.3 },
  { style: 'foldback', current: 5.3, shortCircuit: 1.2 },
  { style: 'constant-power', current: 5.3 },
  { style: 'latch-off', current: 5.3 },
];

describe('the true values', () => {
  it.each(limits.flatMap((limit) => [0.05, 0.5].map((sag) => [limit.style, sag, limit] as const)))(
    'of a %s module: a hair below its dropout current at a sag of %d it holds, a hair above it does not',
    async (_, sag, limit) => {
      const module = k1(limit);
      const truth = trueValues({ leads: 0.035 }, module).dropoutCurrent(sag);
      const bench = wireUp(simulationOf(module));
      await bench.tell(`CURR ${(truth - 0.0001).toFixed(5)};INP ON`);
      // A deep sag on a constant-power module ends in its shutdown, which comes first.
      expect(await bench.readVoltage()).toBeGreaterThan(15.21 * (1 - Math.min(sag, 0.4)) - 1e-4);
      await bench.tell(`CURR ${(truth + 0.0001).toFixed(5)}`);
      expect(await bench.readVoltage()).toBeLessThan(15.21 * (1 - sag));
    },
  );

  it('follow the warming', () => {
    const thermal = { riseAtRated: 35, timeConstant: 720, ambient: 23, limitPerKelvin: -0.002 };
    const warm = trueValues({ leads: 0.035 }, k1(hiccup, { thermal, unsteadyAbove: 5.1 }), 10);
    expect(warm.dropoutCurrent(0.05)).toBeCloseTo(5.3 * 0.98, 9);
    expect(warm.unsteadyAboveCurrent).toBeCloseTo(5.1 * 0.98, 9);
    expect(warm.leadResistance).toBe(0.035);
    // As the square of the current: (2/3.975)² of the rise at three quarters of the limit.
    expect(warm.settledRise(2)).toBeCloseTo(35 * (2 / 3.975) ** 2, 9);
  });
});
