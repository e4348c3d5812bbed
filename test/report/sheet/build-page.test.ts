import { describe, expect, it } from 'vitest';
import type { Standing } from '../../../src/arrangement/build.js';
import { buildSeries } from '../../../src/arrangement/build-series.js';
import type { Selection } from '../../../src/arrangement/selection.js';
import { buildAsText } from '../../../src/report/build/build-text.js';
import { partMarks } from '../../../src/report/diagram/part-marks.js';
import { buildPage } from '../../../src/report/page/build-page.js';
import { plainStyle } from '../../../src/report/style.js';
import { madeProfile } from '../../arrangement/made-profile.js';
import { concern, madeParallel, madeSelection, madeSeries, madeStages } from './made-builds.js';

const made = { program: 'railproof 0.1.0', date: new Date('2026-12-02T03:30:00Z') };
const refused: Standing = { kind: 'must-not-be-built', because: ['K2 is bonded to earth: leave it out'] };
const open: Standing = { kind: 'cannot-tell', because: ['nobody measured the isolation of K2'] };

const makers = {
  parallel: (standing: Standing) => madeParallel({ standing }),
  series: (standing: Standing) => madeSeries({ standing }),
  stages: (standing: Standing) => madeStages({ standing }),
  selection: (standing: Standing) => madeSelection({ standing }),
};

describe.each(Object.entries(makers))('the build sheet of %s', (_, make) => {
  it('says first that it may be built, then draws it and lists its parts', () => {
    const page = buildPage(make({ kind: 'may-be-built' }), made);
    expect(page.indexOf('>May be built<')).toBeGreaterThan(0);
    expect(page.indexOf('>May be built<')).toBeLessThan(page.indexOf('<h2'));
    expect(page).toContain('class="diagram"');
    expect(page).toContain('>Parts<');
    expect(page).not.toContain('Not to be built');
  });

  it('that must not be built says so and why, and shows nothing to build', () => {
    const page = buildPage(make(refused), made);
    expect(page).toContain('>Must not be built<');
    expect(page).toContain('K2 is bonded to earth: leave it out.');
    expect(page).not.toMatch(/class="diagram"|>Parts<|>May be built<|ecommended, continuously/);
  });

  it('that nobody can tell says so at the top, and again at whatever could be taken for a plan', () => {
    const page = buildPage(make(open), made);
    expect(page).toContain('>Cannot tell whether it may be built<');
    expect(page).toContain('Nobody measured the isolation of K2.');
    expect(page.match(/Not to be built yet/g)).toHaveLength(2);
  });

  it('says where its numbers came from, who made it and when', () => {
    const page = buildPage(make({ kind: 'may-be-built' }), made);
    expect(page).toMatch(/20261130T091500Z-\w+-real-limit/);
    expect(page).toContain('2026-11-30 09:15 UTC');
    expect(page).toContain('railproof 0.1.0 on <time datetime="2026-12-02T03:30:00.000Z">');
  });

  it('fits on a stick a thousand times, and comes out the same again', () => {
    const page = buildPage(make({ kind: 'may-be-built' }), made);
    expect(page.length).toBeLessThan(150_000);
    expect(buildPage(make({ kind: 'may-be-built' }), made)).toBe(page);
  });
});

it('of several supplies it says which one is drawn, and how the parts of the others are numbered', () => {
  const page = buildPage(madeSelection({ standing: { kind: 'may-be-built' } }), made);
  expect(page).toMatch(/All are wired alike, and the sheet draws [^.]*; the numbers of their parts go on/);
});

it('nothing is called guaranteed of a staged supply that may not be built', () => {
  expect(buildPage(madeStages({ standing: { kind: 'may-be-built' } }), made)).toContain('guaranteed to feed');
  expect(buildPage(madeStages({ standing: refused }), made)).not.toContain('guaranteed to feed');
  expect(buildPage(madeStages({ standing: open }), made)).not.toContain('guaranteed to feed');
});

it('a load above what is recommended is said to be too much, whatever else holds', () => {
  const page = buildPage(madeParallel({ load: { current: 11, from: 'asked-for' } }), made);
  expect(page).toContain('>Too little for the load asked for<');
  expect(page).not.toContain('>May be built<');
});

it('concerns stand with what nothing can be decided on first', () => {
  const hinders = { ...concern, module: 'K3', weight: 'hinders', text: 'cut off: run it again' } as const;
  const page = buildPage(madeParallel({ concerns: [concern, hinders] }), made);
  expect(page.indexOf('Nothing can be decided on these')).toBeLessThan(
    page.indexOf('To be known and weighed'),
  );
  expect(page).toContain('2 things are to be known before it is built');
});

it('a part that is not drawn is said not to be', () => {
  const diode = { marks: ['D1'], what: 'optional diode', ratings: [], why: 'for a group that must go on' };
  const page = buildPage(madeParallel({ parts: [diode] }), made);
  expect(page).toContain('optional diode<span class="soft"> (not drawn)</span>');
});

it('the marks of the drawn diodes are those of the parts list', () => {
  const build = buildSeries([madeProfile('K1'), madeProfile('K2')], { load: undefined });
  const drawn = [...partMarks(build.circuit).reverse.values()];
  expect(drawn).toHaveLength(2);
  expect(build.parts.flatMap(({ marks }) => marks)).toEqual(expect.arrayContaining(drawn));
});

it('what holds for several modules is said once, and counted once at the top', () => {
  const each = ['K1', 'K2', 'K3'].map((module) => ({ ...concern, module }));
  const page = buildPage(madeParallel({ standing: { kind: 'may-be-built' }, concerns: each }), made);
  expect(page.split(concern.text)).toHaveLength(2);
  expect(page).toContain('Each of <strong>K1, K2 and K3</strong>');
  expect(page).toContain('One thing is to be known before it is built');
});

it('of what is refused nothing is said to come before it is built', () => {
  const page = buildPage(madeParallel({ standing: refused, concerns: [concern] }), made);
  expect(page).toContain('One thing is to be known besides');
  expect(page).not.toContain('before it is built');
});

it('has a column of imbalances only where modules stand side by side', () => {
  const paired = madeSelection();
  const { best } = paired;
  if (best === undefined) throw new Error('the made selection has a best');
  const alone = {
    ...best,
    imbalance: 0,
    supplies: best.supplies.map((supply) => ({
      ...supply,
      groups: supply.groups.map(({ modules, ...group }) => ({ ...group, modules: modules.slice(0, 1) })),
    })),
  };
  const single: Selection = { ...paired, best: alone, next: undefined };
  expect(buildPage(paired, made)).toContain('>Imbalance</th>');
  expect(buildPage(single, made)).not.toMatch(/imbalance/i);
  expect(buildAsText(paired, plainStyle)).toContain('worst imbalance');
  expect(buildAsText(single, plainStyle)).not.toContain('imbalance');
});

it('of a staged supply that feeds least while its output comes down says so', () => {
  const staged = madeStages({ standing: { kind: 'may-be-built' } });
  const guaranteed = staged.guaranteed.map((point, index) =>
    index === 1 ? { ...point, falling: { ...point.falling, current: 0.5 } } : point,
  );
  const page = buildPage({ ...staged, guaranteed }, made).replaceAll('\u00a0', ' ');
  expect(page).toMatch(/The least is 500 mA at [\d.]+ V, coming down, the most /);
});
