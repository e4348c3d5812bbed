import { describe, expect, it } from 'vitest';
import reference from '../../../fixtures/reference/scpi-488.json' with { type: 'json' };
import { type ReplyForm, type Response, strict, written } from './response.js';

const asPublished: Readonly<Record<'NR1' | 'NR2' | 'NR3', RegExp>> = {
  NR1: /^[-+]?\d+$/,
  NR2: /^[-+]?\d*\.\d+$/,
  NR3: /^[-+]?\d*\.\d+E[-+]\d+$/,
};

describe('a response', () => {
  // Source: IEEE Std 488.2 as fixtures/reference/scpi-488.json states it.
  it.each(['NR1', 'NR2', 'NR3'] as const)('in %s looks as the published examples do', (numbers) => {
    for (const example of reference.numeric_response[numbers].examples) {
      expect(example).toMatch(asPublished[numbers]);
    }
    for (const value of [273, -12, 0]) {
      expect(written({ kind: 'number', value }, { ...strict, numbers })).toMatch(asPublished[numbers]);
    }
  });

  it.each<[Response, Partial<ReplyForm>, string]>([
    [{ kind: 'number', value: 273 }, {}, '+2.730000E+02'],
    [{ kind: 'number', value: 273 }, { digits: 2, exponentDigits: 1, plus: false }, '2.73E+2'],
    [{ kind: 'number', value: 273 }, { digits: 2, bareExponent: true, exponentDigits: 1 }, '+2.73E2'],
    [{ kind: 'number', value: -0.0012 }, { digits: 1, letters: 'lower' }, '-1.2e-03'],
    [{ kind: 'number', value: 0.273 }, { numbers: 'NR2', digits: 3, plus: false }, '0.273'],
    [{ kind: 'number', value: 273 }, { numbers: 'NR1', space: ' ' }, ' +273 '],
    [{ kind: 'number', value: 12.031, unit: 'V' }, { numbers: 'NR2', digits: 3, plus: false }, '12.031V'],
    [{ kind: 'number', value: Infinity }, { digits: 1 }, '+9.9E+37'],
    [{ kind: 'number', value: -Infinity }, { numbers: 'NR2' }, '-9.900000E+37'],
    [{ kind: 'number', value: NaN }, { digits: 2 }, '+9.91E+37'],
    [{ kind: 'boolean', value: true }, {}, '+1'],
    [{ kind: 'boolean', value: false }, { booleans: 'word', letters: 'lower' }, 'off'],
    [{ kind: 'word', printed: 'CURRent' }, {}, 'CURR'],
    [{ kind: 'word', printed: 'CURRent' }, { words: 'long' }, 'CURRENT'],
    [{ kind: 'function', printed: 'VOLTage[:DC]' }, {}, '"VOLT"'],
    [{ kind: 'function', printed: 'VOLTage[:DC]' }, { defaultNodes: 'written' }, '"VOLT:DC"'],
    [{ kind: 'function', printed: 'RESistance', with: [100] }, { digits: 1 }, '"RES +1.0E+02"'],
    [{ kind: 'string', text: 'a "b"' }, {}, '"a ""b"""'],
    [{ kind: 'channels', channels: [] }, {}, '(@)'],
    [{ kind: 'channels', channels: [101, 103] }, { space: ' ' }, '(@ 101,103 )'],
    [{ kind: 'channels', channels: [101] }, { channels: 'block' }, '#16(@101)'],
  ])('%# is written in the form of its instrument', (response, form, text) => {
    expect(written(response, { ...strict, ...form })).toBe(text);
  });
});
