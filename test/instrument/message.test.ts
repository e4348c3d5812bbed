import { describe, expect, it } from 'vitest';
import { fillMessage } from '../../src/instrument/message.js';

describe('a message of a driver', () => {
  it.each([
    ['CURR {amps}', { amps: 4 }, 'CURR 4'],
    ['VOLT {volts}', { volts: 14.250000000001 }, 'VOLT 14.25'],
    ['POW:PROT {watts};:CURR {amps}', { watts: 60, amps: 0.5 }, 'POW:PROT 60;:CURR 0.5'],
    ['ROUT:CLOS (@{channel})', { channel: 101 }, 'ROUT:CLOS (@101)'],
    ['INP OFF', {}, 'INP OFF'],
    ['{other}', { amps: 1 }, '{other}'],
  ])('%s is filled', (message, values, filled) => {
    expect(fillMessage(message, values)).toBe(filled);
  });

  it('without its value, or with one that is no number, is never sent', () => {
    expect(() => fillMessage('CURR {amps}', { volts: 1 })).toThrow(/needs a value for \{amps\}/);
    expect(() => fillMessage('CURR {amps}', { amps: NaN })).toThrow(RangeError);
  });
});
