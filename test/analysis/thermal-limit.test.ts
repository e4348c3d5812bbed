import { describe, expect, it } from 'vitest';
import { thermalLimit } from '../../src/analysis/thermal-limit.js';
import { usableCurrent } from '../../src/analysis/usable-current.js';
import { measured } from '../../src/analysis/finding.js';
import { evidenceOf, headerOf } from './evidence-of.js';
import { deratedBy, soakedOf } from './soaked.js';

const evidence = evidenceOf([], headerOf());
/** 23 °C + 80 K is 103 °C; 62 K were allowed. */
const hot = soakedOf({ rise: 80, uncertainty: 0.5 });

describe('the current at which the limit of temperature is met', () => {
  it('follows from the loss model, and says so', () => {
    const found = thermalLimit(evidence, hot);
    expect(found?.value).toBeCloseTo(4 * Math.sqrt(62 / 80), 12);
    expect(found?.note).toBe(
      'above that it settles beyond its limit of 85 °C: at 103 °C, soaked at 4.00 A, losses as the square ' +
        'of the current, not the cautious side here: standing losses cool less',
    );
    expect(found?.step).toBe(2);
  });

  it.each([0, 0.3])('is as uncertain as the rise makes it, %d of the losses being fixed', (fixed) => {
    const header = deratedBy({ lossModel: { fixed } });
    const at = (rise: number) =>
      Number(thermalLimit(evidenceOf([], header), soakedOf({ rise, uncertainty: 0.5 }))?.value);
    const slope = (at(80.01) - at(79.99)) / 0.02;
    const found = thermalLimit(evidenceOf([], header), hot);
    expect(found?.standardUncertainty).toBeCloseTo(Math.abs(slope) * 0.5, 6);
  });

  it('carries what is uncertain of the soaked current', () => {
    const load = { current: { ofReading: 0.01 * Math.sqrt(3), fixed: 0.02 * Math.sqrt(3) } };
    const found = thermalLimit(evidenceOf([], headerOf({ load })), soakedOf({ rise: 80 }));
    const share = Math.sqrt(62 / 80);
    expect(found?.standardUncertainty).toBeCloseTo(share * Math.hypot(0.04, 0.02), 9);
  });

  it('is 0 where no current would do', () => {
    const header = deratedBy({ lossModel: { fixed: 0.9 } });
    const found = thermalLimit(evidenceOf([], header), hot);
    expect(found?.value).toBe(0);
    expect(found?.note).toContain('it settles at any current beyond its limit of 85 °C');
  });

  it.each([
    ['it settled within', soakedOf()],
    ['there was no limit', soakedOf({ rise: 80, limit: undefined })],
    ['nobody measured the air', soakedOf({ rise: 80, ambient: undefined })],
    ['no soak was run', undefined],
  ])('is not there where %s', (_, soaked) => {
    expect(thermalLimit(evidence, soaked)).toBeUndefined();
  });
});

describe('the usable current after a soak', () => {
  const certainly = (value: number) =>
    measured(
      'dropout-current',
      'current',
      value,
      [{ name: 'all', kind: 'B', uncertainty: 0.01, degreesOfFreedom: Infinity }],
      { step: 3 },
    );
  const usable = (dropout: number, soaked = hot) =>
    usableCurrent(evidence, { dropout: certainly(dropout), unsteady: undefined, held: [], soaked });

  it('is lowered to where it settles at its limit', () => {
    const { finding, setBy } = usable(5.3) ?? {};
    expect(finding?.value).toBeCloseTo(4 * Math.sqrt(62 / 80), 12);
    expect(finding?.name).toBe('usable-current');
    expect(finding?.note).toContain('beyond its limit of 85 °C');
    expect(setBy).toBe('temperature');
  });

  it('stays where the module drops out before', () => {
    expect(usable(3)).toMatchObject({ setBy: 'limit', finding: { value: 3 } });
  });

  it('stays where the soak settled within its limit', () => {
    expect(usable(5.3, soakedOf())).toMatchObject({ setBy: 'limit', finding: { value: 5.3 } });
  });
});
