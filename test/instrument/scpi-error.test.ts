import { describe, expect, it } from 'vitest';
import reference from '../../fixtures/reference/scpi-488.json' with { type: 'json' };
import { parseScpiError, standardErrors, standardText } from '../../src/instrument/scpi-error.js';
import fc from '../property.js';

describe('an entry of the error queue', () => {
  it.each([
    ['0,"No error"', 0, 'No error'],
    ['+0,"No error"', 0, 'No error'],
    ['-0,"No error"', 0, 'No error'],
    ['-113,"Undefined header"', -113, 'Undefined header'],
    ['-113,"Undefined header;INPX ON"', -113, 'Undefined header;INPX ON'],
    ['-113, "Undefined header" ', -113, 'Undefined header'],
    ['-222,"Data ""out"" of range"', -222, 'Data "out" of range'],
    ["-222,'Data out of range'", -222, 'Data out of range'],
    ['-222,Data out of range', -222, 'Data out of range'],
    ['-222', -222, 'Data out of range'],
    ['-222,', -222, 'Data out of range'],
    ['-222,""', -222, 'Data out of range'],
    ['-222,"cut of', -222, 'cut of'],
    ['101,"Fan, blocked"', 101, 'Fan, blocked'],
    ['999', 999, ''],
  ])('%s', (reply, number, text) => {
    expect(parseScpiError(reply)).toEqual({ number, text });
  });

  it.each(['', 'No error', '"No error",0', '1.5,"half"', '15.1', '--1,"x"'])('is not "%s"', (reply) => {
    expect(() => parseScpiError(reply)).toThrow(
      expect.objectContaining({ code: 'REPLY_NOT_UNDERSTOOD' }) as Error,
    );
  });

  it('comes back as it was written, whatever its text', () => {
    fc.assert(
      fc.property(fc.integer({ min: -32768, max: 32767 }), fc.string({ minLength: 1 }), (number, text) => {
        expect(parseScpiError(`${number},"${text.replaceAll('"', '""')}"`)).toEqual({ number, text });
      }),
    );
  });
});

describe('the table of standard errors', () => {
  // Source: SCPI-1999 volume 2 by public programming manuals, some from memory (fixtures/reference/scpi-488.json).
  it.each(reference.error_queue.known)('has $number, $text', ({ number, text }) => {
    expect(standardText(number)).toBe(text);
  });

  it('has nothing else but the clear queue', () => {
    expect(Object.keys(standardErrors)).toHaveLength(reference.error_queue.known.length + 1);
    expect(parseScpiError(reference.error_queue.empty_response)).toEqual({
      number: 0,
      text: standardErrors['0'],
    });
  });
});
