import { describe, expect, it } from 'vitest';
import { dimensions, type Dimension } from '../../src/quantity/quantity.js';
import { allowedUnits, readUnit, scalesOf, spellingsOf } from '../../src/quantity/units.js';

const everyDimension = Object.keys(dimensions) as Dimension[];

describe('the table of units', () => {
  it('no spelling means two things', () => {
    const all = everyDimension.flatMap(spellingsOf);
    expect(all.length).toBe(new Set(all).size);
  });

  it.each(everyDimension)('whatever we write of a %s can be read', (dimension) => {
    for (const scale of scalesOf(dimension)) expect(readUnit(scale.symbol)).toEqual({ ...scale, dimension });
  });

  it('the scales we write in go from small to large', () => {
    expect(scalesOf('time').map((scale) => scale.symbol)).toEqual(['µs', 'ms', 's', 'min', 'h']);
    expect(scalesOf('resistance').map((scale) => scale.symbol)).toEqual(['µΩ', 'mΩ', 'Ω', 'kΩ', 'MΩ']);
  });

  it('messages list what is allowed', () => {
    expect(allowedUnits('voltage')).toBe('µV, mV, V, kV');
    expect(allowedUnits('time')).toBe('µs, ms, s, min, h');
    expect(allowedUnits('temperature')).toBe('°C (or degC)');
  });

  it.each(['', 'v', 'mv', 'MV', 'S', 'sec', 'Min', 'ohms', 'R', 'C', 'degK', 'toString', 'percent'])(
    '%j is no unit',
    (symbol) => {
      expect(readUnit(symbol)).toBeUndefined();
    },
  );
});
