import { describe, expect, it } from 'vitest';
import { latched, recoveryFindings } from '../../src/analysis/recovery.js';
import { evidenceOf, type Recovered } from './evidence-of.js';

const after = (...recoveries: readonly Recovered[]) => evidenceOf([{ kind: 'dropout-search', recoveries }]);

describe('the recovery time', () => {
  it('is between the last look without the voltage and the first with it, of the slowest', () => {
    const [found] = recoveryFindings(
      after(['came-back', 0, 0.06], ['came-back', 0.5, 0.7], ['came-back', 0.3, 0.4]),
    );
    expect(found).toMatchObject({
      name: 'recovery-time',
      dimension: 'time',
      step: 1,
      note: 'the slowest of 3',
    });
    expect(found?.value).toBeCloseTo(0.6, 12);
    // Half a look, and half the way from the quickest (0.03 s) to the slowest (0.6 s).
    expect(found?.standardUncertainty).toBeCloseTo(Math.hypot(0.1, 0.57 / 2) / Math.sqrt(3), 12);
  });

  it('says that the voltage was back before anyone looked', () => {
    const [found] = recoveryFindings(after(['came-back', 0, 0.06]));
    expect(found?.note).toBe('one recovery; back before the first look');
    expect(found?.value).toBeCloseTo(0.03, 12);
  });

  it('leaves out one across which a connection was lost, as long as there is another', () => {
    const untimed = {
      event: 'recovery',
      step: 1,
      outcome: 'came-back',
      after: 0,
      within: 4,
      untimed: true,
    } as const;
    const among = evidenceOf([
      { kind: 'dropout-search', recoveries: [['came-back', 0.5, 0.7]], more: [untimed] },
    ]);
    const [found] = recoveryFindings(among);
    expect(found).toMatchObject({ note: 'one recovery' });
    expect(found?.value).toBeCloseTo(0.6, 12);
    const [alone] = recoveryFindings(evidenceOf([{ kind: 'dropout-search', more: [untimed] }]));
    expect(alone).toMatchObject({ value: 2, note: 'one recovery; back before the first look' });
  });

  it('of a module that stayed off is at least what it was waited for, however quick it was before', () => {
    const [finding] = recoveryFindings(
      after(['came-back', 0, 0.1], ['stayed-off', 10, 10.02], ['came-back-after-cycling', 1, 1.1]),
    );
    expect(finding).toMatchObject({ value: 10.02, bound: 'least' });
    expect(finding?.note).toContain('until its input is cycled');
  });

  it('is not there where nothing was overloaded', () => {
    expect(recoveryFindings(after())).toEqual([]);
  });

  it('does not throw at a record made elsewhere that has the two looks the other way round', () => {
    expect(recoveryFindings(after(['came-back', 0.7, 0.5]))[0]?.value).toBeCloseTo(0.6, 12);
  });
});

describe('a module that latches off', () => {
  it.each([
    [[], false],
    [[['came-back', 0, 0.1]], false],
    [[['stayed-off', 10, 10]], true],
    [
      [
        ['came-back', 0, 0.1],
        ['came-back-after-cycling', 1, 1.1],
      ],
      true,
    ],
  ] as [readonly Recovered[], boolean][])('is told by its recoveries: %j', (recoveries, expected) => {
    expect(latched(after(...recoveries))).toBe(expected);
  });
});
