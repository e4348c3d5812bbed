import { describe, expect, it } from 'vitest';
import { visible } from '../../src/instrument/visible.js';
import fc from '../property.js';

describe('what is shown of bytes', () => {
  it.each([
    ['15.1\r\n', '15.1\\r\\n'],
    ['\x00\x1b[2J\t', '\\x00\\x1b[2J\\t'],
    ['\xb5V', '\\xb5V'],
    ['', ''],
  ])('%j', (text, shown) => {
    expect(visible(text)).toBe(shown);
    expect(visible(Buffer.from(text, 'latin1'))).toBe(shown);
  });

  it('is plain, short, and says how much there was', () => {
    fc.assert(
      fc.property(
        fc.oneof(fc.uint8Array({ maxLength: 300 }), fc.string({ unit: 'binary', maxLength: 300 })),
        (what) => {
          expect(visible(what)).toMatch(/^[ -~]{0,80}(… \(\d+ bytes\))?$/);
        },
      ),
    );
    expect(visible('7'.repeat(1000))).toBe(`${'7'.repeat(80)}… (1000 bytes)`);
  });
});
