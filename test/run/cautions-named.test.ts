import { expect, it } from 'vitest';
import { cautionTexts } from '../../src/record/caution-texts.js';
import { cautionOf } from '../../src/run/cautions.js';
import { readModule } from '../../src/files/read-module.js';

const [K1, K2] = await Promise.all(
  ['K1', 'K2'].map(async (name) => (await readModule(`fixtures/modules/${name}.yaml`)).value),
);
if (K1 === undefined || K2 === undefined) throw new Error('two modules');
const plain = { ...K2, changes: [], input: 'dc' as const };
const worked = {
  ...K1,
  input: 'mains' as const,
  changes: [{ date: '2026-11-14', what: 'link from output to earth removed' }],
};

it('names the modules of several that a caution is about', () => {
  const modules = [worked, plain] as const;
  expect(cautionOf('earth-link-removed', { modules })).toBe(
    `${cautionTexts['earth-link-removed']} This concerns ${worked.name}.`,
  );
  expect(cautionOf('mains', { modules })).toBe(`${cautionTexts.mains} This concerns ${worked.name}.`);
});

it('names none where it is about all of them, or where there is only one', () => {
  expect(cautionOf('hot-surfaces', { modules: [worked, plain] })).toBe(cautionTexts['hot-surfaces']);
  expect(cautionOf('mains', { modules: [worked] })).toBe(cautionTexts.mains);
});
