import { describe, expect, it } from 'vitest';
import { type Finding, inWords, measured } from '../../src/analysis/finding.js';
import { compare, type Compared, compareWithBaseline } from '../../src/judgement/compare.js';
import type { Comparable } from '../../src/judgement/difference.js';
import type { Expected, ToleranceEntry } from '../../src/record/baseline.js';
import { headerOf } from '../analysis/evidence-of.js';

const side = (...findings: readonly Comparable[]) => ({ modules: ['K1'], findings });

/** A current with this expanded uncertainty. */
function amps(value: number, expanded: number, more: Partial<Finding> = {}): Finding {
  const uncertainty = expanded / 1.959963984540054;
  const budget = [{ name: 'all', kind: 'B', uncertainty, degreesOfFreedom: Infinity }] as const;
  return { ...measured('usable-current', 'current', value, budget, { step: 1 }), ...more };
}

const share = (ratio: number): Expected => ({ kind: 'within', limit: { kind: 'share', ratio } });
const absolute = (value: number): Expected => ({ kind: 'within', limit: { kind: 'absolute', value } });
const least = { bound: 'least' } as const;

function compared(
  before: Comparable | undefined,
  after: Comparable | undefined,
  expected?: Expected,
): Compared {
  const name = before?.name ?? after?.name ?? '';
  const { findings } = compare(
    side(...(before === undefined ? [] : [before])),
    side(...(after === undefined ? [] : [after])),
    expected === undefined ? [] : [{ finding: name, expected }],
  );
  const [only] = findings;
  if (only === undefined || findings.length > 1) throw new Error('one finding was to be compared');
  return only;
}

describe('a quantity in two records', () => {
  // U = √(0.03² + 0.04²) = 0.05 A; the tolerance is 0.25 A.
  it.each([
    [5, 'unchanged-within-tolerance', 'conforms'],
    [5.19, 'unchanged-within-tolerance', 'conforms'],
    [4.81, 'unchanged-within-tolerance', 'conforms'],
    [5.21, 'cannot-tell', 'undecided'],
    [5.25, 'cannot-tell', 'undecided'],
    [4.71, 'cannot-tell', 'undecided'],
    [5.31, 'changed', 'does-not-conform'],
    [4.69, 'changed', 'does-not-conform'],
  ])('of 5 A that has become %d A, within 5 %%: %s', (value, verdict, outcome) => {
    for (const expected of [share(0.05), absolute(0.25)]) {
      const one = compared(amps(5, 0.03), amps(value, 0.04), expected);
      expect(one).toMatchObject({ verdict, outcome, note: '' });
      expect(one.tolerance).toBeCloseTo(0.25, 12);
    }
  });

  it('is within its tolerance with a probability: by hand, on the edge it is even', () => {
    expect(compared(amps(5, 0.03), amps(5.25, 0.04), absolute(0.25)).probability).toBeCloseTo(0.5, 9);
  });

  it('below nothing is allowed a share of its size', () => {
    const one = compared(amps(-5, 0.03), amps(-5.1, 0.04), share(0.05));
    expect(one.tolerance).toBeCloseTo(0.25, 12);
    expect(one.verdict).toBe('unchanged-within-tolerance');
  });

  it('is never unchanged by a tolerance that is below its uncertainty', () => {
    expect(compared(amps(5, 0.03), amps(5, 0.04), absolute(0.04)).verdict).toBe('cannot-tell');
  });

  it('of which nothing is asked is shown with its difference, and not judged', () => {
    const one = compared(amps(5, 0.03), amps(6, 0.04));
    expect(one).toMatchObject({ verdict: 'not-compared', outcome: 'not-judged', expected: undefined });
    expect(one.difference?.normalizedError).toBeCloseTo(20, 9);
  });

  it('without an uncertainty is taken as it stands, and says so', () => {
    const choice = (value: number): Finding =>
      amps(value, 0, { name: 'recommended-current', standardUncertainty: null, interval: null, budget: [] });
    expect(compared(choice(4), choice(4), share(0.05))).toMatchObject({
      verdict: 'unchanged-within-tolerance',
      probability: null,
      note: 'no uncertainty is known of it: taken as it stands',
    });
    expect(compared(choice(4), choice(3), share(0.05)).verdict).toBe('changed');
  });

  it.each([
    ['no further than is allowed', 5],
    ['further than is allowed', 9],
  ])('whose uncertainty one record alone knows is not judged without a guard band: %s', (_, value) => {
    const bare = (at: number): Finding => amps(at, 0, { standardUncertainty: null, interval: null });
    for (const one of [
      compared(bare(5), amps(value, 0.04), share(0.05)),
      compared(amps(5, 0.04), bare(value), share(0.05)),
    ]) {
      expect(one).toMatchObject({
        verdict: 'cannot-tell',
        outcome: 'undecided',
        probability: null,
        note: 'its uncertainty is known in one of the two records only',
      });
    }
  });

  it('that is a word in the other record can not be told', () => {
    const words = inWords('usable-current', 'plenty', { step: 1 });
    expect(compared(amps(5, 0.03), words, share(0.05))).toMatchObject({
      verdict: 'cannot-tell',
      outcome: 'undecided',
      note: 'they are not quantities of one kind',
    });
  });
});

describe('a least value, of which no limit was met', () => {
  it.each([
    ['the same as before', least, 5, least, 5, 'unchanged-within-tolerance'],
    ['that went less far', least, 5, least, 4, 'cannot-tell'],
    ['that went further', least, 5, least, 6, 'cannot-tell'],
    ['where now a limit is met below it', least, 5, {}, 4, 'changed'],
    ['where now a limit is met at it', least, 5, {}, 5, 'cannot-tell'],
    ['where now a limit is met above it', least, 5, {}, 6, 'cannot-tell'],
    ['above the earlier limit', {}, 5, least, 6, 'changed'],
    ['at the earlier limit', {}, 5, least, 5, 'cannot-tell'],
    ['below the earlier limit', {}, 5, least, 4, 'cannot-tell'],
  ] as const)('%s: %j %d A, then %j %d A: %s', (_, was, before, is, after, verdict) => {
    const one = compared(amps(before, 0.03, was), amps(after, 0.04, is), share(0.05));
    expect(one.verdict).toBe(verdict);
    expect(one.probability).toBeNull();
    if (verdict !== 'changed') expect(one.note).toMatch(/least value/);
  });
});

describe('a word in two records', () => {
  const style = (word: string): Finding => inWords('limit-style', word, { step: 3 });

  it.each([
    ['hiccup', 'hiccup', 'unchanged', 'conforms'],
    ['hiccup', 'latch-off', 'changed', 'does-not-conform'],
    ['undetermined', 'hiccup', 'cannot-tell', 'undecided'],
    ['hiccup', 'undetermined', 'cannot-tell', 'undecided'],
    ['undetermined', 'undetermined', 'cannot-tell', 'undecided'],
  ])('%s, then %s: %s', (before, after, verdict, outcome) => {
    expect(compared(style(before), style(after), { kind: 'same' })).toMatchObject({ verdict, outcome });
  });
});

describe('what must change', () => {
  const earth = (word: string): Finding => inWords('earth-relation', word, { step: 1 });
  const isolated: Expected = { kind: 'becomes', word: 'isolated' };

  it.each([
    ['bonded', 'isolated', 'changed', 'conforms', ''],
    ['bonded', 'bonded', 'unchanged', 'does-not-conform', 'it is bonded'],
    ['bonded', 'leaky', 'changed', 'does-not-conform', 'it is leaky'],
    ['isolated', 'isolated', 'unchanged', 'conforms', 'it was so before'],
    ['undetermined', 'isolated', 'cannot-tell', 'undecided', 'could not be told'],
    ['undetermined', 'bonded', 'cannot-tell', 'does-not-conform', 'it is bonded'],
    ['bonded', 'undetermined', 'cannot-tell', 'undecided', 'could not be told'],
  ])('from %s to %s, to become isolated: %s, %s', (before, after, verdict, outcome, note) => {
    expect(compared(earth(before), earth(after), isolated)).toMatchObject({ verdict, outcome, note });
  });

  it('can not be told where one record does not have it, unless it is something else now', () => {
    const asked = (before?: Finding, after?: Finding): Compared => compared(before, after, isolated);
    expect(asked(earth('bonded'))).toMatchObject({ verdict: 'only-before', outcome: 'undecided' });
    expect(asked(undefined, earth('isolated'))).toMatchObject({
      verdict: 'only-after',
      outcome: 'undecided',
      note: 'was not found in the earlier record',
    });
    expect(asked(undefined, earth('bonded'))).toMatchObject({ outcome: 'does-not-conform' });
  });

  it('is missed where neither record has it', () => {
    const entry = { finding: 'earth-relation', expected: isolated };
    const same = side(inWords('limit-style', 'hiccup', { step: 3 }));
    const asked: readonly ToleranceEntry[] = [entry, { finding: 'limit-style', expected: { kind: 'same' } }];
    expect(compare(same, same, asked)).toMatchObject({ outcome: 'undecided', inNeither: [entry] });
  });
});

describe('two records', () => {
  const before = side(amps(5, 0.03), inWords('limit-style', 'hiccup', { step: 3 }));

  it('in which nothing that must not change is missing or moved are as they should be', () => {
    const asked: readonly ToleranceEntry[] = [
      { finding: 'usable-current', expected: share(0.05) },
      { finding: 'dropout-current', expected: share(0.05) },
    ];
    const { outcome, inNeither, sameModules } = compare(before, before, asked);
    expect({ outcome, sameModules }).toEqual({ outcome: 'conforms', sameModules: true });
    expect(inNeither.map(({ finding }) => finding)).toEqual(['dropout-current']);
  });

  it('that hold nothing of what is asked can not be told', () => {
    expect(compare(before, before, []).outcome).toBe('undecided');
    expect(compare(side(), side(), [{ finding: 'usable-current', expected: share(0.05) }]).outcome).toBe(
      'undecided',
    );
  });

  it('one of which lacks what is asked can not be told', () => {
    const asked: readonly ToleranceEntry[] = [{ finding: 'usable-current', expected: share(0.05) }];
    expect(compare(before, side(), asked)).toMatchObject({
      outcome: 'undecided',
      findings: [
        { finding: 'usable-current', verdict: 'only-before', note: 'was not found this time' },
        { finding: 'limit-style', verdict: 'only-before', outcome: 'not-judged', note: '' },
      ],
    });
  });

  it('of different modules are compared, and known to be', () => {
    expect(compare(before, { ...before, modules: ['K2'] }, [])).toMatchObject({
      sameModules: false,
      findings: [{ verdict: 'not-compared' }, { verdict: 'not-compared' }],
    });
  });

  it('are shown in the order of the later one, and then what only the earlier one has', () => {
    const [a, b, c] = ['a', 'b', 'c'].map((name) => amps(5, 0.03, { name })) as [Finding, Finding, Finding];
    const { findings } = compare(side(c, a, b), side(b, a), []);
    expect(findings.map(({ finding }) => finding)).toEqual(['b', 'a', 'c']);
  });

  it('a name without a star stands for itself alone', () => {
    const ofK1 = side(amps(5, 0.03, { name: 'usable-current-of-K1' }));
    const asked = [{ finding: 'usable-current', expected: share(0.05) }];
    expect(compare(ofK1, ofK1, asked)).toMatchObject({
      findings: [{ verdict: 'not-compared' }],
      inNeither: asked,
    });
  });

  it('a family stands for all that begin so, and a name of its own goes before it', () => {
    const shareOf = (name: string, value: number): Finding => ({ ...amps(value, 0.001), name });
    const one = side(shareOf('share-of-K1', 0.5), shareOf('share-of-K2', 0.5));
    const other = side(shareOf('share-of-K1', 0.52), shareOf('share-of-K2', 0.48));
    const { findings } = compare(one, other, [
      { finding: 'share-of-*', expected: absolute(0.01) },
      { finding: 'share-of-K2', expected: absolute(0.05) },
    ]);
    expect(findings.map(({ finding, verdict }) => [finding, verdict])).toEqual([
      ['share-of-K1', 'changed'],
      ['share-of-K2', 'unchanged-within-tolerance'],
    ]);
  });

  it('the later of which carries its baseline need no other', () => {
    const header = headerOf();
    expect(compareWithBaseline(header, [])).toBeUndefined();
    const baseline = {
      run: '20261101T080000Z-K1-acceptance',
      began: '2026-11-01T08:00:00Z',
      procedure: 'acceptance',
      modules: ['K1'],
      findings: [
        {
          ...amps(5, 0.03),
          dimension: 'current' as const,
          value: 5,
          interval: [4.97, 5.03] as [number, number],
        },
      ],
      tolerance: { name: 'x', title: 'X', findings: [{ finding: 'usable-current', expected: share(0.05) }] },
    };
    expect(compareWithBaseline({ ...header, baseline }, [amps(4, 0.03)])).toMatchObject({
      outcome: 'does-not-conform',
      sameModules: true,
    });
  });
});
