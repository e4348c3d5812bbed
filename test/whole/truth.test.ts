import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { trueValues } from '../../src/simulation/true-values.js';
import { sampleStandardDeviation } from '../../src/statistics/checked.js';
import { randomCase } from './random-case.js';
import { runQuietly } from './run-quietly.js';

/** All of the 200 that the promise is made for with RAILPROOF_SEEDS=200; fewer in the ordinary run. */
const seeds = Number(process.env['RAILPROOF_SEEDS'] ?? 40);
const resolution = 0.01;

interface Estimate {
  readonly seed: number;
  readonly estimate: number;
  readonly truth: number;
  readonly halfWidth: number;
}

const found = new Map<string, Estimate[]>();
const styles: { seed: number; found: unknown; truth: string }[] = [];

describe('the truth that went into a simulated module comes back', () => {
  let runs: string;

  beforeAll(async () => {
    runs = mkdtempSync(join(tmpdir(), 'railproof-truth-'));
    for (let seed = 1; seed <= seeds; seed += 1) {
      const { bench, module, truth } = randomCase(seed);
      const { findings } = await runQuietly('real-limit', bench, module, runs);
      const { openCircuitVoltage, droopResistance, dropoutCurrent, limitStyle } = trueValues(
        { leads: 0 },
        truth,
      );
      const truths = {
        'open-circuit-voltage': openCircuitVoltage,
        'droop-resistance': droopResistance,
        'dropout-current': dropoutCurrent(0.05),
      };
      for (const [name, value] of Object.entries(truths)) {
        const finding = findings.find((one) => one.name === name);
        const [low, high] = finding?.interval ?? [Number.NaN, Number.NaN];
        const list = found.get(name) ?? [];
        list.push({ seed, estimate: Number(finding?.value), truth: value, halfWidth: (high - low) / 2 });
        found.set(name, list);
      }
      styles.push({
        seed,
        found: findings.find((one) => one.name === 'limit-style')?.value,
        truth: limitStyle,
      });
    }
  }, 600_000);

  afterAll(() => {
    rmSync(runs, { recursive: true, force: true });
  });

  it.each(['open-circuit-voltage', 'droop-resistance', 'dropout-current'])(
    'the 95 %% interval of %s holds the truth in at least 90 %% of the runs',
    (name) => {
      const misses = estimates(name).filter(
        ({ estimate, truth, halfWidth }) => !(Math.abs(estimate - truth) <= halfWidth),
      );
      expect(misses.length / seeds, JSON.stringify(misses)).toBeLessThanOrEqual(0.1);
    },
  );

  it.each(['open-circuit-voltage', 'droop-resistance', 'dropout-current'])(
    'the interval of %s is no wider than three times what its scatter calls for',
    (name) => {
      // Errors differ in size from case to case, so each is compared in units of its own interval.
      const relative = estimates(name).map(
        ({ estimate, truth, halfWidth }) => (estimate - truth) / halfWidth,
      );
      const calledFor = 1.96 * sampleStandardDeviation(relative);
      expect(1 / calledFor).toBeLessThanOrEqual(3);
    },
  );

  it('the dropout current is within the resolution or half a percent, whichever is larger', () => {
    const far = estimates('dropout-current').filter(
      ({ estimate, truth }) => !(Math.abs(estimate - truth) <= Math.max(resolution, 0.005 * truth)),
    );
    expect(far).toEqual([]);
  });

  it('the limit style is the right one', () => {
    expect(styles.filter((one) => one.found !== one.truth)).toEqual([]);
  });
});

function estimates(name: string): readonly Estimate[] {
  return found.get(name) ?? [];
}
