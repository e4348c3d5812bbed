import { describe, expect, it } from 'vitest';
import { unitsOf } from '../../../src/simulation/dialects/scpi-message.js';

describe('a program message', () => {
  it('is taken apart into units, headers and parameters', () => {
    expect(unitsOf(' curr:lev 2.5 A ; :MEAS:VOLT? 10, 0.001;*IDN?')).toEqual([
      { absolute: false, nodes: ['curr', 'lev'], query: false, parameters: ['2.5 A'] },
      { absolute: true, nodes: ['MEAS', 'VOLT'], query: true, parameters: ['10', '0.001'] },
      { absolute: false, nodes: ['*IDN'], query: true, parameters: [] },
    ]);
  });

  it('keeps separators within quotes', () => {
    expect(unitsOf(`DISP:TEXT "a;b,c",'d"e;'`)[0]?.parameters).toEqual(['"a;b,c"', `'d"e;'`]);
  });

  it.each(['', ';', ' ; ;'])('of nothing but separators (%j) has no units', (message) => {
    expect(unitsOf(message)).toEqual([]);
  });

  it.each(['?', '12', '!CURR 2', 'CURR? ?2?', '\u0000\u0001'])(
    '%j is never taken for something else',
    (message) => {
      const [unit] = unitsOf(message);
      expect(unit === undefined || unit.nodes[0] === 'CURR').toBe(true);
    },
  );
});
