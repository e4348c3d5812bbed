import { describe, expect, it } from 'vitest';
import { decimalsFor, figuresShown, fixed } from '../../../src/view/page/numbers.js';
import type { Figures, ViewedEnd } from '../../../src/view/view-state.js';
import fc from '../../property.js';
import { before, neverBegun, run } from './viewed.js';

const shown = (figures: Figures, ended?: ViewedEnd): readonly string[] =>
  figuresShown({ run, figures, workingOut: undefined, ended }).map(({ value, unit }) =>
    value.kind === 'number' ? `${value.text} ${unit}` : value.words,
  );

describe('the large figures', () => {
  it('have as many decimals as the nameplate asks for, and keep them', () => {
    expect(shown({ voltage: 15.2, current: 2, temperature: 41 })).toEqual([
      '15.200 V',
      '2.000 A',
      '30.40 W',
      '41.0 °C',
    ]);
  });

  it('say in words that nothing was read yet, that an instrument had nothing, and that nothing measures', () => {
    expect(shown({})).toEqual(['not read yet', 'not read yet', 'not read yet', 'not read yet']);
    expect(shown({}, neverBegun)).toEqual(['not read', 'not read', 'not read', 'not read']);
    expect(shown({ voltage: null, current: 2 })).toEqual([
      'no reading',
      '2.000 A',
      'no reading',
      'not measured',
    ]);
    expect(shown({ voltage: 15 })).toEqual(['15.000 V', 'not read here', 'not known here', 'not measured']);
  });

  it('say beside the current what the load is set to', () => {
    const [, current] = figuresShown({ ...before, figures: { setCurrent: 2.5, current: 2.4998 } });
    expect(current?.set).toBe('set to 2.500 A');
  });

  it.each([
    [15, 5, 3],
    [4, 4, 3],
    [60, 4, 2],
    [0.5, 5, 4],
    [400, 5, 2],
    [1e6, 4, 0],
  ])('of %d with %d digits have %d decimals', (rated, digits, decimals) => {
    expect(decimalsFor(rated, digits)).toBe(decimals);
  });

  it('are never minus nought, and read back as what was rounded', () => {
    expect(fixed(-0.0001, 3)).toBe('0.000');
    expect(fixed(-1.5, 2)).toBe('−1.50');
    fc.assert(
      fc.property(fc.double({ min: -1e4, max: 1e4, noNaN: true }), fc.nat(4), (value, decimals) => {
        const read = Number(fixed(value, decimals).replace('−', '-'));
        expect(Math.abs(read - value)).toBeLessThanOrEqual(0.5001 * 10 ** -decimals);
        expect(fixed(value, decimals)).not.toMatch(/^−0(\.0*)?$/);
      }),
    );
  });
});
