import { describe, expect, it } from 'vitest';
import { earthFound, type EarthSeen } from '../../src/circuit/earth-found.js';
import type { OhmReadings } from '../../src/circuit/ohm-readings.js';
import { RunningMoments } from '../../src/statistics/running-moments.js';

const limits = { bondedBelow: 10, isolatedAbove: 1e6, openAbove: 10e6, leadResistanceBelow: 2 };

/** What was read, one after the other; Infinity is what the meter shows as open. */
function read(...ohms: readonly number[]): OhmReadings {
  const values = new RunningMoments();
  for (const each of ohms) if (Number.isFinite(each)) values.add(each);
  return { values, open: ohms.filter((each) => each === Infinity).length };
}

const sound = { together: read(0.12, 0.12, 0.12), apart: read(Infinity, Infinity, Infinity) };
const rootThree = Math.sqrt(3);

function found(earth: OhmReadings, more: Partial<EarthSeen> = {}) {
  return earthFound(
    { earth, before: sound, after: sound, promise: { ofReading: 0, fixed: 0 }, ...more },
    limits,
  );
}

describe('what readings of the earth are worth', () => {
  it('the leads are taken off', () => {
    expect(found(read(0.17, 0.17))).toMatchObject({ kind: 'proved', relation: 'bonded' });
    const bond = found(read(0.17, 0.17));
    expect(bond.kind === 'proved' && bond.resistance.value).toBeCloseTo(0.05, 12);
  });

  it('is as uncertain as the scatter, the leads and the meter leave it', () => {
    const later = { ...sound, together: read(0.16, 0.16, 0.16) };
    const promise = {
      ofReading: 0.01 * rootThree,
      fixed: 0.05 * rootThree,
      resolution: 0.02 * Math.sqrt(12),
    };
    const leaky = found(read(100.13, 100.14, 100.15), { after: later, promise });
    if (leaky.kind !== 'proved') throw new Error('not proved');
    const { value, budget } = leaky.resistance;
    expect(value).toBeCloseTo(100, 12);
    const by = new Map(budget.map(({ name, uncertainty }) => [name, uncertainty]));
    expect(by.get('spread of the readings')).toBeCloseTo(0.01 / rootThree, 12);
    expect(by.get('leads from one proof to the next')).toBeCloseTo(0.02 / rootThree, 12);
    expect(by.get('meter resistance, gain')).toBeCloseTo(1, 12);
    expect(by.get('meter resistance, offset')).toBeCloseTo(0.05, 12);
    expect(by.get('meter resistance, resolution')).toBeCloseTo(0.02, 12);
    expect(leaky.relation).toBe('leaky');
  });

  it('open is at least what the meter can show', () => {
    const isolated = found(read(Infinity, Infinity));
    expect(isolated).toMatchObject({
      kind: 'proved',
      relation: 'isolated',
      resistance: { value: undefined, interval: [10e6, Infinity] },
    });
  });

  it('open is no isolation where the meter shows open too early', () => {
    const early = { ...limits, openAbove: 200e3 };
    const seen = { earth: read(Infinity), before: sound, after: sound, promise: { ofReading: 0, fixed: 0 } };
    expect(earthFound(seen, early)).toMatchObject({ kind: 'proved', relation: 'undetermined' });
  });

  it('a contact that comes and goes can not be told', () => {
    expect(found(read(0.2, Infinity, 0.2))).toMatchObject({ relation: 'undetermined' });
    expect(found(read(47e3, 47e3, Infinity))).toMatchObject({ relation: 'undetermined' });
    expect(found(read(30e6, 30e6, Infinity))).toMatchObject({ relation: 'isolated' });
  });

  it.each([
    [
      'never proved before',
      { before: { together: undefined, apart: undefined } },
      'the leads were not proved before',
    ],
    [
      'never proved after',
      { after: { together: undefined, apart: undefined } },
      'the leads were not proved after',
    ],
    ['proved by half', { after: { ...sound, apart: undefined } }, 'the leads were not proved after'],
    [
      'open before',
      { before: { ...sound, together: read(Infinity) } },
      'held together before the measurement, the leads read open',
    ],
    [
      'open once after',
      { after: { ...sound, together: read(0.1, Infinity, 0.1) } },
      'held together after the measurement, the leads read open',
    ],
    [
      'worn out',
      { after: { ...sound, together: read(0.1, 8) } },
      'held together after the measurement, the leads read open',
    ],
    [
      'shorted before',
      { before: { ...sound, apart: read(0.1) } },
      'held apart before the measurement, the leads read a resistance',
    ],
    [
      'shorted once after',
      { after: { ...sound, apart: read(Infinity, 3e3) } },
      'held apart after the measurement, the leads read a resistance',
    ],
    [
      'silent',
      { before: { ...sound, together: read() } },
      'held together before the measurement, the leads read nothing',
    ],
  ] as const)('leads that were %s prove nothing, whatever was read with them', (_how, leads, why) => {
    for (const earth of [read(Infinity, Infinity), read(0.2, 0.2), read(47e3)]) {
      const seen = found(earth, leads);
      expect(seen.kind).toBe('unproved');
      expect(seen.kind === 'unproved' && seen.why).toContain(why);
    }
  });

  it('nothing read is nothing found', () => {
    expect(found(read())).toMatchObject({ kind: 'unproved' });
  });
});
