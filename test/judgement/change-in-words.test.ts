import { describe, expect, it } from 'vitest';
import {
  allowedInWords,
  changeInWords,
  differenceInWords,
  valueInWords,
} from '../../src/judgement/change-in-words.js';
import { compare } from '../../src/judgement/compare.js';
import type { Comparable, Difference } from '../../src/judgement/difference.js';
import type { Dimension } from '../../src/quantity/quantity.js';
import type { Expected } from '../../src/record/baseline.js';
import { droopOf, relationOf } from './a-baseline.js';

function difference(
  value: number,
  dimension: Dimension,
  expanded: number | null,
  share: number | null,
): Difference {
  return { value, dimension, standardUncertainty: null, expanded, normalizedError: null, share };
}

describe('a difference', () => {
  it.each([
    [difference(0.0182, 'resistance', 0.0003, 1.01), '+18.20 ± 0.30 mΩ (+101 %)'],
    [difference(-0.012, 'voltage', 0.009, -0.0008), '-12.0 ± 9.0 mV (-0.08 %)'],
    [difference(0.0048, 'ratio', 0.0001, 1), '+0.480 ± 0.010 percentage points (+100 %)'],
    [difference(0, 'current', 0.025, 0), '0 ± 25 mA (0 %)'],
    [difference(1e-9, 'current', 0.025, 1e-9), '0 ± 25 mA (0 %)'],
    [difference(1, 'current', null, null), '+1 A'],
  ])('%#: %s', (one, words) => {
    expect(differenceInWords(one)).toBe(words);
  });
});

describe('the change of a least value', () => {
  const bound = 'least' as const;
  const compared = (before: Comparable, after: Comparable) => {
    const [one] = compare(
      { modules: ['K1'], findings: [before] },
      { modules: ['K1'], findings: [after] },
      [],
    ).findings;
    if (one === undefined) throw new Error('one was compared');
    return one;
  };

  it('is told as far as it is certain', () => {
    const least = { ...droopOf(0.018), bound };
    expect(changeInWords(compared(droopOf(0.01), least))).toBe('+8 mΩ or further');
    expect(changeInWords(compared(least, droopOf(0.01)))).toBe('-8 mΩ or further');
  });

  it('is not told where it may as well be none', () => {
    const least = { ...droopOf(0.018), bound };
    expect(changeInWords(compared(least, droopOf(0.03)))).toBe('');
    expect(changeInWords(compared(droopOf(0.03), least))).toBe('');
    expect(changeInWords(compared(least, { ...droopOf(0.01), bound }))).toBe('');
  });
});

describe('what is allowed', () => {
  const [quantity, word] = compare(
    { modules: ['K1'], findings: [droopOf(0.018), relationOf('bonded')] },
    { modules: ['K1'], findings: [droopOf(0.018), relationOf('bonded')] },
    [],
  ).findings;
  if (quantity === undefined || word === undefined) throw new Error('two were compared');
  const within = (value: number): Expected => ({ kind: 'within', limit: { kind: 'absolute', value } });
  const of = (dimension: Dimension) => ({ ...quantity, before: { ...droopOf(1), dimension } });

  it('reads as it was written', () => {
    expect(allowedInWords({ kind: 'within', limit: { kind: 'share', ratio: 0.005 } }, quantity)).toBe(
      '0.5 %',
    );
    expect(allowedInWords(within(0.005), quantity)).toBe('5 mΩ');
    expect(allowedInWords(within(0.03), of('ratio'))).toBe('3 percentage points');
    expect(allowedInWords(within(5), of('temperature'))).toBe('5 K');
    expect(allowedInWords({ kind: 'same' }, word)).toBe('the same');
    expect(allowedInWords({ kind: 'becomes', word: 'isolated' }, word)).toBe('becomes isolated');
  });
});

it('a value has the digits that it deserves, and a least one says so', () => {
  expect(valueInWords(droopOf(0.018, 0.00009))).toBe('18.00 mΩ');
  expect(valueInWords({ ...droopOf(0.018), bound: 'least' })).toBe('at least 18.00 mΩ');
  expect(valueInWords(relationOf('bonded'))).toBe('bonded');
});
