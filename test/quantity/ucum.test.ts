import { expect, it } from 'vitest';
import { dimensions, type Dimension } from '../../src/quantity/quantity.js';
import { fromJsonUnit, toJsonUnit, ucumCode } from '../../src/quantity/ucum.js';
import fc from '../property.js';

// UCUM, case-sensitive codes: tables of base units, of derived units (Ohm, Cel, V, W) and of dimensionless
// ones (%); written here from memory of the specification.
it.each<[Dimension, string]>([
  ['voltage', 'V'],
  ['current', 'A'],
  ['resistance', 'Ohm'],
  ['power', 'W'],
  ['time', 's'],
  ['temperature', 'Cel'],
  ['temperature-difference', 'K'],
  ['ratio', '%'],
  ['voltage-rate', 'V/h'],
])('a %s is in %s', (dimension, code) => {
  expect(ucumCode(dimension)).toBe(code);
});

it('a ratio is in per cent, and everything else in its own unit', () => {
  expect(toJsonUnit(0.07, 'ratio')).toBe(7);
  expect(toJsonUnit(0.07, 'voltage')).toBe(0.07);
  expect(fromJsonUnit(7, 'ratio')).toBe(0.07);
});

it('there and back is the same number', () => {
  const number = fc
    .float({ noNaN: true, min: -1000, max: 1000 })
    .map((value) => Number(value.toPrecision(9)));
  fc.assert(
    fc.property(number, fc.constantFrom(...(Object.keys(dimensions) as Dimension[])), (value, dimension) => {
      expect(fromJsonUnit(toJsonUnit(value, dimension), dimension)).toBe(value + 0);
    }),
  );
});
