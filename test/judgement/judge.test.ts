import { describe, expect, it } from 'vitest';
import rules from '../../fixtures/reference/decision-rules.json' with { type: 'json' };
import { type Finding, inWords, measured } from '../../src/analysis/finding.js';
import { type Decision, judge, overall } from '../../src/judgement/judge.js';
import type { RunHeader } from '../../src/record/run-header.js';
import { studentTDistribution } from '../../src/statistics/student-t.js';
import { headerOf } from '../analysis/evidence-of.js';

type Requirement = RunHeader['criteria'][number]['requirement'];

function finding(name: string, value: number, uncertainty: number, degreesOfFreedom = Infinity): Finding {
  const budget = [{ name: 'all', kind: 'B', uncertainty, degreesOfFreedom }] as const;
  return measured(name, 'current', value, budget, { step: 3 });
}

function decide(requirement: Requirement, findings: readonly Finding[], name = 'usable-current'): Decision {
  const [decision] = judge(headerOf({ criteria: [{ finding: name, requirement }] }), findings);
  if (decision === undefined) throw new Error('nothing decided');
  return decision;
}

const atLeast = (value: number): Requirement => ({ kind: 'at-least', value: { kind: 'absolute', value } });
const atMost = (value: number): Requirement => ({ kind: 'at-most', value: { kind: 'absolute', value } });
const share = (kind: 'at-least' | 'at-most', ratio: number, of: string): Requirement => ({
  kind,
  value: { kind: 'share', ratio, of },
});

describe('a requirement on a finding', () => {
  // 0.051 A is 1.96 standard uncertainties of 0.026 A: the guard band.
  it.each([
    [atLeast(4), 4.2, 'conforms'],
    [atLeast(4), 4.06, 'conforms'],
    [atLeast(4), 4.04, 'undecided'],
    [atLeast(4), 4, 'undecided'],
    [atLeast(4), 3.96, 'undecided'],
    [atLeast(4), 3.94, 'does-not-conform'],
    [atMost(4), 3.94, 'conforms'],
    [atMost(4), 3.96, 'undecided'],
    [atMost(4), 4.06, 'does-not-conform'],
  ] as const)('%j: %d A ± 0.051 A %s', (requirement, value, outcome) => {
    expect(decide(requirement, [finding('usable-current', value, 0.026)]).outcome).toBe(outcome);
  });

  it('goes by the side to which a lopsided interval reaches further', () => {
    const rise: Finding = { ...finding('temperature-rise', 36, 1), interval: [34, 42] };
    // Half the width would be 4 K, and 40 K would pass though it may be 42 K.
    expect(decide(atMost(40.5), [rise], 'temperature-rise').outcome).toBe('undecided');
    expect(decide(atMost(42), [rise], 'temperature-rise').outcome).toBe('conforms');
  });

  it('reads as a person says it', () => {
    expect(decide(atLeast(4), []).requirement).toBe('at least 4 A');
    expect(decide(atMost(0.02), [], 'droop-resistance').requirement).toBe('at most 20 mΩ');
    expect(decide(atMost(0.01), [], 'load-regulation').requirement).toBe('at most 1 %');
    expect(decide(atMost(0.4), [], 'share-of-K2').requirement).toBe('at most 40 %');
  });

  it('on what was not measured is undecided, and keeps its unit', () => {
    expect(decide(share('at-least', 1, 'rated-current'), [])).toEqual({
      finding: 'usable-current',
      requirement: 'at least 4 A (100 % of rated-current)',
      outcome: 'undecided',
      probability: null,
      note: 'was not measured',
    });
  });

  it('that is a share of the nameplate has an exact limit', () => {
    const decision = decide(share('at-least', 1.1, 'rated-current'), [finding('usable-current', 4.5, 0.01)]);
    expect(decision.requirement).toBe('at least 4.4 A (110 % of rated-current)');
    expect(decision).toMatchObject({ outcome: 'conforms', note: '' });
    expect(decide(share('at-most', 1.02, 'rated-voltage'), [], 'open-circuit-voltage').requirement).toBe(
      'at most 15.3 V (102 % of rated-voltage)',
    );
  });

  it('that is a share of a finding has a limit as uncertain as that', () => {
    const findings = [finding('usable-current', 5.05, 0.03), finding('dropout-current', 5.5, 0.04)];
    const decision = decide(share('at-least', 0.9, 'dropout-current'), findings);
    // 0.1 A above the limit; the guard band is 1.96·√(0.03² + (0.9·0.04)²) = 0.092 A.
    expect(decision.requirement).toBe('at least 4.95 A (90 % of dropout-current)');
    expect(decision.outcome).toBe('conforms');
    expect(decision.note).toBe('the limit was measured too, and its uncertainty counts');
    const closer = [finding('usable-current', 5.04, 0.03), finding('dropout-current', 5.5, 0.04)];
    expect(decide(share('at-least', 0.9, 'dropout-current'), closer).outcome).toBe('undecided');
  });

  it('that refers to what was not measured is undecided', () => {
    const decision = decide(share('at-least', 0.9, 'dropout-current'), [finding('usable-current', 5, 0.01)]);
    expect(decision).toMatchObject({
      requirement: 'at least 90 % of dropout-current',
      outcome: 'undecided',
      note: 'what it refers to was not measured',
    });
  });

  it('is met with a probability by the same distribution as the interval', () => {
    const few = decide(atLeast(4), [finding('usable-current', 4.05, 0.025, 4)]);
    expect(few.probability).toBeCloseTo(studentTDistribution(2, 4), 12);
    const known = decide(atLeast(4), [finding('usable-current', 4.05, 0.025)]);
    // Two standard deviations of a normal distribution: 97.7 %.
    expect(known.probability).toBeCloseTo(0.97725, 5);
  });

  it('on the recommended current, which is a choice, is decided by the value and without a probability', () => {
    const recommended = {
      ...finding('recommended-current', 4, 0),
      interval: null,
      standardUncertainty: null,
      budget: [],
    };
    expect(decide(atLeast(4), [recommended], 'recommended-current')).toMatchObject({
      outcome: 'conforms',
      probability: null,
    });
    expect(decide(atLeast(4.1), [recommended], 'recommended-current').outcome).toBe('does-not-conform');
  });

  it.each([
    [atLeast(4), 'undecided'],
    [atLeast(2), 'conforms'],
    [atMost(4), 'undecided'],
    [atMost(2), 'does-not-conform'],
  ] as const)('%j on a least value of 2.2 A, from a ramp that was cut short: %s', (requirement, outcome) => {
    const least = { ...finding('usable-current', 2.2, 0.01), bound: 'least' } as const;
    const decision = decide(requirement, [least]);
    expect(decision.outcome).toBe(outcome);
    if (outcome !== 'undecided') return;
    expect(decision).toMatchObject({ probability: null, note: 'it may be more: it is a least value' });
  });

  it('is decided where the reference is none of ours, as far as it goes', () => {
    const strange = decide(share('at-least', 1, 'moon-phase'), [finding('usable-current', 5, 0.01)]);
    expect(strange.outcome).toBe('undecided');
    expect(decide(atLeast(0.5), [], 'case-temperature').requirement).toBe('at least 50 %');
  });
});

describe('a requirement on a word', () => {
  const style = (word: string): readonly Finding[] => [inWords('limit-style', word, { step: 3 })];
  const is: Requirement = { kind: 'is', word: 'constant-current' };

  it.each([
    ['constant-current', 'conforms', 'it is constant-current'],
    ['hiccup', 'does-not-conform', 'it is hiccup'],
    ['undetermined', 'undecided', 'could not be told'],
  ])('is constant-current: %s %s', (word, outcome, note) => {
    expect(decide(is, style(word), 'limit-style')).toEqual({
      finding: 'limit-style',
      requirement: 'is constant-current',
      outcome,
      probability: null,
      note,
    });
  });

  it('is undecided where nothing was found', () => {
    expect(decide(is, [], 'limit-style')).toMatchObject({ outcome: 'undecided', note: 'was not measured' });
  });
});

describe('the outcome of a record', () => {
  const decisions = (...outcomes: readonly Decision['outcome'][]): readonly Decision[] =>
    outcomes.map((outcome) => ({ finding: '', requirement: '', outcome, probability: null, note: '' }));

  it.each([
    [[], 'not-judged'],
    [['conforms', 'conforms'], 'conforms'],
    [['conforms', 'undecided'], 'undecided'],
    [['conforms', 'undecided', 'does-not-conform'], 'does-not-conform'],
  ] as const)('of %j is %s', (outcomes, expected) => {
    expect(overall(decisions(...outcomes))).toBe(expected);
  });

  it('is not judged without criteria', () => {
    expect(judge(headerOf(), [finding('usable-current', 5, 0.01)])).toEqual([]);
  });
});

// Source: JCGM 106:2012, examples of clause 7 (inputs and printed outputs from memory, recomputed in scipy;
// see the fixture). The two-sided one is two criteria here, and its probability their sum less one.
describe('decisions against the examples of JCGM 106:2012', () => {
  it.each(rules.jcgm_106.conformance_probability_examples)(
    '$quantity',
    ({ y, u, lower, upper, published_pc, recomputed_pc }) => {
      const asked = [
        ...(lower === undefined ? [] : [atLeast(lower)]),
        ...(upper === undefined ? [] : [atMost(upper)]),
      ];
      const probabilities = asked.map((requirement) => {
        return decide(requirement, [finding('usable-current', y, u)]).probability ?? Number.NaN;
      });
      const both = probabilities.reduce((sum, one) => sum + one, 1 - probabilities.length);
      expect(both).toBeCloseTo(recomputed_pc, 12);
      expect(both.toFixed(2)).toBe(published_pc.toFixed(2));
    },
  );
});

// Source: ILAC-G8:09/2019, the four statements with w = U = 2u, our own cases worked out in scipy (fixture).
// The interval of a finding is ± 1.96 u; no case lies between the two.
describe('decisions against the four statements of ILAC-G8:09/2019', () => {
  const outcomes: Readonly<Record<string, string>> = {
    pass: 'conforms',
    'conditional pass': 'undecided',
    'conditional fail': 'undecided',
    fail: 'does-not-conform',
  };

  it.each(rules.self_made)('$y within $lower and $upper: $four_way', ({ y, u, lower, upper, four_way }) => {
    const criteria = [
      ...(lower === null ? [] : [{ finding: 'usable-current', requirement: atLeast(lower) }]),
      ...(upper === null ? [] : [{ finding: 'usable-current', requirement: atMost(upper) }]),
    ];
    const decisions = judge(headerOf({ criteria }), [finding('usable-current', y, u)]);
    expect(overall(decisions)).toBe(outcomes[four_way]);
  });
});
