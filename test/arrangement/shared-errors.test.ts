import { describe, expect, it } from 'vitest';
import { profilesOf } from '../../src/arrangement/profiles.js';
import type { TakenContribution } from '../../src/arrangement/module-profile.js';
import { readDrawer } from '../../src/cli/read-records.js';
import { limitFindings, madeRecord, type RecordMade } from './made-record.js';

const today = new Date('2026-12-02T12:00:00Z');

/** The budgets of the open-circuit voltages of K1 and K2, the second measured as a test says. */
function pairMeasured(second: RecordMade): readonly (readonly TakenContribution[])[] {
  const { profiles } = profilesOf(
    [madeRecord(), madeRecord({ modules: [{ name: 'K2' }], ...second })],
    today,
  );
  return profiles.map(({ openCircuit }) => openCircuit.budget);
}

function inCommon([one, other]: readonly (readonly TakenContribution[])[]): readonly string[] {
  return (one ?? []).flatMap(({ name, shared }) =>
    shared !== undefined && other?.some((line) => line.shared === shared) === true ? [name] : [],
  );
}

describe('the errors of an instrument', () => {
  it('are one and the same in two modules that were read with it: its gain and its offset', () => {
    expect(inCommon(pairMeasured({}))).toEqual(['meter voltage, gain', 'meter voltage, offset']);
  });

  it.each([
    ['another bench', { bench: 'corner bench' }],
    ['another identity', { meter: { identity: 'NURSERY,METER,2,1' } }],
    ['another address', { meter: { address: 'tcp://127.0.0.1:5026' } }],
    ['another driver', { meter: { driver: 'meter-query-scpi' } }],
  ])('are its own on %s', (_what, second) => {
    expect(inCommon(pairMeasured(second))).toEqual([]);
  });

  it('are kept apart by what was found: an error that lifts a voltage does not lift a droop the same way', () => {
    const [profile] = profilesOf([madeRecord()], today).profiles;
    const names = [profile?.openCircuit, profile?.droop].flatMap((taken) =>
      (taken?.budget ?? []).flatMap(({ shared }) => shared ?? []),
    );
    expect(names).toHaveLength(4);
    expect(new Set(names).size).toBe(4);
  });

  it('are nobody’s where a droop came out below nothing, where they would work the other way', () => {
    const { profiles } = profilesOf([madeRecord({ findings: limitFindings({ droop: -0.0005 }) })], today);
    expect(profiles[0]?.droop.budget.map(({ shared }) => shared)).toEqual([
      undefined,
      undefined,
      undefined,
      undefined,
    ]);
  });

  it('are found by the names that the findings give them, in records as they are kept', () => {
    const { profiles } = profilesOf(readDrawer(['fixtures/runs']).records, today);
    const [K1, K4] = ['K1', 'K4'].map((name) => profiles.find((profile) => profile.name === name));
    const common = (of: 'openCircuit' | 'droop' | 'usable'): readonly string[] =>
      inCommon([K1?.[of].budget ?? [], K4?.[of].budget ?? []]);
    expect(common('openCircuit')).toEqual(['meter voltage, gain', 'meter voltage, offset']);
    expect(common('droop')).toEqual(['meter voltage, gain', 'load current, gain']);
    expect(common('usable')).toEqual(['load current, gain', 'load current, offset']);
  });
});
