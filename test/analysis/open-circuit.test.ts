import { describe, expect, it } from 'vitest';
import { openCircuitFindings } from '../../src/analysis/open-circuit.js';
import { randomFrom } from '../../src/statistics/random.js';
import { evidenceOf, headerOf, type Point } from './evidence-of.js';

const rootThree = Math.sqrt(3);

function idle(...voltages: readonly number[]): Point {
  return { phase: 'idle', outcome: 'measured', samples: voltages.map((meter) => ({ meter, current: 0 })) };
}

function idleVoltage(points: readonly Point[], header = headerOf()) {
  return openCircuitFindings(evidenceOf([{ kind: 'open-circuit', points }], header))[0];
}

describe('the open-circuit voltage', () => {
  it('is the mean of the idle points, its scatter that between them over √n', () => {
    const found = idleVoltage([idle(15.2, 15.21), idle(15.22, 15.23), idle(15.24, 15.25)]);
    expect(found?.value).toBeCloseTo(15.225, 12);
    // The points' means are 15.205, 15.225 and 15.245: s = 20 mV, three of them.
    expect(found?.budget[0]).toMatchObject({ kind: 'A', degreesOfFreedom: 2 });
    expect(found?.budget[0]?.uncertainty).toBeCloseTo(0.02 / rootThree, 12);
  });

  it('takes the scatter of the readings where there is one point', () => {
    const found = idleVoltage([idle(15.19, 15.2, 15.21)]);
    expect(found?.budget[0]?.uncertainty).toBeCloseTo(0.01 / rootThree, 12);
    expect(found?.budget[0]?.degreesOfFreedom).toBe(2);
  });

  it('is as uncertain as the meter’s gain, offset and last digit leave it', () => {
    const voltage = {
      ofReading: 0.001 * rootThree,
      fixed: 0.004 * rootThree,
      resolution: 0.002 * Math.sqrt(12),
    };
    const found = idleVoltage([idle(15, 15), idle(15, 15)], headerOf({ meter: { voltage } }));
    expect(found?.standardUncertainty).toBeCloseTo(Math.hypot(0.015, 0.004, 0.002), 12);
    expect(found?.interval?.[1]).toBeCloseTo(15 + 1.959964 * Math.hypot(0.015, 0.004, 0.002), 6);
  });

  it('comes from the load where no meter sits at the module', () => {
    const points = [{ ...idle(), samples: [{ load: 15.1, current: 0 }] }];
    const load = { voltage: { ofReading: 0, fixed: 0.01 * rootThree } };
    const found = idleVoltage(points, headerOf({ load, voltageFrom: 'load-terminals' }));
    expect(found?.value).toBe(15.1);
    expect(found?.budget.map(({ name }) => name)).toContain('load voltage, offset');
  });

  it('is there for a single reading, and not for none', () => {
    expect(idleVoltage([idle(15.2)])?.value).toBe(15.2);
    expect(idleVoltage([idle(), { ...idle(), samples: [{ meter: null, current: 0 }] }])).toBeUndefined();
    expect(idleVoltage([])).toBeUndefined();
  });

  it('tells of a drift that is none of chance, by how much and in what time', () => {
    const random = randomFrom(1);
    const sinking = Array.from({ length: 11 }, (_, at) => idle(15.2 - 0.002 * at + 0.0002 * random.normal()));
    expect(idleVoltage(sinking)?.note).toBe('drifted by -20 mV in 10 s');
    const exactly = Array.from({ length: 5 }, (_, at) => idle(15 + at / 16));
    expect(idleVoltage(exactly)?.note).toBe('drifted by 250 mV in 4.0 s');
  });

  it('does not call it a drift when it is less than the last digit, or scatter', () => {
    const voltage = { ofReading: 0, fixed: 0, resolution: 0.1 };
    const slightly = Array.from({ length: 11 }, (_, at) => idle(15.2 - 0.002 * at));
    expect(idleVoltage(slightly, headerOf({ meter: { voltage } }))?.note).toBe('');
    const alarms = Array.from({ length: 2000 }, (_, seed) => {
      const random = randomFrom(seed);
      return idleVoltage(Array.from({ length: 6 }, () => idle(15.2 + 0.001 * random.normal())))?.note;
    }).filter((note) => note !== '');
    expect(alarms.length).toBeLessThanOrEqual(8);
  });
});
