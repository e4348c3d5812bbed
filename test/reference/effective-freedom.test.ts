import { describe, expect, it } from 'vitest';

import gum from '../../fixtures/reference/jcgm-100-effective-freedom.json' with { type: 'json' };
import welch from '../../fixtures/reference/welch.json' with { type: 'json' };
import { mean, sampleStandardDeviation } from '../../src/statistics/checked.js';
import { effectiveDegreesOfFreedom } from '../../src/statistics/effective-freedom.js';
import { coverageFactor, studentTDistribution } from '../../src/statistics/student-t.js';
import { combine } from '../../src/statistics/uncertainty-budget.js';
import { relativeError } from '../statistics/relative-error.js';

function ofDifference(samples: readonly { n: number; sd: number }[]) {
  const parts = samples.map(({ n, sd }) => ({ uncertainty: sd / Math.sqrt(n), degreesOfFreedom: n - 1 }));
  return {
    freedom: effectiveDegreesOfFreedom(parts),
    uncertainty: Math.hypot(...parts.map(({ uncertainty }) => uncertainty)),
  };
}

// Source: NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.5.3, data set AUTO83B; digits beyond the
// printed ones from R, as the fixture says.
describe('effective degrees of freedom against the NIST handbook, 1.3.5.3', () => {
  const { freedom, uncertainty } = ofDifference([welch.sample1, welch.sample2]);
  const t = (welch.sample1.mean - welch.sample2.mean) / uncertainty;

  it('gives the degrees of freedom of two samples of unequal variance', () => {
    expect(Math.abs(freedom - welch.published.dof_unequal)).toBeLessThan(5e-4);
    expect(relativeError(freedom, welch.recomputed.dof_unequal)).toBeLessThan(1e-9);
  });

  it('gives their test statistic, its critical value and its probability', () => {
    expect(Math.abs(t - welch.published.t_unequal)).toBeLessThan(1e-5);
    expect(relativeError(coverageFactor(freedom), welch.recomputed.critical_975_unequal)).toBeLessThan(1e-9);
    expect(
      relativeError(2 * studentTDistribution(t, freedom), welch.recomputed.p_two_sided_unequal),
    ).toBeLessThan(1e-9);
    expect(coverageFactor(welch.published.dof_pooled).toFixed(4)).toBe(
      welch.published.critical_975_pooled.toFixed(4),
    );
  });
});

// Source: R's data set sleep (Student 1908), t.test() of R, as the fixture says.
describe("effective degrees of freedom against R's t.test on Student's own data", () => {
  const { group1, group2, dof_unequal, t_unequal, p_unequal, ci95 } = welch.second_case;
  const { freedom, uncertainty } = ofDifference(
    [group1, group2].map((group) => ({ n: group.length, sd: sampleStandardDeviation(group) })),
  );
  const difference = mean(group1) - mean(group2);

  it('gives the same degrees of freedom, statistic, probability and interval', () => {
    expect(relativeError(freedom, dof_unequal)).toBeLessThan(1e-12);
    expect(relativeError(difference / uncertainty, t_unequal)).toBeLessThan(1e-12);
    expect(
      relativeError(2 * studentTDistribution(difference / uncertainty, freedom), p_unequal),
    ).toBeLessThan(1e-11);
    const halfWidth = coverageFactor(freedom) * uncertainty;
    expect(relativeError(difference - halfWidth, ci95[0] ?? NaN)).toBeLessThan(1e-11);
    expect(relativeError(difference + halfWidth, ci95[1] ?? NaN)).toBeLessThan(1e-11);
  });
});

// Source: JCGM 100:2008, G.4.1 (example) and H.1.6; from memory, with inputs as rounded as they are printed.
describe('budgets against the worked examples of JCGM 100:2008 (from memory)', () => {
  it('G.4.1: three factors of a product', () => {
    const { components, published } = gum.g_4_1;
    const combined = combine(
      components.map((part, index) => ({ name: `factor ${index + 1}`, kind: 'A', ...part })),
    );
    expect(combined.standardUncertainty.toFixed(2)).toBe(published.combined.toFixed(2));
    expect(combined.degreesOfFreedom.toFixed(1)).toBe(published.effective_dof.toFixed(1));
    expect(combined.coverageFactor.toFixed(2)).toBe(published.t95.toFixed(2));
    expect(combined.expanded.toFixed(1)).toBe(published.expanded95.toFixed(1));
  });

  it('H.1: the end gauge, to the rounding of its inputs', () => {
    const { components, published } = gum.h_1;
    const combined = combine(components.map((part) => ({ kind: 'B', ...part })));
    expect(combined.standardUncertainty.toFixed(0)).toBe(published.combined.toFixed(0));
    expect(Math.abs(combined.degreesOfFreedom - published.effective_dof)).toBeLessThan(0.2);
    // The guide cuts to whole degrees of freedom before it looks the factor up.
    const factor = coverageFactor(Math.floor(combined.degreesOfFreedom), 0.99);
    expect(factor.toFixed(2)).toBe(published.t99.toFixed(2));
    expect((factor * published.combined).toFixed(0)).toBe(published.expanded99.toFixed(0));
  });
});
