import { describe, expect, it } from 'vitest';

import rules from '../../fixtures/reference/decision-rules.json' with { type: 'json' };
import { decide, type Requirement } from '../../src/statistics/guarded-decision.js';
import { normalQuantile } from '../../src/statistics/normal.js';
import { relativeError } from '../statistics/relative-error.js';

function judge(y: number, u: number, requirement: Requirement, expanded = 2 * u) {
  return decide({ value: y, standardUncertainty: u, expanded, requirement });
}

/** A limit on one side, or one on each. */
function requirementOf(lower: number | null | undefined, upper: number | null | undefined): Requirement {
  const [least, most] = [lower ?? undefined, upper ?? undefined];
  if (least !== undefined && most !== undefined) return { kind: 'between', least, most };
  if (least !== undefined) return { kind: 'at-least', limit: least };
  if (most !== undefined) return { kind: 'at-most', limit: most };
  throw new Error('the example has no limit');
}

// Source: JCGM 106:2012, examples of clause 7, the two-sided one of 7.4 among them (inputs and printed outputs from memory, recomputed in scipy).
describe('the probability of conformity against JCGM 106:2012', () => {
  it.each(rules.jcgm_106.conformance_probability_examples)(
    '$quantity',
    ({ y, u, lower, upper, published_pc, recomputed_pc }) => {
      const probability = judge(y, u, requirementOf(lower, upper)).probability;
      expect(probability.toFixed(2)).toBe(published_pc.toFixed(2));
      expect(relativeError(probability, recomputed_pc)).toBeLessThan(1e-12);
    },
  );

  // Source: JCGM 106:2012, Table 1 (from memory).
  it.each(rules.jcgm_106.one_sided_z_table_1)(
    'takes $published_2_digits standard uncertainties for $p',
    ({ p, z, published_2_digits }) => {
      expect(relativeError(normalQuantile(p), z)).toBeLessThan(1e-13);
      expect(normalQuantile(p).toFixed(2)).toBe(published_2_digits.toFixed(2));
      expect(judge(z, 1, { kind: 'at-least', limit: 0 }).probability).toBeCloseTo(p, 13);
    },
  );
});

// Source: ILAC-G8:09/2019, Table 1 (from memory, recomputed in scipy): the risk at the acceptance limit.
describe('the risk on the acceptance limit against ILAC-G8:09/2019', () => {
  it.each(rules.ilac_g8.table1.filter(({ guard_band_in_U }) => guard_band_in_U >= 0))(
    '$rule, guard band $guard_band_in_U U: $specific_risk',
    ({ guard_band_in_U, exact_for_U_equal_2u }) => {
      const onAcceptanceLimit = judge(10 + 2 * guard_band_in_U, 1, { kind: 'at-most', limit: 10 });
      expect(relativeError(onAcceptanceLimit.probability, exact_for_U_equal_2u)).toBeLessThan(1e-13);
    },
  );

  it('conforms on the limit of the rule with w = U, where the risk is at most 2.5 %', () => {
    const decision = judge(8, 1, { kind: 'at-most', limit: 10 });
    expect(decision.outcome).toBe('conforms');
    expect(1 - decision.probability).toBeLessThan(rules.ilac_g8.guard_band_U_max_specific_risk);
  });
});

// Source: our own cases under the four statements of ILAC-G8:09/2019, worked out in scipy; both conditional
// statements are one here: undecided.
describe('decisions against the four statements of ILAC-G8:09/2019', () => {
  const outcomes: Readonly<Record<string, string>> = {
    pass: 'conforms',
    'conditional pass': 'undecided',
    'conditional fail': 'undecided',
    fail: 'does-not-conform',
  };

  it.each(rules.self_made)(
    '$y within $lower and $upper: $four_way',
    ({ y, u, U, lower, upper, conformance_probability, four_way }) => {
      const decision = judge(y, u, requirementOf(lower, upper), U);
      expect(decision.outcome).toBe(outcomes[four_way]);
      expect(relativeError(decision.probability, conformance_probability)).toBeLessThan(1e-10);
    },
  );

  // Source: a published article on guard bands for ISO/IEC 17025 (micrometer), as the fixture says.
  it.each(rules.published_web_example.cases)(
    'a micrometer off by $deviation_mm mm: $zone',
    ({ deviation_mm, zone }) => {
      const { U_mm, limit_mm } = rules.published_web_example;
      const { outcome } = judge(deviation_mm, U_mm / 2, { kind: 'at-most', limit: limit_mm }, U_mm);
      expect(outcome).toBe(zone === 'proven conformity' ? 'conforms' : 'undecided');
    },
  );
});
