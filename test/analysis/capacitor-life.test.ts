import { describe, expect, it } from 'vitest';
import { capacitorLifeFindings } from '../../src/analysis/capacitor-life.js';
import { headerOf } from './evidence-of.js';
import { deratedBy, soakedOf } from './soaked.js';

const header = headerOf();
const life = (recommended: number, soaked = soakedOf(), of = header) =>
  capacitorLifeFindings(of, soaked, { recommended, rated: 4 })[0];

describe('the life of electrolytics', () => {
  it('is so many times longer at less current, by the ten-kelvin rule', () => {
    // At 3 A the rise is 22.5 K and not 40 K: 2^1.75.
    const found = life(3);
    expect(found?.value).toBeCloseTo(2 ** 1.75, 12);
    expect(found).toMatchObject({
      name: 'capacitor-life-ratio',
      dimension: 'ratio',
      step: 2,
      note:
        "electrolytics at the recommended current, 17.5 K cooler than at the nameplate's 4 A, by the " +
        'ten-kelvin rule; soaked at 4.00 A, losses as the square of the current, not the cautious side here: ' +
        'standing losses cool less; a ratio for the same ambient, not a lifetime',
    });
  });

  it('is the same at the nameplate’s current, and shorter above', () => {
    expect(life(4)?.value).toBe(1);
    expect(life(5)?.value).toBeCloseTo(2 ** -2.25, 12);
    expect(life(5)?.note).toContain('22.5 K warmer than');
  });

  it('gains less where a share of the losses is fixed', () => {
    const found = life(3, soakedOf(), deratedBy({ lossModel: { fixed: 0.5 } }));
    expect(found?.value).toBeCloseTo(2 ** 0.875, 12);
  });

  it('is as uncertain as the rise makes it', () => {
    const at = (rise: number) => Number(life(3, soakedOf({ rise }))?.value);
    const slope = (at(40.01) - at(39.99)) / 0.02;
    expect(life(3, soakedOf({ uncertainty: 0.5 }))?.standardUncertainty).toBeCloseTo(slope * 0.5, 5);
  });

  it.each([
    ['no soak was run', undefined, 3],
    ['nothing is recommended', soakedOf(), 0],
    ['it did not warm', soakedOf({ rise: -0.1 }), 3],
  ])('is not there where %s', (_, soaked, recommended) => {
    expect(capacitorLifeFindings(header, soaked, { recommended, rated: 4 })).toEqual([]);
  });
});
