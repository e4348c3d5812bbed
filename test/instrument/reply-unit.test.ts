import { describe, expect, it } from 'vitest';
import { placesOf } from '../../src/instrument/reply-unit.js';
import type { Dimension } from '../../src/quantity/quantity.js';
import fc from '../property.js';

const bytes = (text: string): string => Buffer.from(text, 'utf8').toString('latin1');

describe('the unit in a reply', () => {
  it.each<[string, Dimension, number]>([
    ['V', 'voltage', 0],
    ['v', 'voltage', 0],
    ['mV', 'voltage', -3],
    ['mv', 'voltage', -3],
    ['uV', 'voltage', -6],
    ['kV', 'voltage', 3],
    ['nA', 'current', -9],
    ['mA', 'current', -3],
    ['uA', 'current', -6],
    ['mW', 'power', -3],
    ['kW', 'power', 3],
    ['Ohm', 'resistance', 0],
    ['ohms', 'resistance', 0],
    ['mOhm', 'resistance', -3],
    ['mOHM', 'resistance', -3],
    ['kOhm', 'resistance', 3],
    ['k Ohm', 'resistance', 3],
    ['kohm', 'resistance', 3],
    ['KOhm', 'resistance', 3],
    ['MOhm', 'resistance', 6],
    ['Mohm', 'resistance', 6],
    ['GOhm', 'resistance', 9],
    ['°C', 'temperature', 0],
    ['degC', 'temperature', 0],
    ['C', 'temperature', 0],
  ])('%s, as the SI writes it', (unit, dimension, places) => {
    expect(placesOf(unit, dimension)).toBe(places);
  });

  it.each<[string, Dimension, number]>([
    ['MV', 'voltage', -3],
    ['UV', 'voltage', -6],
    ['KV', 'voltage', 3],
    ['MA', 'current', -3],
    ['UA', 'current', -6],
    ['MW', 'power', -3],
    ['OHM', 'resistance', 0],
    ['KOHM', 'resistance', 3],
    ['MOHM', 'resistance', 6],
    ['MAOHM', 'resistance', 6],
    ['UOHM', 'resistance', -6],
    ['CEL', 'temperature', 0],
  ])('%s, as IEEE 488.2 has it in capitals', (unit, dimension, places) => {
    expect(placesOf(unit, dimension)).toBe(places);
  });

  it.each<[string, Dimension, number]>([
    [bytes('µV'), 'voltage', -6],
    ['\u00b5A', 'current', -6],
    [bytes('kΩ'), 'resistance', 3],
    [bytes('mΩ'), 'resistance', -3],
    [bytes('MΩ'), 'resistance', 6],
    [bytes('µΩ'), 'resistance', -6],
    [bytes('°C'), 'temperature', 0],
    ['\u00b0C', 'temperature', 0],
  ])('%j, as its bytes come', (unit, dimension, places) => {
    expect(placesOf(unit, dimension)).toBe(places);
  });

  it.each<[string, Dimension]>([
    ['mohm', 'resistance'],
    ['m ohms', 'resistance'],
  ])('%s could be two, and is none', (unit, dimension) => {
    expect(placesOf(unit, dimension)).toBeUndefined();
  });

  it.each<[string, Dimension]>([
    ['A', 'voltage'],
    ['mA', 'voltage'],
    ['V', 'current'],
    ['W', 'voltage'],
    ['Mv', 'voltage'],
    ['Mw', 'power'],
    ['xV', 'voltage'],
    ['VDC', 'voltage'],
    ['F', 'temperature'],
    ['K', 'temperature'],
    ['mC', 'temperature'],
    ['', 'voltage'],
    ['m', 'voltage'],
    ['constructorV', 'voltage'],
    ['s', 'time'],
  ])('%s is not one of %s', (unit, dimension) => {
    expect(placesOf(unit, dimension)).toBeUndefined();
  });

  it('is a power of ten, or not understood, whatever it is', () => {
    fc.assert(
      fc.property(
        fc.string({ unit: 'binary', maxLength: 8 }),
        fc.constantFrom<Dimension>('voltage', 'current', 'power', 'resistance', 'temperature'),
        (unit, dimension) => {
          const places = placesOf(unit, dimension);
          expect(places === undefined || [9, 6, 3, 0, -3, -6, -9, -12].includes(places)).toBe(true);
        },
      ),
    );
  });
});
