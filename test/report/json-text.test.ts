import { describe, expect, it } from 'vitest';
import { jsonText } from '../../src/report/json-text.js';
import fc from '../property.js';

describe('JSON on a terminal', () => {
  it('means the same as any other JSON', () => {
    fc.assert(
      fc.property(fc.jsonValue({ stringUnit: 'binary' }), (data) => {
        expect(JSON.parse(jsonText(data))).toEqual(JSON.parse(JSON.stringify(data)));
      }),
    );
  });

  it.each([
    ['an escape', '\u001b[2J'],
    ['a control above ASCII', '\u009b2J'],
    ['text turned round', '\u202eabc'],
    ['what has no width', 'a\u200bb'],
    ['a format beyond the first plane', '\u{e0001}'],
  ])('never holds %s as it is', (_name, text) => {
    const written = jsonText({ text });
    expect(written).toMatch(/^[\n\x20-\x7e]*$/);
    expect(JSON.parse(written)).toEqual({ text });
  });

  it('leaves letters and units readable', () => {
    expect(jsonText('35 mΩ, 20 µs, Gärtnerei')).toBe('"35 mΩ, 20 µs, Gärtnerei"\n');
  });
});
