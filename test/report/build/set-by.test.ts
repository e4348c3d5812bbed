import { expect, it } from 'vitest';
import type { StagedBuild } from '../../../src/arrangement/staged-build.js';
import { buildAsText } from '../../../src/report/build/build-text.js';
import { setBy, setByInShort } from '../../../src/report/build/set-by.js';
import { buildPage } from '../../../src/report/page/build-page.js';
import { plainStyle } from '../../../src/report/style.js';
import { madeStages } from '../sheet/made-builds.js';

const made = { program: 'railproof test', date: new Date('2026-12-02T03:30:00Z') };
const each = ['module', 'ballast', 'dissipation', 'drop-out', 'linear-stage'] as const;

it.each(each)('what sets a current is called the same in text, table and chart where it is: %s', (by) => {
  const staged = madeStages();
  const build: StagedBuild = {
    ...staged,
    guaranteed: staged.guaranteed.map((point) => ({ ...point, rising: { ...point.rising, setBy: by } })),
  };
  const words = setBy[by];
  const page = buildPage(build, made).replaceAll('\u00a0', ' ');
  expect(buildAsText(build, plainStyle)).toContain(words);
  expect(page).toContain(`>${words}</td>`);
  expect(page).toMatch(new RegExp(`set by ${words}[;.]`));
});

it('each has a sign of its own for where there is no room', () => {
  expect(new Set(Object.values(setByInShort).map(({ sign }) => sign)).size).toBe(each.length);
});
