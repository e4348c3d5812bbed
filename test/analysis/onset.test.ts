import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { Finding } from '../../src/analysis/finding.js';
import { randomFrom } from '../../src/statistics/random.js';
import { evenly, evidenceOf, headerOf, ramp } from './evidence-of.js';

const currents = evenly(0, 4, 21);

function onsetOf(voltage: (current: number) => number, header = headerOf()): Finding | undefined {
  const evidence = evidenceOf([{ kind: 'load-ramp', points: ramp(currents, voltage) }], header);
  return analyse(evidence).find((finding) => finding.name === 'limit-onset-current');
}

/** Falls by 18 mΩ up to the knee at 3.05 A, and by 1 Ω beyond. */
const bent = (current: number): number => 15.21 - 0.018 * current - 0.982 * Math.max(0, current - 3.05);

describe('the onset of the limit', () => {
  it('is not seen where there is a line and noise, whatever the seed', () => {
    const alarms = Array.from({ length: 3000 }, (_, seed) => {
      const random = randomFrom(seed);
      return onsetOf((current) => 15.21 - 0.018 * current + 0.001 * random.normal());
    }).filter((finding) => finding !== undefined);
    // The strict level is 1 in 10 000 before the search for the break; a few times that with it.
    expect(alarms.length).toBeLessThanOrEqual(3);
  });

  it('is not seen in the last digit of a quiet module either', () => {
    const alarms = Array.from({ length: 500 }, (_, seed) => {
      const random = randomFrom(seed);
      const noisy = (current: number): number => 15.21 - 0.018 * current + 0.0002 * random.normal();
      return onsetOf((current) => Math.round(noisy(current) * 1000) / 1000);
    }).filter((finding) => finding !== undefined);
    expect(alarms).toEqual([]);
  });

  it('is found where the curve bends, within its 95 % interval', () => {
    const knees = Array.from({ length: 500 }, (_, seed) => {
      const random = randomFrom(seed);
      return onsetOf((current) => bent(current) + 0.002 * random.normal());
    });
    const inside = knees.filter((knee) => {
      const [low, high] = knee?.interval ?? [NaN, NaN];
      return low <= 3.05 && 3.05 <= high;
    });
    expect(knees.filter((knee) => knee === undefined)).toEqual([]);
    // Three standard deviations of a binomial count about 95 %: ±3 %.
    expect(inside.length / knees.length).toBeGreaterThan(0.92);
    expect(inside.length / knees.length).toBeLessThan(0.98);
  });

  it('says how many points lie beyond it, and in which step', () => {
    const random = randomFrom(3);
    expect(onsetOf((current) => bent(current) + 0.001 * random.normal())).toMatchObject({
      step: 1,
      note: '5 points beyond it',
    });
  });

  it('is left unsaid where fewer than three points lie beyond: they could be anything', () => {
    const late = (current: number): number => 15.21 - 0.018 * current - Math.max(0, current - 3.7);
    expect(onsetOf(late)).toBeUndefined();
  });

  it('is not seen in a droop that bends only slightly, however quiet the readings', () => {
    expect(onsetOf((current) => 15.21 - 0.018 * current - 0.018 * Math.max(0, current - 2))).toBeUndefined();
  });

  it('is not seen where the voltage rises faster from some current on', () => {
    expect(onsetOf((current) => 15.21 - 0.018 * current + Math.max(0, current - 2))).toBeUndefined();
  });

  it('is not seen where the module drops out at once', () => {
    const points = currents.map((current) => ({
      set: current,
      outcome: current < 3.3 ? ('held' as const) : ('dropped' as const),
      samples: [
        { meter: current < 3.3 ? 15.21 - 0.018 * current : 0.2, current: current < 3.3 ? current : 0.1 },
      ],
    }));
    const names = analyse(evidenceOf([{ kind: 'load-ramp', points }])).map((finding) => finding.name);
    expect(names).not.toContain('limit-onset-current');
    expect(names).toContain('dropout-current');
  });

  it('is no surer than the last digit of the meter and the promise of the load allow', () => {
    const meter = { voltage: { ofReading: 0, fixed: 0, resolution: 0.01 * Math.sqrt(12) } };
    const load = {
      ...headerOf().instruments[0]?.accuracy,
      current: { ofReading: 0.002 * Math.sqrt(3), fixed: 0.01 * Math.sqrt(3) },
    };
    const slightly = (current: number): number => bent(current) + (Math.round(current * 5) % 2) * 1e-5;
    const coarse = onsetOf(slightly, headerOf({ meter, load }));
    const fine = onsetOf(slightly);
    const lines = Object.fromEntries(coarse?.budget.map((line) => [line.name, line.uncertainty]) ?? []);
    // At the knee a voltage uncertain by 10 mV/√n on either line meets a change of slope of 0.98 Ω.
    expect(lines['break of the two-piece line']).toBeGreaterThan(0.005);
    expect(fine?.budget[0]?.uncertainty).toBeLessThan(0.0001);
    expect(lines['load current, gain']).toBeCloseTo(0.002 * 3.05, 4);
    expect(lines['load current, offset']).toBeCloseTo(0.01, 12);
  });
});
