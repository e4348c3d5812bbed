import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import { bothWays, bothWaysNote } from '../../src/analysis/both-ways.js';
import type { CurvePoint } from '../../src/analysis/curve.js';
import { randomFrom } from '../../src/statistics/random.js';
import { evenly, evidenceOf, type Point } from './evidence-of.js';

const currents = evenly(0, 4, 9);
const brick = (current: number): number => 15.21 - 0.018 * current;

/** A ramp up and back, a point each second, of a module whose voltage moves as told. */
function there(
  moved: (second: number) => number,
  noise: (index: number) => number = () => 0,
): readonly Point[] {
  return [...currents, ...currents.toReversed()].map((current, second) => ({
    phase: second < currents.length ? 'ramp' : 'down',
    set: current,
    samples: [0, 1, 2].map((sample) => {
      const meter = brick(current) + moved(second) + noise(3 * second + sample);
      return { meter, load: meter - 0.035 * current, current };
    }),
  }));
}

function droopOf(points: readonly Point[]) {
  const findings = analyse(evidenceOf([{ kind: 'load-ramp', points }]));
  const droop = findings.find(({ name }) => name === 'droop-resistance');
  return { value: Number(droop?.value), note: droop?.note, findings };
}

const millivolt = (second: number): number => -0.001 * second;

describe('a ramp up and back', () => {
  it('gives the droop alone where the voltage drifts in time, which the way up alone does not', () => {
    const both = there(millivolt);
    expect(droopOf(both).value).toBeCloseTo(0.018, 12);
    // 1 mV a second, 0.5 A a second: 2 mΩ that are none.
    expect(droopOf(both.slice(0, currents.length)).value).toBeCloseTo(0.02, 12);
  });

  it('tells what the ways differ by', () => {
    expect(droopOf(there(millivolt)).note).toBe(
      'straight line through 9 points, each the mean of both ways; up to 17 mV lower on the way back: it warms or drifts',
    );
  });

  it('tells nothing of a difference that the scatter explains', () => {
    const random = randomFrom(3);
    const noise = Array.from({ length: 60 }, () => 0.001 * random.normal());
    const { note, value } = droopOf(
      there(
        () => 0,
        (index) => noise[index] ?? 0,
      ),
    );
    expect(note).toBe('straight line through 9 points, each the mean of both ways; the ways agree');
    expect(value).toBeCloseTo(0.018, 3);
  });

  it('seldom takes scatter for a drift', () => {
    let told = 0;
    for (let seed = 1; seed <= 300; seed += 1) {
      const random = randomFrom(seed);
      const points = there(
        () => 0,
        () => 0.001 * random.normal(),
      );
      if (droopOf(points).note?.includes('drifts')) told += 1;
    }
    expect(told).toBeLessThanOrEqual(3);
  });

  it('leaves out a way back that was broken off', () => {
    const broken = there(millivolt).slice(0, currents.length + 4);
    expect(droopOf(broken).value).toBeCloseTo(0.02, 12);
    expect(droopOf(broken).note).toBe('straight line through 9 points');
  });

  it('leaves the leads, and the knee of the way up, as they are', () => {
    const { findings } = droopOf(there(millivolt));
    expect(findings.find(({ name }) => name === 'lead-resistance')?.value).toBeCloseTo(0.035, 12);
    expect(findings.map(({ name }) => name)).not.toContain('limit-onset-current');
  });

  it('says nothing of drift for a meter that flips between two digits', () => {
    const point = (phase: 'ramp' | 'down', current: number, voltage: number): CurvePoint => ({
      step: 1,
      phase,
      set: current,
      current,
      voltage,
      deviation: 0,
      readings: 5,
    });
    const flips = currents.flatMap((current, index) => [
      point('ramp', current, 15),
      point('down', current, index % 2 === 0 ? 15 : 15.001),
    ]);
    // 1 mV in the last digit: 0.29 mV of standard uncertainty.
    const ways = bothWays(flips, 0.001 / Math.sqrt(12));
    expect(bothWaysNote(ways)).toBe(', each the mean of both ways; the ways agree');
  });
});
