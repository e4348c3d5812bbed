import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import { soakedOf, soakFindings } from '../../src/analysis/soak.js';
import { collected } from './evidence-of.js';
import { soak, type SoakGiven, thermometerHeader, warming } from './soak-events.js';

const evidence = (given: SoakGiven, header = thermometerHeader()) => collected(soak(1, 0, given), header);

function named(name: string, given: SoakGiven, header = thermometerHeader()) {
  return soakFindings(evidence(given, header)).find((one) => one.name === name);
}

function lines(name: string, given: SoakGiven, header = thermometerHeader()) {
  return Object.fromEntries(
    (named(name, given, header)?.budget ?? []).map((one) => [one.name, one.uncertainty]),
  );
}

const room = { ambient: { temperature: 22, uncertainty: 0.5 } };

describe('how warm a soak makes a module', () => {
  it('is over the ambient of the bench file, where it gives one', () => {
    const found = named('temperature-rise', { temperature: warming }, thermometerHeader(room));
    expect(found?.value).toBeCloseTo(37, 3);
    expect(found?.note).toBe('it settles at 59 °C in air of 22 °C, at 4.00 A');
    const budget = lines('temperature-rise', { temperature: warming }, thermometerHeader(room));
    expect(budget).toMatchObject({
      'thermometer temperature, gain': expect.closeTo(0.59, 4) as number,
      'thermometer temperature, offset': expect.closeTo(1, 9) as number,
      ambient: expect.closeTo(0.5 / Math.sqrt(3), 9) as number,
    });
  });

  it('is else over the temperature before the load, in which an offset drops out and its own warmth does not', () => {
    const found = named('temperature-rise', { temperature: warming });
    expect(found?.value).toBeCloseTo(36, 3);
    expect(found?.note).toContain('the air was not measured: the temperature before the load counts for it');
    const budget = lines('temperature-rise', { temperature: warming });
    expect(budget).not.toHaveProperty('thermometer temperature, offset');
    expect(budget).toMatchObject({
      'thermometer temperature, gain': expect.closeTo(0.36, 4) as number,
      'how much warmer than its air it was': expect.closeTo(2 / Math.sqrt(3), 9) as number,
    });
  });

  it('is predicted where the soak was cut short, and the note says so', () => {
    const found = named('temperature-rise', { temperature: warming, until: 1080 });
    expect(found?.value).toBeCloseTo(36, 3);
    // 1 − e^(−1.5) is 77.7 %.
    expect(found?.note).toContain('predicted, not reached: the soak saw 77 % of it');
    expect(soakedOf(evidence({ temperature: warming, until: 1080 }))).toMatchObject({
      current: 4,
      settled: false,
      ambient: 23,
      limit: undefined,
    });
    expect(soakedOf(evidence({ temperature: warming }))).toMatchObject({ settled: true });
  });

  it('says that it would go above its limit', () => {
    const header = thermometerHeader(room, { limit: 50 });
    const given = { temperature: warming, until: 1080 };
    expect(named('temperature-rise', given, header)?.note).toContain('above its limit of 50 °C');
    expect(soakedOf(evidence(given, header))?.limit).toBe(50);
  });

  it('is a least value where nothing tells where it goes, and no derating rests on it', () => {
    const given = { temperature: (t: number) => 23 + t / 100, until: 900 };
    const found = named('temperature-rise', given);
    expect(found).toMatchObject({ bound: 'least', value: expect.closeTo(9, 6) as number });
    expect(found?.note).toContain('still on its way, and too early to tell where to');
    expect(soakedOf(evidence(given))).toBeUndefined();
  });

  it('is not told without a thermometer', () => {
    const names = soakFindings(evidence({})).map(({ name }) => name);
    expect(names).toEqual(['thermal-drift']);
    expect(soakedOf(evidence({}))).toBeUndefined();
  });

  it('is that of the soak at the highest current', () => {
    const header = thermometerHeader(room);
    const two = collected(
      [
        ...soak(1, 0, { current: 4, temperature: warming }),
        ...soak(2, 20_000, { current: 2, temperature: (t) => 23 + 9 * (1 - Math.exp(-t / 720)) }),
      ],
      { ...header, steps: [...header.steps, ...header.steps] },
    );
    expect(soakedOf(two)?.current).toBe(4);
    expect(soakFindings(two).filter(({ name }) => name === 'temperature-rise')).toHaveLength(1);
  });

  it('is less sure where the steps before had warmed the module', () => {
    const worked = collected(
      [
        ...soak(1, 0, { current: 2, until: 100, temperature: () => 30 }),
        ...soak(2, 500, { temperature: warming }),
      ],
      { ...thermometerHeader(), steps: [] },
    );
    const found = soakFindings(worked).find(({ name }) => name === 'temperature-rise');
    expect(found?.note).toContain('though the steps before had warmed the module');
    expect(found?.budget).toContainEqual(
      expect.objectContaining({
        name: 'how much warmer than its air it was',
        uncertainty: 5 / Math.sqrt(3),
      }),
    );
  });
});

describe('how slowly it gets warm', () => {
  it('is the time constant of the curve, with an interval that is never below zero', () => {
    const found = named('thermal-time-constant', { temperature: warming });
    expect(found?.value).toBeCloseTo(720, 2);
    expect(found?.interval?.[0]).toBeGreaterThan(0);
  });
});

describe('what the voltage does meanwhile', () => {
  it('is its slope at the end in volts an hour, and what it moved by in all', () => {
    const sagging = (t: number): number => 15.1 - 0.036 * (t / 3600);
    const found = named('thermal-drift', { voltage: sagging, until: 3600 });
    expect(found).toMatchObject({ dimension: 'voltage-rate', value: expect.closeTo(-0.036, 9) as number });
    expect(found?.note).toBe('over the last 10 min; in all it fell by 36 mV in 60 min');
  });

  it('is told of no digit that nobody could read', () => {
    const still = named('thermal-drift', { voltage: (t) => 15.1 + t * 1e-15, until: 3600 });
    expect(still?.note).toBe('over the last 10 min; in all it did not move by what could be read in 60 min');
  });
});

describe('a soak that ends in a dropout', () => {
  const usableOf = (...soaks: readonly SoakGiven[]) => {
    const events = soaks.flatMap((given, index) => [...soak(index + 1, index * 10_000, given)]);
    return analyse(collected(events, { ...thermometerHeader(), steps: [] })).find(
      ({ name }) => name === 'usable-current',
    );
  };

  it('leaves what the module holds when warm between what another soak held and what this one dropped', () => {
    const found = usableOf({ current: 4 }, { current: 5, dropsAt: 600 });
    expect(found?.value).toBeCloseTo(4.5, 9);
    expect(found?.standardUncertainty).toBeCloseTo(0.5 / Math.sqrt(3), 9);
    expect(found?.note).toContain('warm it drops out at 5.00 A, after 10 min; a soak held 4.00 A');
  });

  it('leaves nothing to rely on where no other soak was made', () => {
    const found = usableOf({ current: 5, dropsAt: 600 });
    expect(found?.interval?.[0]).toBeLessThan(0.1);
    expect(found?.note).toContain('no soak has shown what it holds when warm');
  });

  it('does not count a soak that held for a shorter time', () => {
    const found = usableOf({ current: 4, until: 100 }, { current: 5, dropsAt: 600 });
    expect(found?.note).toContain('no soak has shown what it holds when warm');
  });

  it('says nothing of a warm module where the current was dropped at once', () => {
    expect(usableOf({ current: 4 }, { current: 6, dropsAt: 0 })?.value).toBe(4);
  });
});

describe('a soak among other steps', () => {
  it('is one point of the curve, however long it was', () => {
    const found = analyse(evidence({ temperature: warming })).find(({ name }) => name === 'usable-current');
    expect(found).toMatchObject({ value: 4, bound: 'least' });
  });
});
