import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import { type Finding, measured } from '../../src/analysis/finding.js';
import { usableCurrent } from '../../src/analysis/usable-current.js';
import { evenly, evidenceOf, headerOf, ramp, type Recovered, type Step } from './evidence-of.js';

function limit(name: string, value: number, uncertainty: number): Finding {
  const budget = [{ name: 'all', kind: 'B', uncertainty, degreesOfFreedom: Infinity }] as const;
  return measured(name, 'current', value, budget, { step: 3, note: 'its own note' });
}

const ramped: Step = {
  kind: 'load-ramp',
  points: ramp(evenly(0, 4, 21), (current) => 15.2 - 0.02 * current),
};
const nothingHeld = { held: [] };

function usable(dropout?: Finding, unsteady?: Finding, recoveries: readonly Recovered[] = []) {
  const evidence = evidenceOf([{ kind: 'dropout-search', recoveries }]);
  return usableCurrent(evidence, { dropout, unsteady, ...nothingHeld });
}

describe('the usable current', () => {
  const swings = limit('unsteady-above-current', 5.1, 0.01);
  const drops = limit('dropout-current', 5.3, 0.01);

  it.each([
    ['the edge of steadiness where that is lower', drops, swings, 5.1, 'above that its output swings'],
    ['the dropout where that is lower', limit('', 4.9, 0.01), swings, 4.9, 'above that it drops out'],
    ['the dropout where it is steady up to there', drops, undefined, 5.3, 'above that it drops out'],
  ])('is %s', (_, dropout, unsteady, value, note) => {
    expect(usable(dropout, unsteady)).toMatchObject({
      finding: { name: 'usable-current', value, note, step: 3 },
      setBy: 'limit',
    });
  });

  it('keeps the interval and the budget of what sets it', () => {
    const { finding } = usable(drops, swings) ?? {};
    expect(finding?.interval).toEqual(swings.interval);
    expect(finding?.budget).toEqual(swings.budget);
  });

  it('relies on the lower of the two lower ends: an edge that is only roughly known may lie lower', () => {
    const roughly = limit('unsteady-above-current', 5.35, 0.4);
    expect(usable(drops, roughly)?.finding.interval?.[0]).toBe(roughly.interval?.[0]);
  });

  it.each(['stayed-off', 'came-back-after-cycling'] as const)('tells of a module that %s', (outcome) => {
    const note = usable(drops, undefined, [[outcome, 10, 10]])?.finding.note;
    expect(note).toBe('above that it drops out; an overload switches it off until its input is cycled');
  });

  it('is a least value where no limit was met, and says so', () => {
    const load = { current: { ofReading: 0.002 * Math.sqrt(3), fixed: 0.01 * Math.sqrt(3) } };
    const found = analyse(evidenceOf([ramped], headerOf({ load }))).find(
      ({ name }) => name === 'usable-current',
    );
    expect(found?.value).toBe(4);
    expect(found?.note).toBe('no limit was met up to 4.00 A');
    expect(found?.bound).toBe('least');
    expect(found?.standardUncertainty).toBeCloseTo(Math.hypot(0.008, 0.01), 12);
  });

  it('does not claim that no limit was met where the search dropped out at once', () => {
    const dropped = {
      set: 4.4,
      phase: 'start',
      outcome: 'dropped',
      samples: [{ meter: 1, current: 0 }],
    } as const;
    const findings = analyse(evidenceOf([ramped, { kind: 'dropout-search', points: [dropped] }]));
    const found = findings.find(({ name }) => name === 'usable-current');
    expect(found?.note).toBe('above that it drops out');
    expect(found?.interval?.[0]).toBeLessThan(4);
  });

  it('is not there where nothing was held', () => {
    expect(usable()).toBeUndefined();
  });
});
