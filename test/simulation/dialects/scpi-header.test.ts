import { describe, expect, it } from 'vitest';
import { headerPattern, matchesHeader } from '../../../src/simulation/dialects/scpi-header.js';

// The rules are those of SCPI-99, volume 1, 6.2.1 (short and long form, nothing between) and 5.1 (brackets);
// the rows are made up after them.
describe('a header', () => {
  it.each([
    ['INPut[:STATe]', 'INP', true],
    ['INPut[:STATe]', 'INPUT', true],
    ['INPut[:STATe]', 'input:state', true],
    ['INPut[:STATe]', 'Inp:Stat', true],
    ['INPut[:STATe]', 'INPU', false],
    ['INPut[:STATe]', 'IN', false],
    ['INPut[:STATe]', 'INP:STATE:ON', false],
    ['INPut[:STATe]', 'STAT', false],
    ['CURRent[:LEVel][:IMMediate]', 'CURR', true],
    ['CURRent[:LEVel][:IMMediate]', 'CURR:LEV', true],
    ['CURRent[:LEVel][:IMMediate]', 'CURR:IMM', true],
    ['CURRent[:LEVel][:IMMediate]', 'CURR:LEVEL:IMMEDIATE', true],
    ['CURRent[:LEVel][:IMMediate]', 'CURR:IMM:LEV', false],
    ['CURRent:PROTection[:LEVel]', 'CURR', false],
    ['CURRent:PROTection[:LEVel]', 'CURR:PROT', true],
    ['[SOURce:]CURRent', 'CURR', true],
    ['[SOURce:]CURRent', 'SOUR:CURR', true],
    ['[SOURce:]CURRent', 'SOURCE', false],
    ['MEASure[:SCALar]:VOLTage[:DC]', 'MEAS:VOLT', true],
    ['MEASure[:SCALar]:VOLTage[:DC]', 'MEAS:VOLT:DC', true],
    ['MEASure[:SCALar]:VOLTage[:DC]', 'MEAS:SCAL:VOLT', true],
    ['MEASure[:SCALar]:VOLTage[:DC]', 'MEAS:DC', false],
    ['*IDN', '*idn', true],
    ['*IDN', 'IDN', false],
  ])('%s, spoken as %s, matches: %s', (printed, spoken, expected) => {
    expect(matchesHeader(headerPattern(printed), spoken.split(':'))).toBe(expected);
  });
});
