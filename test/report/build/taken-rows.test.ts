import { describe, expect, it } from 'vitest';
import { buildAsText } from '../../../src/report/build/build-text.js';
import { takenRows } from '../../../src/report/build/taken-rows.js';
import { buildPage } from '../../../src/report/page/build-page.js';
import { plainStyle } from '../../../src/report/style.js';
import { madeProfile } from '../../arrangement/made-profile.js';
import { madeSeries } from '../sheet/made-builds.js';

const made = { program: 'railproof test', date: new Date('2026-12-02T03:30:00Z') };
const profile = madeProfile('K1');
const build = {
  ...madeSeries(),
  modules: [
    { ...profile, usable: { ...profile.usable, note: 'above that its output swings' } },
    madeProfile('K2'),
  ],
};

describe('what was taken over of a module', () => {
  it('stands in the text and on the page in the same words and numbers', () => {
    const text = buildAsText(build, plainStyle).replace(/\s+/g, ' ');
    const page = buildPage(build, made).replaceAll('\u00a0', ' ');
    const rows = build.modules.flatMap(takenRows);
    expect(rows.map(({ note }) => note)).toContain('above that its output swings');
    for (const { what, value, limits, note } of rows) {
      const said = [what, value, limits, note].filter((each) => each !== '');
      expect(text).toContain(said.join(' '));
      for (const each of said) expect(page).toContain(`>${each}</td>`);
    }
  });

  it('is followed by a long note that goes on below its number, within 80 columns', () => {
    const note =
      'as its output swings from there on, and the bench could not tell how far it would have gone';
    const [first, ...others] = build.modules;
    const noted = {
      ...build,
      modules: [{ ...profile, ...first, usable: { ...profile.usable, note } }, ...others],
    };
    const text = buildAsText(noted, plainStyle);
    expect(text.replace(/\s+/g, ' ')).toContain(note);
    expect(Math.max(...text.split('\n').map((line) => Array.from(line).length))).toBeLessThanOrEqual(80);
  });
});
