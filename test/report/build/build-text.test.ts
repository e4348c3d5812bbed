import { stripVTControlCharacters } from 'node:util';
import { describe, expect, it } from 'vitest';
import type { AnyBuild } from '../../../src/report/build/any-build.js';
import { buildAsText } from '../../../src/report/build/build-text.js';
import { plainStyle, terminalStyle } from '../../../src/report/style.js';
import { madeProfile } from '../../arrangement/made-profile.js';
import { buildParallel } from '../../../src/arrangement/build-parallel.js';
import {
  bricks,
  chosen,
  pair,
  pairThatNothingHelps,
  staged,
  stagedThatShorts,
  string,
  stringUnproved,
  stringWithBonded,
} from './made-builds.js';

const plain = (build: AnyBuild): string => buildAsText(build, plainStyle);
const snapshot = (name: string): string => `./snapshots/${name}.txt`;

const builds = {
  parallel: pair(),
  'parallel-refused': pairThatNothingHelps(),
  'parallel-too-much': pair({ load: 9 }),
  series: string(),
  'series-refused': stringWithBonded(),
  'series-unproved': stringUnproved(),
  selection: chosen(),
  'selection-too-few': chosen({ supplies: 5 }),
  stages: staged(),
  'stages-refused': stagedThatShorts(),
} as const;

describe('the text of what may be built', () => {
  it.each(Object.entries(builds))('of %s reads as it was proofread', async (name, build) => {
    await expect(plain(build)).toMatchFileSnapshot(snapshot(name));
  });

  it.each(Object.entries(builds))('of %s fits 80 columns', (_, build) => {
    const tooLong = plain(build)
      .split('\n')
      .filter((line) => Array.from(line).length > 80);
    expect(tooLong).toEqual([]);
  });

  it.each(Object.entries(builds))('of %s says the same without colour', (_, build) => {
    const coloured = buildAsText(build, terminalStyle);
    expect(coloured).not.toBe(plain(build));
    expect(stripVTControlCharacters(coloured)).toBe(plain(build));
  });

  it('says first that it may be built, through what, and for how much', () => {
    expect(answerOf(builds.parallel)).toMatch(
      /^May be built: K1 and K2 side by side through 51 mΩ each feed up to \d\.\d\d A continuously\./,
    );
    expect(answerOf(builds.series)).toMatch(
      /^May be built: K1, K2 and K3 in a stack feed up to 4\.00 A continuously;/,
    );
    expect(answerOf(builds.selection)).toMatch(
      /^May be built: K\d ∥ K\d feeds up to \d\.\d\d A continuously\./,
    );
  });

  it('of a staged supply says over which outputs, and the least that it feeds there', () => {
    const [, least, at] =
      /^May be built: valve-bench gives from 0 V to 32 V and feeds at least ([\d.]+) A at each of them; the least is \1 A at ([\d.]+) V/.exec(
        answerOf(builds.stages),
      ) ?? [];
    const currents = builds.stages.guaranteed.flatMap(({ rising, falling }) => [
      rising.current,
      falling.current,
    ]);
    expect(Number(least)).toBeLessThanOrEqual(Math.min(...currents));
    expect(Number(least)).toBeGreaterThan(Math.min(...currents) - 0.01);
    expect(Number(at)).toBeGreaterThanOrEqual(0);
  });

  it('of a switching that shorts a module says by which movements of contacts', () => {
    const text = plain(builds['stages-refused']);
    expect(answerOf(builds['stages-refused'])).toMatch(/^MUST NOT BE BUILT:/);
    expect(text).toMatch(/FORBIDDEN when S\d [^.]*: /);
    expect(text).not.toMatch(/May be built|^Parts|guaranteed to/m);
  });

  it('never writes a recommendation larger than it is', () => {
    for (const build of [builds.parallel, builds.series]) {
      const [, said] = /feed up to ([\d.]+) A/.exec(answerOf(build)) ?? [];
      expect(Number(said)).toBeLessThanOrEqual(build.recommended.current);
      expect(Number(said)).toBeGreaterThan(build.recommended.current - 0.01);
    }
  });

  it('of what must not be built says so first, why, and lists no parts', () => {
    for (const build of [builds['series-refused'], builds['parallel-refused']]) {
      expect(answerOf(build)).toMatch(/^MUST NOT BE BUILT: /);
      expect(plain(build)).not.toMatch(/May be built|^Parts|^ {2}recommended/m);
    }
    expect(answerOf(builds['series-refused'])).toContain('The output of K9 is bonded to earth inside');
  });

  it('of what can not be told never says that it may be built, and lists no parts to buy at once', () => {
    const text = plain(builds['series-unproved']);
    expect(answerOf(builds['series-unproved'])).toMatch(/^CANNOT TELL: How the output of K8 stands to earth/);
    expect(text).not.toContain('May be built');
    expect(text).not.toMatch(/^Parts$/m);
  });

  it('of a load beyond what is recommended never says that it may be built', () => {
    for (const build of [builds['parallel-too-much'], string(9)]) {
      expect(answerOf(build)).toMatch(/^(MUST NOT BE BUILT|TOO LITTLE):/);
      expect(plain(build)).not.toContain('May be built');
      expect(answerOf(build)).toContain('asked for');
    }
  });

  it('of a load that a builder let pass beyond what it recommends says that it is too little', () => {
    const build: AnyBuild = { ...builds.parallel, load: { current: 99, from: 'asked-for' } };
    expect(answerOf(build)).toMatch(/^TOO LITTLE: K1 and K2 .* continuously, and 99 A is asked for\./);
    expect(plain(build)).toMatch(/^Parts {3}for what is recommended, not for the load asked for$/m);
  });

  it('tells a load that was asked for as it was asked for', () => {
    expect(plain(pair({ load: 4.75 }))).toMatch(/^Shares at 4\.75 A {3}the load asked for/m);
    const chosen = pair({ load: 4.75, ballast: { kind: 'for-imbalance', most: 0.4 } });
    expect(plain(chosen)).toMatch(
      /^Ballast {3}the least of E12 \(IEC 60063\) for 40 % imbalance and the load asked for$/m,
    );
  });

  it('names the record of every number, with its time, and how it ended where that was not well', () => {
    const [first] = [bricks.K1];
    const cut = {
      ...first,
      droop: { ...first.droop, from: { ...first.droop.from, run: 'R7', state: 'cut-off' as const } },
    };
    const text = plain(
      buildParallel([cut, bricks.K2], {
        ballast: { kind: 'given', resistance: 0.051 },
        tolerance: 0.05,
        load: 6,
      }),
    );
    expect(text).toContain('K1: R7, real-limit, 2026-11-30 09:15 UTC, CUT OFF\n');
    expect(text).toMatch(/^ {2}K2: 20261130T091500Z-K2-real-limit, 2026-11-30 09:15 UTC$/m);
  });

  it('says once what holds of several modules, and what nothing can be decided on first', () => {
    const concern = {
      run: 'R',
      kind: 'not-warmed',
      weight: 'weakens',
      text: 'it was measured cold',
    } as const;
    const build = builds.parallel;
    const text = plain({
      ...build,
      concerns: [
        { ...concern, module: 'K1' },
        { ...concern, module: 'K2' },
        { module: 'K2', run: 'R', kind: 'coarse', weight: 'hinders', text: 'it is too coarse' },
      ],
    });
    expect(text).toContain(
      'About the records\n  - K2: it is too coarse.\n  - Each of K1 and K2: it was measured cold.\n',
    );
  });

  it('lets nothing in a record steer the terminal', () => {
    const nasty = madeProfile('K1');
    const build = buildParallel(
      [
        { ...nasty, description: 'a brick\u001b[2J', recommended: { ...nasty.recommended, why: '\u009bx' } },
        bricks.K2,
      ],
      { ballast: { kind: 'given', resistance: 0.051 }, tolerance: 0.05, load: undefined },
    );
    // eslint-disable-next-line no-control-regex
    expect(plain(build)).not.toMatch(/[\u001b\u009b]/);
    expect(plain(build)).toContain('a brick\\u001b[2J');
  });
});

/** The lines after the heading, in one. */
function answerOf(build: AnyBuild): string {
  return plain(build).split('\n\n')[1]?.replaceAll('\n', ' ') ?? '';
}
