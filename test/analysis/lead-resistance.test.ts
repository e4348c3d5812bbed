import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { Finding } from '../../src/analysis/finding.js';
import { evenly, evidenceOf, headerOf, type Point, ramp } from './evidence-of.js';

const rootThree = Math.sqrt(3);
const currents = evenly(0, 4, 21);
const brick = (current: number): number => 15.21 - 0.018 * current;

function leadsOf(points: readonly Point[], header = headerOf()): Finding | undefined {
  const findings = analyse(evidenceOf([{ kind: 'load-ramp', points }], header));
  return findings.find(({ name }) => name === 'lead-resistance');
}

/** As instruments with these gains, and offsets besides, read the same ramp. */
function misread(meter: number, load: number, current: number): readonly Point[] {
  return ramp(currents, brick).map((point) => ({
    ...point,
    samples: point.samples.map((sample) => ({
      meter: Number(sample.meter) * meter + 0.2,
      load: Number(sample.load) * load - 0.1,
      current: Number(sample.current) * current + 0.05,
    })),
  }));
}

describe('the resistance of the leads', () => {
  it('is the growth of the voltage between module and load with the current', () => {
    expect(leadsOf(ramp(currents, brick))?.value).toBeCloseTo(0.035, 12);
  });

  it('does not care for the offsets of the instruments', () => {
    expect(leadsOf(misread(1, 1, 1))?.value).toBeCloseTo(0.035, 12);
  });

  it.each([
    ['meter voltage, gain', misread(1.001, 1, 1), 0.001 * 0.018],
    ['load voltage, gain', misread(1, 1.001, 1), 0.001 * (0.018 + 0.035)],
    ['load current, gain', misread(1, 1, 1.001), 0.001 * 0.035],
  ])('is off by what the budget says for the %s', (line, points, expected) => {
    const off = Math.abs(Number(leadsOf(points)?.value) - 0.035);
    expect(off / expected).toBeCloseTo(1, 2);
    const accuracy = { ofReading: 0.001 * rootThree, fixed: 1 };
    const header = headerOf({ meter: { voltage: accuracy }, load: { voltage: accuracy, current: accuracy } });
    const budget = leadsOf(ramp(currents, brick), header)?.budget ?? [];
    expect(budget.find(({ name }) => name === line)?.uncertainty).toBeCloseTo(expected, 10);
    expect(budget).toHaveLength(4);
  });

  it('is no surer than the last digits of both voltages allow', () => {
    const digit = { voltage: { ofReading: 0, fixed: 0, resolution: 0.001 * Math.sqrt(12) } };
    const found = leadsOf(ramp(currents, brick), headerOf({ meter: digit, load: digit }));
    expect(found?.standardUncertainty).toBeCloseTo((0.001 * Math.SQRT2) / Math.sqrt(30.8), 9);
  });

  it.each([
    [0.035, ''],
    [0.0399, ''],
    [0.045, 'more than the bench file says: look for a loose or burnt joint'],
  ])('of %d Ω where the file says 35 mΩ ± 5 mΩ: %s', (resistance, note) => {
    expect(leadsOf(ramp(currents, brick, resistance))?.note).toBe(note);
  });

  it('raises no alarm for leads that may be as the file says, within the uncertainty', () => {
    const load = { voltage: { ofReading: 0.3, fixed: 0 }, current: { ofReading: 0, fixed: 0 } };
    expect(leadsOf(ramp(currents, brick, 0.045), headerOf({ load }))?.note).toBe('');
  });

  it('is not measured where nothing sits at the module', () => {
    expect(leadsOf(ramp(currents, brick), headerOf({ voltageFrom: 'load-terminals' }))).toBeUndefined();
  });

  it('leaves out points that were not held or not read', () => {
    const [first, second, ...rest] = ramp(currents, brick);
    const bad: Point[] = [
      { ...first, outcome: 'dropped', samples: [{ meter: 3, load: 1, current: 2 }] },
      { ...second, samples: [{ meter: null, load: 1, current: 2 }] },
    ];
    expect(leadsOf([...bad, ...rest])?.value).toBeCloseTo(0.035, 12);
    expect(leadsOf([...bad, ...rest.slice(0, 3)])).toBeUndefined();
  });
});
