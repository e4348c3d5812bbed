import { describe, expect, it } from 'vitest';
import { measured, inWords } from '../../src/analysis/finding.js';
import type { Finding } from '../../src/analysis/finding.js';
import { promised } from '../../src/analysis/promised-errors.js';
import { answer } from '../../src/report/answer.js';
import { aBaseline, droopOf, relationOf } from '../judgement/a-baseline.js';
import { resultOf } from './fixed-record.js';

const amps = (name: string, value: number): Finding =>
  measured(name, 'current', value, [promised('the load', 0.01)], { step: 3 });
const recommended = (value: number): Finding => ({ ...amps('recommended-current', value), interval: null });
const usable: Finding = { ...amps('usable-current', 5.5), note: 'above that it drops out' };

function answerTo(...findings: readonly Finding[]): readonly string[] {
  return answer({ ...resultOf(), findings });
}

describe('the answer', () => {
  it('says where the module leaves regulation before it drops out', () => {
    expect(
      answerTo(
        recommended(4),
        usable,
        amps('limit-onset-current', 5.285),
        amps('dropout-current', 5.526),
        inWords('limit-style', 'constant-power', { step: 3 }),
      ),
    ).toEqual([
      'Load it continuously with up to 4.00 A.',
      'It delivers 5.500 ± 0.020 A; above that it drops out.',
      'It leaves regulation at 5.285 ± 0.020 A and drops out at 5.526 ± 0.020 A (constant-power).',
    ]);
  });

  it('keeps quiet about a limit that was not met, and about a style that could not be told', () => {
    expect(answerTo(recommended(4), usable)).toHaveLength(2);
    expect(
      answerTo(
        recommended(4),
        usable,
        amps('dropout-current', 5.5),
        inWords('limit-style', 'undetermined', { step: 3 }),
      )[2],
    ).toBe('It regulates until it drops out at 5.500 ± 0.020 A.');
  });

  it('never rounds a recommendation up, and says so where there is nothing to recommend', () => {
    expect(answerTo(recommended(3.9999), usable)[0]).toBe('Load it continuously with up to 3.99 A.');
    expect(answerTo(recommended(0), usable)[0]).toBe('Do not load it.');
    expect(answerTo(usable)).toEqual([]);
  });

  it('says what moved since the baseline, also where nothing is recommended', () => {
    const result = resultOf();
    const baseline = aBaseline();
    const findings = [relationOf('isolated'), droopOf(0.036)];
    expect(answer({ ...result, header: { ...result.header, baseline }, findings })).toEqual([
      'Compared with 20261101T080000Z-K1-acceptance: droop-resistance moved from 18.00 mΩ to 36.00 mΩ, by +18.00 ± 0.28 mΩ (+100 %); allowed is 20 %.',
      'earth-relation became isolated, as it must.',
    ]);
  });
});
