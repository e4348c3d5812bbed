import { describe, expect, it } from 'vitest';
import { resultAsJson } from '../../src/report/json.js';
import type { Result } from '../../src/report/result.js';
import { eventsOf } from '../analysis/evidence-of.js';
import { resultOf, steps } from './fixed-record.js';

interface FindingJson {
  readonly name: string;
  readonly value: number | string;
  readonly unit: string | null;
  readonly standardUncertainty: number | null;
  readonly interval: readonly number[] | null;
  readonly coverage: number | null;
  readonly step: number | null;
  readonly note: string;
  readonly budget: readonly { readonly uncertainty: number; readonly degreesOfFreedom: number | null }[];
  readonly factors: readonly unknown[];
}

interface ResultJson {
  readonly ended: string;
  readonly reason: string | null;
  readonly outcome: string;
  readonly findings: readonly FindingJson[];
  readonly decisions: readonly Readonly<Record<string, unknown>>[];
}

/** As a reader of `--json` gets it. */
function read(result: Result): ResultJson {
  return JSON.parse(JSON.stringify(resultAsJson(result))) as ResultJson;
}

function named(name: string, { findings }: ResultJson): FindingJson {
  const finding = findings.find((one) => one.name === name);
  if (finding === undefined) throw new Error(`no ${name}`);
  return finding;
}

const whole = read(resultOf());
const events = eventsOf(steps);

describe('the result as JSON', () => {
  it('has the fields of the design, and beside them how whole the record is and its number of readings', () => {
    expect(Object.keys(whole)).toEqual([
      'format',
      'run',
      'module',
      'procedure',
      'ended',
      'reason',
      'outcome',
      'integrity',
      'readings',
      'findings',
      'decisions',
    ]);
    expect(whole).toMatchObject({
      format: 'railproof/run 1',
      run: '20261201T083000Z-K1-real-limit',
      module: 'K1',
      procedure: 'real-limit',
      ended: 'completed',
      reason: null,
      outcome: 'does-not-conform',
      integrity: { kind: 'whole' },
      readings: 651,
    });
  });

  it('has the fields of the design in each finding, and beside them its budget and its factors', () => {
    for (const finding of whole.findings) {
      expect(Object.keys(finding)).toEqual([
        'name',
        'value',
        'unit',
        'standardUncertainty',
        'bound',
        'interval',
        'coverage',
        'step',
        'note',
        'budget',
        'factors',
      ]);
    }
  });

  it('has the fields of the design in each decision, and a note beside them', () => {
    for (const decision of whole.decisions) {
      expect(Object.keys(decision)).toEqual(['finding', 'requirement', 'outcome', 'probability', 'note']);
    }
    expect(whole.decisions[0]).toMatchObject({
      finding: 'usable-current',
      requirement: 'at least 4 A (100 % of rated-current)',
      outcome: 'conforms',
    });
  });

  // Source: The Unified Code for Units of Measure, case-sensitive codes.
  it.each([
    ['open-circuit-voltage', 'V'],
    ['droop-resistance', 'Ohm'],
    ['load-regulation', '%'],
    ['dropout-current', 'A'],
    ['recovery-time', 's'],
  ])('gives the %s in %s, the unit’s code in UCUM', (name, unit) => {
    expect(named(name, whole).unit).toBe(unit);
  });

  it('gives a ratio in %, with its uncertainty, its interval and its budget', () => {
    const regulation = named('load-regulation', whole);
    // 4 A × 18 mΩ of 15 V.
    expect(regulation.value).toBeCloseTo(0.48, 3);
    const [low = NaN, high = NaN] = regulation.interval ?? [];
    expect((low + high) / 2).toBeCloseTo(Number(regulation.value), 9);
    expect(high - low).toBeLessThan(0.01);
    const combined = Math.hypot(...regulation.budget.map(({ uncertainty }) => uncertainty));
    expect(combined).toBeCloseTo(Number(regulation.standardUncertainty), 12);
  });

  it('covers 95 % where there is an interval, and says null where there is none', () => {
    expect(named('dropout-current', whole)).toMatchObject({ coverage: 0.95 });
    expect(named('recommended-current', whole)).toMatchObject({
      interval: null,
      coverage: null,
      standardUncertainty: null,
    });
  });

  it('gives a word without a unit', () => {
    expect(named('limit-style', whole)).toMatchObject({
      value: 'hiccup',
      unit: null,
      interval: null,
      step: 3,
    });
  });

  it('gives null for degrees of freedom without end, which JSON does not know', () => {
    const freedoms = named('droop-resistance', whole).budget.map(({ degreesOfFreedom }) => degreesOfFreedom);
    expect(freedoms).toEqual([19, null, null]);
  });

  it('lists the factors of the recommendation with their reasons', () => {
    expect(named('recommended-current', whole).factors).toHaveLength(3);
    expect(named('recommended-current', whole).factors[1]).toEqual({
      name: 'margin',
      factor: 0.8,
      reason: expect.stringContaining('procedure') as string,
    });
  });

  it.each([
    ['stopped', 'the operator stopped it', 'stopped'],
    ['failed', 'the load does not answer', 'stopped'],
  ] as const)('of a run that %s gives the reason', (how, reason, ended) => {
    const stopped = [...events.slice(0, 200), { t: 9, event: 'ended', how, reason, status: 3 } as const];
    expect(read(resultOf(stopped))).toMatchObject({ ended, reason });
  });

  it('of a record that was cut off has no reason', () => {
    expect(read(resultOf(events.slice(0, 200)))).toMatchObject({
      ended: 'cut-off',
      reason: null,
      outcome: 'undecided',
    });
  });

  it('is judged not-judged without criteria', () => {
    expect(read({ ...resultOf(), decisions: [], outcome: 'not-judged' }).outcome).toBe('not-judged');
  });
});
