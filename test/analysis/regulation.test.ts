import { describe, expect, it } from 'vitest';
import thermometer from '../../fixtures/reference/gum-h3.json' with { type: 'json' };
import { analyse } from '../../src/analysis/analyse.js';
import type { Finding } from '../../src/analysis/finding.js';
import { randomFrom } from '../../src/statistics/random.js';
import { coverageFactor } from '../../src/statistics/student-t.js';
import fc from '../property.js';
import { evenly, evidenceOf, headerOf, type Point, ramp } from './evidence-of.js';

const rootThree = Math.sqrt(3);
const currents = evenly(0, 4, 21);
const brick = (current: number): number => 15.21 - 0.018 * current;

function findingsOf(points: readonly Point[], header = headerOf()): readonly Finding[] {
  return analyse(evidenceOf([{ kind: 'load-ramp', points }], header));
}

function named(name: string, findings: readonly Finding[]): Finding {
  const finding = findings.find((one) => one.name === name);
  if (finding === undefined)
    throw new Error(`no ${name} among ${findings.map((one) => one.name).join(', ')}`);
  return finding;
}

function lines(finding: Finding): Readonly<Record<string, number>> {
  return Object.fromEntries(finding.budget.map((line) => [line.name, line.uncertainty]));
}

describe('the line of regulation, on exact points', () => {
  const findings = findingsOf(ramp(currents, brick));

  it('gives the droop and the voltage at no load that the points were made with', () => {
    expect(named('droop-resistance', findings).value).toBeCloseTo(0.018, 12);
    expect(named('open-circuit-voltage', findings).value).toBeCloseTo(15.21, 12);
    expect(named('open-circuit-voltage', findings).note).toBe('by extending the line to no load');
  });

  it('says where the voltage never moved by a digit: a meter that stopped measuring looks the same', () => {
    const still = named('droop-resistance', findingsOf(ramp(currents, () => 15.2)));
    expect(still.value).toBeCloseTo(0, 12);
    expect(still.note).toContain('see that what read it is live');
    expect(named('droop-resistance', findings).note).not.toContain('live');
  });

  it('gives the load regulation as the fall up to rated current over the rated voltage', () => {
    // 4 A × 18 mΩ = 72 mV; 72 mV of 15 V = 0.48 %.
    expect(named('load-regulation', findings).value).toBeCloseTo(0.0048, 12);
  });

  it('says nothing of load regulation when the ramp ended well below rated current', () => {
    const short = findingsOf(ramp(evenly(0, 3.6, 21), brick));
    expect(short.map((finding) => finding.name)).not.toContain('load-regulation');
    expect(named('droop-resistance', short).value).toBeCloseTo(0.018, 12);
  });

  it('takes the idle reading, not the line, where there was an open-circuit step', () => {
    const idle = { phase: 'idle', outcome: 'measured', samples: [{ meter: 15.3, current: 0 }] } as const;
    const evidence = evidenceOf([
      { kind: 'open-circuit', points: [idle] },
      { kind: 'load-ramp', points: ramp(currents, brick) },
    ]);
    const voltages = analyse(evidence).filter((finding) => finding.name === 'open-circuit-voltage');
    expect(voltages.map((finding) => finding.value)).toEqual([15.3]);
  });

  it('says nothing of droop for three points, or for many at one current', () => {
    const three = findingsOf(ramp([0, 1, 2], brick));
    const one = findingsOf(ramp([4, 4, 4, 4, 4], brick));
    for (const findings of [three, one]) {
      expect(findings.map((finding) => finding.name)).not.toContain('droop-resistance');
      expect(findings.map((finding) => finding.name)).not.toContain('lead-resistance');
    }
  });
});

// Source: JCGM 100:2008, H.3 (calibration of a thermometer), Table H.6; values and how they were obtained
// are in the fixture. The thermometer's reading is taken as a current and its correction as a voltage.
describe('the line of regulation against JCGM 100:2008, H.3', () => {
  const points = ramp(
    thermometer.t_C.map((t) => t - thermometer.t0_C),
    (current) => {
      const place = thermometer.t_C.findIndex((t) => t - thermometer.t0_C === current);
      return thermometer.b_C[place] ?? Number.NaN;
    },
  );
  const findings = findingsOf(points, headerOf({ rated: { voltage: 15, current: 6 } }));
  const { published, recomputed } = thermometer;

  it.each([
    ['droop-resistance', -1, recomputed.slope, recomputed.u_slope, published.slope, published.u_slope, 5],
    [
      'open-circuit-voltage',
      1,
      recomputed.intercept,
      recomputed.u_intercept,
      published.intercept,
      published.u_intercept,
      4,
    ],
  ] as const)('%s', (name, sign, value, uncertainty, publishedValue, publishedUncertainty, decimals) => {
    const finding = named(name, findings);
    const typeA = finding.budget.filter((line) => line.kind === 'A');
    expect(sign * Number(finding.value)).toBeCloseTo(value, 12);
    expect((sign * Number(finding.value)).toFixed(decimals)).toBe(publishedValue.toFixed(decimals));
    expect(typeA).toHaveLength(1);
    expect(typeA[0]?.uncertainty).toBeCloseTo(uncertainty, 12);
    expect(typeA[0]?.uncertainty.toFixed(decimals)).toBe(publishedUncertainty.toFixed(decimals));
    expect(typeA[0]?.degreesOfFreedom).toBe(9);
  });

  it('covers 95 % with Student’s t at nine degrees of freedom, the promises being nothing', () => {
    const [low, high] = named('droop-resistance', findings).interval ?? [NaN, NaN];
    // 2.262 is t for 95 % and 9 degrees of freedom, JCGM 100:2008, Table G.2 (2.26 there).
    expect((high - low) / 2 / recomputed.u_slope).toBeCloseTo(2.262, 3);
    expect(coverageFactor(9).toFixed(2)).toBe('2.26');
  });
});

describe('what the instruments promise', () => {
  const meter = { voltage: { ofReading: 0.001 * rootThree, fixed: 0.005 * rootThree } };
  const load = {
    voltage: { ofReading: 0.002 * rootThree, fixed: 0.02 * rootThree },
    current: { ofReading: 0.003 * rootThree, fixed: 0.01 * rootThree },
  };

  it('a gain error makes droop uncertain by its share of it, an offset does not', () => {
    const findings = findingsOf(ramp(currents, brick), headerOf({ meter, load }));
    const budget = lines(named('droop-resistance', findings));
    expect(Object.keys(budget)).toEqual([
      'scatter about the line',
      'meter voltage, gain',
      'load current, gain',
    ]);
    expect(budget['meter voltage, gain']).toBeCloseTo(0.001 * 0.018, 12);
    expect(budget['load current, gain']).toBeCloseTo(0.003 * 0.018, 12);
  });

  it('an offset of either instrument makes the voltage at no load uncertain', () => {
    const findings = findingsOf(ramp(currents, brick), headerOf({ meter, load }));
    const budget = lines(named('open-circuit-voltage', findings));
    expect(budget['meter voltage, gain']).toBeCloseTo(0.001 * 15.21, 10);
    expect(budget['meter voltage, offset']).toBeCloseTo(0.005, 12);
    expect(budget['load current, offset']).toBeCloseTo(0.01 * 0.018, 12);
  });

  it.each([
    ['the meter reads 1 % too much', { meter: 1.01, current: 1 }, 0.018 * 1.01],
    ['the load reads 1 % too much current', { meter: 1, current: 1.01 }, 0.018 / 1.01],
  ])('%s: the droop that was found is off by that and the offset does nothing', (_, gain, expected) => {
    const points = ramp(currents, brick).map((point) => ({
      ...point,
      samples: point.samples.map(({ meter, current }) => ({
        meter: Number(meter) * gain.meter + 0.3,
        current: Number(current) * gain.current - 0.2,
      })),
    }));
    expect(named('droop-resistance', findingsOf(points)).value).toBeCloseTo(expected, 12);
  });

  it('the leads enter only where the voltage is read at the load’s terminals', () => {
    const leads = { resistance: 0.04, uncertainty: 0.006 * rootThree };
    const atLoad = headerOf({ meter, load, leads, voltageFrom: 'load-terminals' });
    const found = named('droop-resistance', findingsOf(ramp(currents, brick, 0.04), atLoad));
    const budget = lines(found);
    expect(found.value).toBeCloseTo(0.018, 10);
    expect(budget['resistance of the leads']).toBeCloseTo(0.006, 12);
    const atModule = findingsOf(ramp(currents, brick, 0.04), headerOf({ meter, load, leads }));
    expect(lines(named('droop-resistance', atModule))).not.toHaveProperty('resistance of the leads');
    expect(
      lines(named('open-circuit-voltage', findingsOf(ramp(currents, brick, 0.04), atLoad))),
    ).not.toHaveProperty('resistance of the leads');
  });

  it('at the load’s terminals a gain error acts on the fall that the load read: module and leads', () => {
    const leads = { resistance: 0.04, uncertainty: 0 };
    const header = headerOf({ load, leads, voltageFrom: 'load-terminals' });
    const findings = findingsOf(ramp(currents, brick, 0.04), header);
    const droop = lines(named('droop-resistance', findings));
    expect(droop['load voltage, gain']).toBeCloseTo(0.002 * (0.018 + 0.04), 10);
    expect(droop['load current, gain']).toBeCloseTo(0.003 * (0.018 + 0.04), 10);
    const idle = lines(named('open-circuit-voltage', findings));
    expect(idle['load current, offset']).toBeCloseTo(0.01 * (0.018 + 0.04), 10);
  });

  it.each([
    ['voltage', { voltage: 1.01, current: 1 }, 0.01],
    ['current', { voltage: 1, current: 1.01 }, 0.01],
  ] as const)('…as a load whose %s reads 1 %% too much shows', (what, gain, error) => {
    const leads = { resistance: 0.04, uncertainty: 0 };
    const header = headerOf({ leads, voltageFrom: 'load-terminals' });
    const points = ramp(currents, brick, 0.04).map((point) => ({
      ...point,
      samples: point.samples.map((sample) => ({
        load: Number(sample.load) * gain.voltage,
        current: Number(sample.current) * gain.current,
      })),
    }));
    const off = Math.abs(Number(named('droop-resistance', findingsOf(points, header)).value) - 0.018);
    expect(off / (error * (0.018 + 0.04)), what).toBeCloseTo(1, 1);
  });
});

describe('the resolution of the meter', () => {
  const resolution = 0.01 * Math.sqrt(12);
  const header = headerOf({ meter: { voltage: { ofReading: 0, fixed: 0, resolution } } });

  it('is the least scatter: points that lie on a line to the last digit are not known better', () => {
    const finding = named('droop-resistance', findingsOf(ramp(currents, brick), header));
    // The spread of 21 points evenly from 0 A to 4 A: (4/20)² · 21·(21² − 1)/12 = 30.8 A².
    expect(finding.standardUncertainty).toBeCloseTo(0.01 / Math.sqrt(30.8), 12);
  });

  it('adds nothing where the scatter is larger', () => {
    const scattered = ramp(
      currents,
      (current) => brick(current) + (Math.round(current * 5) % 2 === 0 ? 0.1 : -0.1),
    );
    const coarse = named('droop-resistance', findingsOf(scattered, header));
    const fine = named('droop-resistance', findingsOf(scattered));
    expect(coarse.standardUncertainty).toBe(fine.standardUncertainty);
  });
});

describe('the line of regulation moves with its points', () => {
  const scattered = fc.array(
    fc.integer({ min: -500, max: 500 }).map((microvolts) => microvolts * 1e-6),
    {
      minLength: 21,
      maxLength: 21,
    },
  );
  const droopOf = (noise: readonly number[], change: (voltage: number) => number, stretch = 1): Finding => {
    const points = currents.map((current, index) => ({
      set: current * stretch,
      samples: [{ meter: change(brick(current) + (noise[index] ?? 0)), current: current * stretch }],
    }));
    return named('droop-resistance', findingsOf(points));
  };

  it('a shift of all voltages leaves the droop and its uncertainty alone', () => {
    fc.assert(
      fc.property(scattered, fc.integer({ min: -9, max: 40 }), (noise, shift) => {
        const here = droopOf(noise, (voltage) => voltage);
        const there = droopOf(noise, (voltage) => voltage + shift);
        expect(there.value).toBeCloseTo(Number(here.value), 10);
        expect(there.standardUncertainty).toBeCloseTo(Number(here.standardUncertainty), 10);
      }),
      { numRuns: 40 },
    );
  });

  it('a scale of voltages or currents scales the droop and its uncertainty', () => {
    fc.assert(
      fc.property(
        scattered,
        fc.constantFrom(0.1, 0.5, 2, 7),
        fc.constantFrom(0.2, 1, 3),
        (noise, up, along) => {
          const here = droopOf(noise, (voltage) => voltage);
          const there = droopOf(noise, (voltage) => voltage * up, along);
          expect((Number(there.value) * along) / up).toBeCloseTo(Number(here.value), 10);
          expect((Number(there.standardUncertainty) * along) / up).toBeCloseTo(
            Number(here.standardUncertainty),
            10,
          );
        },
      ),
      { numRuns: 40 },
    );
  });
});

describe('the 95 % interval of the droop', () => {
  it('holds the truth in about 95 % of ramps whose only error is scatter', () => {
    const random = randomFrom(31);
    const ramps = 2000;
    let held = 0;
    for (let index = 0; index < ramps; index += 1) {
      const points = ramp(evenly(0, 4, 11), (current) => brick(current) + 0.001 * random.normal());
      const [low, high] = named('droop-resistance', findingsOf(points)).interval ?? [NaN, NaN];
      if (low <= 0.018 && 0.018 <= high) held += 1;
    }
    // Three standard deviations of a binomial count about 95 %: ±1.5 %.
    expect(held / ramps).toBeGreaterThan(0.935);
    expect(held / ramps).toBeLessThan(0.965);
  });
});

describe('a module that limits within the ramp', () => {
  it.each([1, 2, 3, 5])('%i held points beyond the knee do not bend the line of regulation', (beyond) => {
    const knee = (currents[20 - beyond] ?? NaN) + 0.1;
    const limited = (current: number): number =>
      current < knee ? brick(current) : (brick(knee) * knee) / current;
    const random = randomFrom(beyond);
    const points = ramp(currents, (current) => limited(current) + 0.001 * random.normal());
    const finding = named('droop-resistance', findingsOf(points));
    const [low, high] = finding.interval ?? [NaN, NaN];
    expect(low).toBeLessThan(0.018);
    expect(high).toBeGreaterThan(0.018);
    expect(high - low).toBeLessThan(0.002);
  });
});
