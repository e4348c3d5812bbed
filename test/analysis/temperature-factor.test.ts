import { describe, expect, it } from 'vitest';
import { riseAt } from '../../src/analysis/loss-model.js';
import { temperatureFactor } from '../../src/analysis/temperature-factor.js';
import fc from '../property.js';
import { deratedBy, soakedOf } from './soaked.js';

const line = { expected: 45, fullTo: 50, fallingTo: 0.5, at: 70 };
const warm = deratedBy({ ambient: line });

describe('the temperature factor', () => {
  it('leaves a current that stays within the limit, and reckons it out', () => {
    // 45 °C + 40 K · (3/4)² = 67.5 °C.
    expect(temperatureFactor(warm, { current: 3, soaked: soakedOf() })).toEqual({
      name: 'temperature',
      current: 3,
      reason:
        '45 °C and at most 22.5 K at 3.00 A make 67.5 °C, within 85 °C; soaked at 4.00 A, losses as the ' +
        'square of the current, not the cautious side here: standing losses cool less',
      sets: undefined,
    });
  });

  it('brings a current down to where it stays within', () => {
    // 45 °C + 60 K = 105 °C; 40 K are left, so √(40/60) of 4 A.
    const cap = temperatureFactor(warm, { current: 4, soaked: soakedOf({ rise: 60 }) });
    expect(cap?.current).toBeCloseTo(4 * Math.sqrt(2 / 3), 12);
    expect(cap?.sets).toBe('the limit of temperature sets it');
    expect(cap?.reason).toContain(
      '45 °C and at most 60.0 K at 4.00 A make 105 °C; 3.27 A stays within 85 °C',
    );
  });

  it('brings it down further where a share of the losses is fixed', () => {
    // (2/3 − 1/5)/(1 − 1/5) = 7/12.
    const header = deratedBy({ ambient: line, lossModel: { fixed: 0.2 } });
    const cap = temperatureFactor(header, { current: 4, soaked: soakedOf({ rise: 60 }) });
    expect(cap?.current).toBeCloseTo(4 * Math.sqrt(7 / 12), 12);
    expect(cap?.reason).toMatch(/losses 20 % fixed, the rest as the square of the current$/);
  });

  it('allows nothing where the fixed losses alone are too much', () => {
    const header = deratedBy({ ambient: line, lossModel: { fixed: 0.7 } });
    const cap = temperatureFactor(header, { current: 4, soaked: soakedOf({ rise: 60 }) });
    expect(cap?.current).toBe(0);
    expect(cap?.reason).toContain('no current stays within 85 °C');
  });

  it('upwards says that no fixed losses is the cautious side', () => {
    const { reason } = temperatureFactor(warm, { current: 4.2, soaked: soakedOf({ rise: 20 }) }) ?? {};
    expect(reason).toMatch(/losses as the square of the current, the cautious side here$/);
  });

  it('takes the upper end of what the rise may be', () => {
    const certain = temperatureFactor(warm, { current: 4, soaked: soakedOf() });
    expect(certain?.sets).toBeUndefined();
    const doubtful = temperatureFactor(warm, { current: 4, soaked: soakedOf({ uncertainty: 1 }) });
    expect(doubtful?.current).toBeCloseTo(4 * Math.sqrt(40 / 41.959964), 6);
  });

  it('takes the air of the test where none is expected, and the lower of two limits', () => {
    const header = deratedBy({ temperatureLimit: 63 });
    expect(temperatureFactor(header, { current: 4, soaked: soakedOf() })?.reason).toContain(
      '23 °C and at most 40.0 K at 4.00 A make 63 °C, within 63 °C; soaked at 4.00 A',
    );
  });

  it.each([
    [
      'no soak was run: nothing shows that it stays below 85 °C',
      deratedBy({ temperatureLimit: 85 }),
      undefined,
    ],
    [
      'no limit of temperature was given to hold against a rise of at most 40.0 K at 4.00 A',
      warm,
      soakedOf({ limit: undefined }),
    ],
    [
      "nobody measured the air, so a rise of at most 40.0 K at 4.00 A can't be held against 85 °C",
      deratedBy({}),
      soakedOf({ ambient: undefined }),
    ],
  ])('changes nothing, and says why: %s', (reason, header, soaked) => {
    const cap = temperatureFactor(header, { current: 4, soaked });
    expect(cap).toEqual({ name: 'temperature', reason, current: 4, sets: undefined });
  });

  it('is not there where there is neither soak nor limit', () => {
    expect(temperatureFactor(deratedBy({}), { current: 4, soaked: undefined })).toBeUndefined();
  });

  it('always ends at a current that stays within the limit, by the same model', () => {
    const shares = fc.double({ min: 0, max: 0.95, noNaN: true });
    const rises = fc.double({ min: 1, max: 120, noNaN: true });
    fc.assert(
      fc.property(shares, rises, fc.double({ min: 0.1, max: 8, noNaN: true }), (fixed, rise, current) => {
        const header = deratedBy({ ambient: line, lossModel: { fixed } });
        const cap = temperatureFactor(header, { current, soaked: soakedOf({ rise }) });
        const left = cap?.current ?? Number.NaN;
        expect(left).toBeLessThanOrEqual(current);
        if (left > 0) {
          expect(45 + riseAt(left, { current: 4, rise }, { fixed })).toBeLessThanOrEqual(85 + 1e-9);
        }
      }),
    );
  });
});
