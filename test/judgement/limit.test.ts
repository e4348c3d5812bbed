import { describe, expect, it } from 'vitest';
import { measured } from '../../src/analysis/finding.js';
import { limitInWords, limitOf } from '../../src/judgement/limit.js';
import { headerOf } from '../analysis/evidence-of.js';

const budget = [{ name: 'all', kind: 'B', uncertainty: 0.04, degreesOfFreedom: Infinity }] as const;
const dropout = measured('dropout-current', 'current', 5.300001, budget, { step: 3 });

describe('the limit of a criterion', () => {
  it.each([
    [{ kind: 'absolute', value: 4 }, 4, 0, '4 A'],
    [{ kind: 'share', ratio: 0.95, of: 'rated-current' }, 3.8, 0, '3.8 A (95 % of rated-current)'],
    [
      { kind: 'share', ratio: 0.5, of: 'dropout-current' },
      2.6500005,
      0.02,
      '2.65 A (50 % of dropout-current)',
    ],
    [{ kind: 'share', ratio: 0.5, of: 'open-circuit-voltage' }, undefined, 0, '50 % of open-circuit-voltage'],
  ] as const)('%j', (written, value, uncertainty, words) => {
    const limit = limitOf('usable-current', written, headerOf(), [dropout]);
    if (value === undefined) expect(limit.value).toBeUndefined();
    else expect(limit.value).toBeCloseTo(value, 12);
    expect(limit.standardUncertainty).toBeCloseTo(uncertainty, 12);
    expect(limit.expanded).toBeCloseTo(1.959964 * uncertainty, 6);
    expect(limitInWords(limit, 'usable-current')).toBe(words);
  });
});
