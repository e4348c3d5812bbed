import { describe, expect, it } from 'vitest';
import { buildParallel } from '../../src/arrangement/build-parallel.js';
import { buildSeries } from '../../src/arrangement/build-series.js';
import type { ModuleProfile } from '../../src/arrangement/module-profile.js';
import { selectModules } from '../../src/arrangement/select-modules.js';
import type { Assignment, Selection, SelectionWish } from '../../src/arrangement/selection.js';
import fc from '../property.js';
import { type MadeOf, madeProfile } from './made-profile.js';

const wish: SelectionWish = {
  group: 1,
  stack: 1,
  supplies: 1,
  ballast: { kind: 'for-imbalance', most: 0.2 },
  tolerance: 0.01,
};
const given = { kind: 'given', resistance: 0.1 } as const;
const pairs: SelectionWish = { ...wish, group: 2, ballast: given };

const drawer = (made: Readonly<Record<string, MadeOf>>): readonly ModuleProfile[] =>
  Object.entries(made).map(([name, of]) => madeProfile(name, of));
const select = (profiles: readonly ModuleProfile[], wished: SelectionWish): Selection =>
  selectModules({ profiles, unfit: [] }, wished);
const groupsOf = (assignment: Assignment | undefined) =>
  assignment?.supplies.map(({ groups }) => groups.map(({ modules }) => modules.join('+')));

describe('pairs out of a drawer', () => {
  const four = drawer({
    K1: { openCircuit: 15.3 },
    K2: { openCircuit: 15.0 },
    K3: { openCircuit: 15.01 },
    K4: { openCircuit: 15.28 },
  });

  it('are made of modules of like voltage, which share', () => {
    const { best, next, margin, standing, considered } = select(four, { ...pairs, supplies: 2 });
    expect(groupsOf(best)).toEqual([['K2+K3'], ['K1+K4']]);
    expect(standing.kind).toBe('may-be-built');
    expect(considered).toBe(3);
    expect(next?.recommended).toBeLessThan(best?.recommended ?? 0);
    expect(margin).toMatchObject({ told: true });
    expect(margin?.current).toBeCloseTo((best?.recommended ?? NaN) - (next?.recommended ?? NaN), 12);
    expect(margin?.sentence).toMatch(
      /^The best is ahead of the next best by .* A, which is more than the records/,
    );
  });

  it('are listed with the parts of every supply and what must be known of it, no mark twice', () => {
    const uneven = drawer({
      K1: { openCircuit: 15.3 },
      K2: { openCircuit: 15.0, earth: 'bonded' },
      K3: { openCircuit: 15.01, usable: 6.5, dropout: 6.6 },
      K4: { openCircuit: 15.28 },
    });
    const { best, parts, cautions } = select(uneven, { ...pairs, supplies: 2 });
    expect(groupsOf(best)).toEqual([['K2+K3'], ['K1+K4']]);
    const wished = { ballast: given, tolerance: wish.tolerance, load: undefined };
    const each = [
      ['K2', 'K3'],
      ['K1', 'K4'],
    ].map((names) =>
      buildParallel(
        names.flatMap((name) => uneven.filter((profile) => profile.name === name)),
        wished,
      ),
    );
    const [first, second] = each.map((build) => build.parts);
    expect(parts.slice(0, first?.length)).toEqual(first);
    const others = parts.slice(first?.length);
    expect(others.map(({ ratings }) => ratings)).toEqual(second?.map(({ ratings }) => ratings));
    expect(others.flatMap(({ marks }) => marks)).toEqual(['K1', 'K4', 'R3', 'R4', 'D3', 'D4']);
    // The heavier diodes are those of the stronger pair.
    expect(first?.at(-1)?.ratings).not.toEqual(second?.at(-1)?.ratings);
    const [ofFirst = [], ofSecond = []] = each.map((build) => build.cautions);
    expect(cautions).toEqual([
      ...ofFirst.filter((caution) => ofSecond.includes(caution)),
      ...ofFirst.filter((caution) => !ofSecond.includes(caution)).map((caution) => `K2 and K3: ${caution}`),
      ...ofSecond.filter((caution) => !ofFirst.includes(caution)).map((caution) => `K1 and K4: ${caution}`),
    ]);
    expect(cautions.join('\n')).toMatch(/^K2 and K3: The output of K2 is bonded/m);
  });

  it('are ahead by less than the records tell where those are uncertain', () => {
    const vague = four.map((profile) =>
      madeProfile(profile.name, {
        openCircuit: 15 + (profile.openCircuit.value - 15) / 10,
        uncertainty: { openCircuit: 0.02 },
      }),
    );
    const { margin } = select(vague, { ...pairs, supplies: 2 });
    expect(margin).toMatchObject({ told: false });
    expect(margin?.sentence).toMatch(/less than the records leave open: either will do\.$/);
  });

  it('are worth what `combine --parallel` says of them, with the ballast that it chooses', () => {
    const two = four.slice(1, 3);
    const chosen: SelectionWish = { ...pairs, ballast: { kind: 'for-imbalance', most: 0.1 } };
    const { best, circuit, parts } = select(two, chosen);
    const build = buildParallel(two, { ...chosen, load: undefined });
    expect(best?.recommended).toBe(build.recommended.current);
    expect(best?.ballast).toBe(build.circuit.ballast?.resistance);
    expect(best?.ballast).toBeGreaterThan(0);
    expect(circuit).toEqual(build.circuit);
    expect(parts).toEqual(build.parts);
  });

  it('that no ballast lets share as is wished are none, and it is said why', () => {
    const { best, standing, unused } = select(four, {
      ...pairs,
      ballast: { kind: 'for-imbalance', most: 0.01 },
      tolerance: 0.05,
    });
    expect(best).toBeUndefined();
    expect(standing).toEqual({
      kind: 'cannot-tell',
      because: [expect.stringContaining('no choice shares as evenly as is wished') as string],
    });
    expect(unused).toEqual(['K1', 'K2', 'K3', 'K4']);
  });
});

describe('a stack out of a drawer', () => {
  const stacks: SelectionWish = { ...wish, stack: 3 };

  it('is made of the strongest, and worth what `combine --series` says', () => {
    const profiles = drawer({
      K1: { recommended: 3 },
      K2: { recommended: 4 },
      K3: { recommended: 3.9 },
      K4: { recommended: 3.8 },
    });
    const { best, next, margin, unused, parts, circuit, cautions } = select(profiles, stacks);
    expect(groupsOf(best)).toEqual([['K2', 'K3', 'K4']]);
    expect(best?.recommended).toBe(3.8);
    expect(best?.imbalance).toBe(0);
    expect(next?.recommended).toBe(3);
    expect(margin?.current).toBeCloseTo(0.8, 12);
    expect(unused).toEqual(['K1']);
    const build = buildSeries(profiles.slice(1), { load: undefined });
    expect(parts).toEqual(build.parts);
    expect(circuit).toEqual(build.circuit);
    expect(cautions).toEqual(build.cautions);
  });

  it('of two supplies leaves the stronger one what it can give', () => {
    const profiles = drawer({
      K1: { recommended: 4 },
      K2: { recommended: 2.5 },
      K3: { recommended: 4 },
      K4: { recommended: 2.5 },
    });
    const { best } = select(profiles, { ...wish, stack: 2, supplies: 2 });
    expect(groupsOf(best)).toEqual([
      ['K1', 'K3'],
      ['K2', 'K4'],
    ]);
    expect(best?.supplies.map(({ recommended }) => recommended)).toEqual([4, 2.5]);
    expect(best?.recommended).toBe(2.5);
  });

  it('leaves out whatever has not been shown to be isolated, and says why', () => {
    const profiles = drawer({
      K1: { earth: 'bonded' },
      K2: { earth: 'leaky' },
      K3: { earth: 'undetermined' },
      K4: { earth: undefined },
      K5: {},
      K6: {},
      K7: { input: 'dc' },
    });
    const { best, leftOut } = select(profiles, { ...wish, stack: 2 });
    expect(groupsOf(best)).toEqual([['K5', 'K6']]);
    expect(leftOut.map(({ module, why }) => `${module}: ${why}`)).toEqual([
      'K1: its output is bonded to earth, so it can stand on no other',
      'K2: its output leaks to earth, so it can stand on no other',
      'K3: how its output stands to earth could not be told: run isolation on K3 again',
      'K4: how its output stands to earth was never measured: run isolation on K4',
      'K7: it is fed with DC, and no record shows that its output is cut off from its input',
    ]);
    // Side by side it does not matter.
    expect(select(profiles, { ...pairs, supplies: 3 }).best?.supplies).toHaveLength(3);
  });

  it('of modules that bear too little to stand on another is none', () => {
    const profiles = drawer({ K1: { outputIsolation: 20 }, K2: { outputIsolation: 20 } });
    const { best, standing } = select(profiles, { ...wish, stack: 2 });
    expect(best).toBeUndefined();
    expect(standing).toMatchObject({ kind: 'cannot-tell' });
  });

  it('is told at once of a drawer in which too few may stand on another, however large it is', () => {
    const names = Array.from({ length: 30 }, (_, index) => `K${index + 1}`);
    const weak = Object.fromEntries(names.map((name) => [name, { outputIsolation: 20 }]));
    const began = performance.now();
    const { standing } = select(drawer(weak), { ...pairs, stack: 3, supplies: 5 });
    expect(standing).toMatchObject({
      kind: 'cannot-tell',
      because: [expect.stringContaining('no choice bears its place') as string],
    });
    expect(performance.now() - began).toBeLessThan(3000);
  });

  it('of unknown isolation is possible within 60 V, and weakens it', () => {
    const unknown = { outputIsolation: 'unknown' } as const;
    const { standing, concerns } = select(drawer({ K1: unknown, K2: unknown }), { ...wish, stack: 2 });
    expect(standing.kind).toBe('may-be-built');
    expect(concerns).toMatchObject([{ kind: 'isolation-unknown', module: 'K2', weight: 'weakens' }]);
  });
});

describe('a stack of pairs', () => {
  const profiles = drawer({ K1: {}, K2: {}, K3: {}, K4: {} });
  const selection = select(profiles, { ...pairs, stack: 2 });

  it('has a ballast and a diode for each module', () => {
    expect(selection.circuit).toMatchObject({
      form: { kind: 'stack', of: [{ kind: 'group' }, { kind: 'group' }] },
      ballast: { resistance: 0.1, tolerance: 0.01 },
      reverseDiodes: true,
    });
    expect(selection.parts.flatMap(({ marks }) => marks)).toEqual([
      ...['K1', 'K2', 'K3', 'K4'],
      ...['D1', 'D2', 'D3', 'D4'],
      ...['R1', 'R2', 'R3', 'R4'],
    ]);
  });

  it('has diodes that bear what both modules of the other pair push', () => {
    // 2 × 5.3 A, half as much again.
    expect(selection.parts.find(({ marks }) => marks.includes('D1'))?.ratings[0]).toBe('at least 16 A');
  });
});

describe('a drawer of several voltages', () => {
  const twelve = { label: { voltage: 12, current: 2.5 }, openCircuit: 12.3, recommended: 2.5 };
  const profiles = drawer({ K1: {}, W1: twelve, K2: {}, W2: twelve });

  it('puts no unlike ones together, and says of which the best is', () => {
    const { best, next, margin, leftOut } = select(profiles, pairs);
    expect(groupsOf(best)).toEqual([['K1+K2']]);
    // One of another voltage would be another supply.
    expect(next).toBeUndefined();
    expect(margin).toBeUndefined();
    expect(leftOut.map(({ module }) => module)).toEqual(['W1', 'W2']);
    expect(leftOut[0]?.why).toMatch(/^its label says 12 V, and the best is made of modules of 15 V/);
  });

  it('that holds too few of each is told what is missing', () => {
    const { standing, best, parts } = select(profiles, { ...wish, stack: 3 });
    expect(best).toBeUndefined();
    expect(parts).toEqual([]);
    expect(standing).toEqual({
      kind: 'cannot-tell',
      because: [
        '3 modules are needed, and 2 with 12 V on the label can be used: 1 more is missing.',
        '3 modules are needed, and 2 with 15 V on the label can be used: 1 more is missing.',
      ],
    });
  });
});

describe('what is left out of any supply', () => {
  it('a module that a record hinders, one that is recommended for nothing, and what could not be read', () => {
    const [good, cut, useless] = drawer({ K1: {}, K2: {}, K3: { recommended: 0 } });
    if (good === undefined || cut === undefined || useless === undefined) throw new Error('no modules');
    const hindered: ModuleProfile = {
      ...cut,
      concerns: [
        { kind: 'cut-off', module: 'K2', run: 'r', weight: 'hinders', text: 'it breaks off: run it again' },
      ],
    };
    const unfit = [{ module: 'K4', why: 'its record is damaged', advice: 'run real-limit on it' }];
    const { best, leftOut } = selectModules({ profiles: [good, hindered, useless], unfit }, wish);
    expect(groupsOf(best)).toEqual([['K1']]);
    expect(leftOut).toEqual([
      { module: 'K2', why: 'it breaks off: run it again' },
      { module: 'K3', why: 'it is recommended for nothing by its records: the nameplate sets it' },
      { module: 'K4', why: 'its record is damaged: run real-limit on it' },
    ]);
  });

  it('an empty drawer gives nothing, and says so', () => {
    expect(select([], wish).standing).toEqual({
      kind: 'cannot-tell',
      because: ['1 module is needed, and there is none that can be used.'],
    });
  });
});

const amperes = fc.double({ min: 2, max: 4, noNaN: true });
const anyDrawer = fc
  .array(fc.record({ openCircuit: fc.double({ min: 15, max: 15.4, noNaN: true }), recommended: amperes }), {
    minLength: 4,
    maxLength: 7,
  })
  .map((made) => made.map((of, index) => madeProfile(`K${index + 1}`, of)));
const anyWish: fc.Arbitrary<SelectionWish> = fc
  .constantFrom(
    { group: 2, stack: 1, supplies: 1 },
    { group: 2, stack: 2, supplies: 1 },
    { group: 2, stack: 1, supplies: 2 },
    { group: 1, stack: 3, supplies: 1 },
    { group: 3, stack: 1, supplies: 1 },
  )
  .chain((sizes) =>
    fc
      .constantFrom(given, { kind: 'for-imbalance', most: 0.2 } as const)
      .map((ballast) => ({ ...sizes, ballast, tolerance: 0.01 })),
  );

describe('any drawer', () => {
  it('in another order gives the same', () => {
    fc.assert(
      fc.property(
        anyDrawer.chain((profiles) =>
          fc.tuple(fc.constant(profiles), fc.shuffledSubarray([...profiles], { minLength: profiles.length })),
        ),
        anyWish,
        ([profiles, shuffled], wished) => {
          const { modules, ...one } = select(profiles, wished);
          const { modules: others, ...other } = select(shuffled, wished);
          expect(other).toEqual(one);
          expect(others).toHaveLength(modules.length);
        },
      ),
      { numRuns: 15 },
    );
  });

  it('with one more module is never worth less', () => {
    fc.assert(
      fc.property(anyDrawer, amperes, anyWish, (profiles, recommended, wished) => {
        const before = select(profiles, wished).best;
        const after = select([...profiles, madeProfile('N1', { recommended })], wished).best;
        if (before === undefined) return;
        expect(after?.recommended).toBeGreaterThanOrEqual(before.recommended);
        if (after?.recommended === before.recommended) {
          expect(after.imbalance).toBeLessThanOrEqual(before.imbalance);
        }
      }),
      { numRuns: 25 },
    );
  });

  it('takes the pair that trying every one finds to be worth most', () => {
    fc.assert(
      fc.property(anyDrawer, (profiles) => {
        const singles = profiles.flatMap((one, index) =>
          profiles.slice(index + 1).map((other) => select([one, other], pairs).best?.recommended ?? 0),
        );
        const [most, second] = singles.sort((one, other) => other - one);
        const { best, next } = select(profiles, pairs);
        expect(best?.recommended).toBe(most);
        expect(next?.recommended).toBe(second);
      }),
      { numRuns: 25 },
    );
  });
});

describe('a wish that is none', () => {
  const profiles = drawer({ K1: {}, K2: {} });
  it.each([
    [{ ...wish, group: 0 }, "0 modules side by side can't be had"],
    [{ ...wish, stack: -1 }, "-1 groups in a stack can't be had"],
    [{ ...wish, supplies: 1.5 }, "1.5 supplies can't be had"],
    [{ ...pairs, ballast: { kind: 'given', resistance: 0 } as const }, 'A ballast of 0 Ω is none'],
    [{ ...pairs, tolerance: 1 }, 'A resistor of ± 100 % is none'],
  ])('%j', (wished, message) => {
    expect(() => select(profiles, wished)).toThrow(expect.objectContaining({ code: 'UNFIT_WISH', message }));
  });

  it('a drawer too large to compare is refused at once', () => {
    const many = Array.from({ length: 31 }, (_, index) => madeProfile(`K${index + 1}`));
    expect(() => select(many, pairs)).toThrow(/^31 modules give 465 groups of 2, more than can be compared/);
  });
});
