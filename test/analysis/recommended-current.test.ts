import { describe, expect, it } from 'vitest';
import { measured } from '../../src/analysis/finding.js';
import { recommendedFindings } from '../../src/analysis/recommended-current.js';
import type { Usable } from '../../src/analysis/usable-current.js';
import fc from '../property.js';
import { evidenceOf, headerOf } from './evidence-of.js';
import { deratedBy, soakedOf } from './soaked.js';

function usable(value: number, uncertainty: number, setBy: Usable['setBy'] = 'limit'): Usable {
  const budget = [{ name: 'all', kind: 'B', uncertainty, degreesOfFreedom: Infinity }] as const;
  return { finding: measured('usable-current', 'current', value, budget, { step: 3 }), setBy };
}

function recommended(from: Usable, rated = 4, margin = 0.8) {
  const header = headerOf({ rated: { voltage: 15, current: rated }, margin });
  const found = recommendedFindings(evidenceOf([], header), from)[0];
  if (found === undefined) throw new Error('nothing recommended');
  return found;
}

describe('the recommended current', () => {
  it('is the lower end of the usable current times the margin', () => {
    // 1.96 × 0.05 A below 4 A, of that four fifths.
    const found = recommended(usable(4, 0.05));
    expect(found.value).toBeCloseTo((4 - 1.959964 * 0.05) * 0.8, 6);
    expect(found.note).toBe('the measured limit sets it');
    expect(found.factors.map(({ name }) => name)).toEqual(['lower bound', 'margin', 'ambient']);
  });

  it('is never above the nameplate, and says that the nameplate sets it', () => {
    const found = recommended(usable(6, 0.05));
    expect(found.value).toBe(4);
    expect(found.note).toBe('the nameplate sets it');
    expect(found.factors.at(-1)).toMatchObject({
      name: 'nameplate',
      reason: "never above the nameplate's 4 A",
    });
  });

  it('says that only the highest current tried sets it, where no limit was met', () => {
    expect(recommended(usable(4, 0.01, 'highest-tried')).note).toBe(
      'the highest current that was tried sets it',
    );
  });

  it('gives the reason of every factor, and that no soak and no ambient line stand behind it', () => {
    const { factors } = recommended(usable(6, 0.05));
    expect(factors.every(({ reason }) => reason.length > 10)).toBe(true);
    expect(factors[1]?.reason).toContain('no soak');
    expect(factors[2]).toMatchObject({ name: 'ambient', factor: 1 });
  });

  it('is the usable current times all of its factors, and never above nameplate or lower bound', () => {
    const amperes = fc.double({ min: 0.05, max: 60, noNaN: true });
    const uncertainties = fc.double({ min: 0, max: 5, noNaN: true });
    const margins = fc.double({ min: 0.1, max: 1, noNaN: true });
    fc.assert(
      fc.property(amperes, uncertainties, amperes, margins, (value, uncertainty, rated, margin) => {
        const from = usable(value, uncertainty);
        const found = recommended(from, rated, margin);
        const product = found.factors.reduce((product, { factor }) => product * factor, value);
        expect(product).toBeCloseTo(Number(found.value), 10);
        expect(found.value).toBeLessThanOrEqual(rated);
        expect(found.value).toBeLessThanOrEqual(Math.max(0, from.finding.interval?.[0] ?? NaN));
        expect(found.value).toBeGreaterThanOrEqual(0);
      }),
    );
  });

  it.each([0, -0.01])('is nothing, in numbers, for a usable current of %d A', (value) => {
    const found = recommended(usable(value, 0.01));
    expect(found.value).toBe(0);
    expect(found.factors.map(({ factor }) => factor)).toEqual([0, 0.8, 1]);
  });

  it('is not there without a usable current', () => {
    expect(recommendedFindings(evidenceOf([]), undefined)).toEqual([]);
  });
});

describe('the recommended current in warm air and after a soak', () => {
  const ambient = { expected: 45, fullTo: 40, fallingTo: 0.5, at: 60 };
  const [module] = headerOf().modules;
  const found = (...[header, soaked]: [ReturnType<typeof headerOf>, ReturnType<typeof soakedOf>?]) =>
    recommendedFindings(evidenceOf([], header), usable(5, 0), soaked);

  it('is multiplied by what the line leaves', () => {
    const [recommended] = found(deratedBy({ ambient }));
    expect(recommended?.value).toBeCloseTo(5 * 0.8 * 0.875, 12);
    expect(recommended?.note).toBe('the measured limit sets it');
  });

  it('is nothing beyond the end of the line', () => {
    const [recommended] = found(deratedBy({ ambient: { ...ambient, expected: 61 } }), soakedOf());
    expect(recommended).toMatchObject({ value: 0, note: 'air so warm allows no load' });
    expect(recommended?.factors.map(({ factor }) => factor)).toEqual([1, 0.8, 0]);
  });

  it('is brought down to where it stays within its limit of temperature', () => {
    // 45 °C + 80 K · (3.5/4)² = 106.25 °C; 40 K are left, so √(40/80) of 4 A.
    const [recommended, life] = found(deratedBy({ ambient }), soakedOf({ rise: 80 }));
    expect(recommended?.value).toBeCloseTo(4 * Math.sqrt(0.5), 12);
    expect(recommended?.note).toBe('the limit of temperature sets it');
    expect(recommended?.factors.map(({ name }) => name)).toEqual([
      'lower bound',
      'margin',
      'ambient',
      'temperature',
    ]);
    // Half of the losses, so 40 K less.
    expect(life?.name).toBe('capacitor-life-ratio');
    expect(life?.value).toBeCloseTo(2 ** 4, 10);
  });

  it('exceeds the nameplate only where the procedure allows it after a soak', () => {
    const mild = soakedOf({ current: 5, rise: 20 });
    const allowing = deratedBy({ margin: 0.95, aboveNameplate: 'after-soak' });
    expect(found(allowing, mild)[0]?.value).toBeCloseTo(4.75, 12);
    expect(found(allowing)[0]?.value).toBe(4);
    expect(found(deratedBy({ margin: 0.95 }), mild)[0]?.value).toBe(4);
  });

  it.each([
    ['side by side the labels add up', 'parallel', 8],
    ['one upon the other the weakest label counts', 'series', 3],
  ] as const)('goes by the nameplate of what is connected: %s', (_, circuit, expected) => {
    if (module === undefined) throw new Error('no module');
    const modules = [5, 3].map((current) => ({ ...module, rated: { voltage: 15, current } }));
    const evidence = evidenceOf([], deratedBy({}, { circuit, modules }));
    expect(recommendedFindings(evidence, usable(20, 0))[0]?.value).toBe(expected);
  });

  it('is the usable current times all of its factors, whatever sets it', () => {
    const degrees = fc.double({ min: 20, max: 65, noNaN: true });
    const rises = fc.double({ min: 1, max: 120, noNaN: true });
    const amperes = fc.double({ min: 0.5, max: 8, noNaN: true });
    const policies = fc.constantFrom('never' as const, 'after-soak' as const);
    fc.assert(
      fc.property(degrees, rises, amperes, policies, (expected, rise, current, aboveNameplate) => {
        const header = deratedBy({ ambient: { ...ambient, expected }, aboveNameplate });
        const [recommended] = found(header, soakedOf({ rise, current }));
        const product = recommended?.factors.reduce((product, { factor }) => product * factor, 5);
        expect(product).toBeCloseTo(Number(recommended?.value), 10);
        expect(recommended?.factors.every(({ factor }) => factor <= 1 && factor >= 0)).toBe(true);
      }),
    );
  });
});
