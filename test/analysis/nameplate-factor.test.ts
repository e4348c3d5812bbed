import { describe, expect, it } from 'vitest';
import { nameplateFactor } from '../../src/analysis/nameplate-factor.js';
import { deratedBy, soakedOf } from './soaked.js';

const afterSoak = deratedBy({ aboveNameplate: 'after-soak' });
const never = deratedBy({});
const set = 'the nameplate sets it';

describe('the nameplate', () => {
  it('says nothing of a current that is no more than it', () => {
    expect(nameplateFactor(never, { rated: 4, current: 4, soaked: undefined })).toBeUndefined();
  });

  it('caps whatever a soak showed, where the procedure never allows more', () => {
    const cap = nameplateFactor(never, { rated: 4, current: 5, soaked: soakedOf({ current: 6 }) });
    expect(cap).toEqual({
      name: 'nameplate',
      current: 4,
      reason: "never above the nameplate's 4 A",
      sets: set,
    });
  });

  it.each([
    ['no soak was run', undefined],
    ['the soak did not settle', soakedOf({ current: 5, settled: false })],
    ['no temperature limit was given for its soak', soakedOf({ current: 5, limit: undefined })],
    ['nobody measured the air at its soak', soakedOf({ current: 5, ambient: undefined })],
    // 23 °C + 61 K is 84 °C, but the rise may be 1.96 · 1 K more.
    ['its soak may have reached 86 °C, beyond 85 °C', soakedOf({ current: 5, rise: 61, uncertainty: 1 })],
    ['it was soaked at no more than 4.00 A', soakedOf()],
  ])('caps after a soak that proves nothing: %s', (why, soaked) => {
    const cap = nameplateFactor(afterSoak, { rated: 4, current: 4.8, soaked });
    expect(cap).toEqual({
      name: 'nameplate',
      current: 4,
      reason: `not above the nameplate's 4 A: ${why}`,
      sets: set,
    });
  });

  it('gives way to a soak at that current or above, and says so', () => {
    const soaked = soakedOf({ current: 5 });
    expect(nameplateFactor(afterSoak, { rated: 4, current: 5, soaked })).toEqual({
      name: 'nameplate',
      current: 5,
      reason: "above the nameplate's 4 A, as the procedure allows: at 5.00 A a soak settled below 85 °C",
      sets: undefined,
    });
  });

  it('gives way only as far as was soaked', () => {
    const soaked = soakedOf({ current: 4.5 });
    expect(nameplateFactor(afterSoak, { rated: 4, current: 5, soaked })).toMatchObject({
      name: 'soak',
      current: 4.5,
      sets: 'the soaked current sets it',
    });
  });

  it('holds the soak against the lower of its own limit and the procedure’s', () => {
    const strict = deratedBy({ aboveNameplate: 'after-soak', temperatureLimit: 60 });
    const cap = nameplateFactor(strict, { rated: 4, current: 5, soaked: soakedOf({ current: 5 }) });
    expect(cap?.reason).toContain('may have reached 63 °C, beyond 60 °C');
  });
});
