import { expect, it } from 'vitest';
import { KnownTexts } from '../../src/record/known-texts.js';
import fc from '../property.js';

it('the same bytes are the same text, whatever came before them and whatever became of where they stood', () => {
  const texts = fc.array(fc.stringMatching(/^[ -~]{0,12}$/), { minLength: 1, maxLength: 600 });
  fc.assert(
    fc.property(texts, (asked) => {
      const known = new KnownTexts();
      const room = Buffer.alloc(20);
      for (const text of asked) {
        room.fill(0).write(text, 3, 'latin1');
        expect(known.from(room, 3, 3 + text.length)).toBe(text);
      }
    }),
  );
});
