import { expect, it } from 'vitest';
import { cautionText, cautionTexts } from '../../src/record/caution-texts.js';

it('every caution has whole sentences to be read', () => {
  for (const text of Object.values(cautionTexts)) expect(text).toMatch(/^[A-Z].*\.$/);
});

it('a caution that this version does not know has no text, whatever its name', () => {
  expect(cautionText('mains')).toBe(cautionTexts.mains);
  expect(cautionText('lightning')).toBeUndefined();
  expect(cautionText('constructor')).toBeUndefined();
});
