import { describe, expect, it } from 'vitest';
import { UnfitWishError } from '../../src/arrangement/arrangement-error.js';
import { recommendedWith } from '../../src/arrangement/ballast-choice.js';
import { buildParallel } from '../../src/arrangement/build-parallel.js';
import type { Concern } from '../../src/arrangement/build.js';
import type { LimitStyle, ModuleProfile } from '../../src/arrangement/module-profile.js';
import type { ParallelBuild, ParallelWish } from '../../src/arrangement/parallel-build.js';
import { preferredFrom } from '../../src/circuit/preferred-values.js';
import { worstSharing } from '../../src/circuit/worst-sharing.js';
import { madeProfile } from './made-profile.js';

// A group on a busy machine takes a second or two.
const patience = { timeout: 60_000 };

const given = (resistance: number, more: Partial<ParallelWish> = {}): ParallelWish => ({
  ballast: { kind: 'given', resistance },
  tolerance: 0.05,
  load: undefined,
  ...more,
});
const within = (most: number, more: Partial<ParallelWish> = {}): ParallelWish => ({
  ballast: { kind: 'for-imbalance', most },
  tolerance: 0.01,
  load: undefined,
  ...more,
});

const K1 = madeProfile('K1');
const K2 = madeProfile('K2', { openCircuit: 15.19, droop: 0.021, dropout: 5.2, usable: 5.15 });
const K3 = madeProfile('K3', {
  openCircuit: 15.23,
  droop: 0.016,
  dropout: 5.4,
  usable: 5.35,
  shortCircuit: 5.9,
  style: 'constant-current',
});

describe('three bricks side by side', patience, () => {
  const build = buildParallel([K1, K2, K3], within(0.1));

  it('may be built, and get the smallest E12 ballast that keeps them within what is wished at what they may then be asked for', () => {
    expect(build.standing).toEqual({ kind: 'may-be-built' });
    if (build.ballast.kind !== 'resistor') throw new Error(build.ballast.kind);
    const modules = build.modules.map(({ openCircuit, droop }) => ({
      openCircuit: { value: openCircuit.value, expanded: openCircuit.interval[1] - openCircuit.value },
      droop: { value: droop.value, expanded: droop.interval[1] - droop.value },
    }));
    const imbalance = (ballast: number): number =>
      worstSharing({
        modules,
        load: recommendedWith(build.modules, ballast, 0.01).limit,
        ballast,
        tolerance: 0.01,
      }).imbalance;
    const { resistance } = build.ballast;
    expect(imbalance(resistance)).toBeLessThanOrEqual(0.1);
    const smaller = [...preferredFrom(0.001, resistance * 0.99, 'E12')];
    expect(smaller.length).toBeGreaterThan(10);
    expect(smaller.filter((value) => imbalance(value) <= 0.1)).toEqual([]);
    expect(build.atLoad.imbalance.high).toBeCloseTo(imbalance(resistance), 9);
  });

  it('are recommended for less than the sum of what each is, and what sets it is named', () => {
    expect(build.recommended.current).toBeLessThan(build.sumOfSingles.recommended);
    expect(build.recommended.current).toBeGreaterThan(0.9 * build.sumOfSingles.recommended);
    expect(build.recommended.setBy).toMatch(/^K[123], which would be the first/);
    expect(build.load).toEqual({ current: build.recommended.current, from: 'recommended' });
    expect(build.usable.high).toBeLessThan(build.sumOfSingles.usable * 1.02);
    expect(build.usable.low).toBeGreaterThan(build.recommended.current);
  });

  it('share the load: at each place their currents add up to it, and the band holds the best line', () => {
    const { loads, currents, busVoltage } = build.sharing;
    expect(loads).toHaveLength(200);
    expect(loads.at(-1)).toBeCloseTo(build.usable.value, 6);
    for (const [place, load] of loads.entries()) {
      expect(load).toBeGreaterThan(loads[place - 1] ?? 0);
      expect(currents.reduce((sum, { best }) => sum + (best[place] ?? NaN), 0)).toBeCloseTo(load, 7);
      for (const { best, low, high } of [...currents, busVoltage]) {
        expect(low[place]).toBeLessThanOrEqual(best[place] ?? NaN);
        expect(high[place]).toBeGreaterThanOrEqual(best[place] ?? NaN);
      }
    }
  });

  it('bring a ballast that bears its heat twice in use, and its module at the limit', () => {
    if (build.ballast.kind !== 'resistor') throw new Error(build.ballast.kind);
    const { rating = 0, dissipation, dissipationAtLimit, resistance, voltageCost } = build.ballast;
    expect(rating).toBeGreaterThanOrEqual(2 * dissipation);
    expect(rating).toBeGreaterThanOrEqual(dissipationAtLimit);
    // Into a short circuit K3 gives 5.9 A, 1.96 standard uncertainties of 8 mA more at most.
    expect(dissipationAtLimit).toBeCloseTo((5.9 + 1.959964 * 0.008) ** 2 * resistance * 1.01, 6);
    expect(voltageCost).toBeCloseTo((resistance * build.load.current) / 3, 9);
  });

  it('come with a list of parts: modules, a ballast each, and diodes that may be left out', () => {
    expect(build.parts.map(({ marks }) => marks)).toEqual([
      ['K1', 'K2', 'K3'],
      ['R1', 'R2', 'R3'],
      ['D1', 'D2', 'D3'],
    ]);
    expect(build.parts[2]?.what).toMatch(/^optional/);
    // 1.5 × 5.9 A, and twice 15.2 V.
    expect(build.parts[2]?.ratings).toEqual(['at least 9 A', '40 V reverse']);
  });

  it('give the same answer again, and in the order in which they are named', () => {
    const again = buildParallel([K1, K2, K3], within(0.1));
    expect(again).toEqual(build);
    const turned = buildParallel([K3, K1, K2], within(0.1));
    const alike = (one: readonly number[] = [], other: readonly number[] = []): void => {
      for (const [place, value] of one.entries()) expect(other[place]).toBeCloseTo(value, 6);
    };
    for (const [here, there] of [
      [0, 1],
      [1, 2],
      [2, 0],
    ] as const) {
      alike(build.sharing.currents[here]?.low, turned.sharing.currents[there]?.low);
      alike(build.sharing.currents[here]?.high, turned.sharing.currents[there]?.high);
      expect(turned.failures[there]?.usable).toBeCloseTo(build.failures[here]?.usable ?? NaN, 6);
    }
    expect(turned.firstToSaturate.module).toBe(build.firstToSaturate.module);
    expect(turned.usable.value).toBeCloseTo(build.usable.value, 6);
    expect(turned.recommended.current).toBeCloseTo(build.recommended.current, 9);
  });
});

describe('two bricks by hand', patience, () => {
  const build = buildParallel([K1, K2], given(0.1, { load: 6 }));

  it('share by Millman: 6 A through 118 mΩ and 121 mΩ from 15.21 V and 15.19 V', () => {
    // I_1 = (6 A·121 mΩ + 20 mV)/239 mΩ.
    const first = (6 * 0.121 + 0.02) / 0.239;
    expect(build.load).toEqual({ current: 6, from: 'asked-for' });
    expect(build.atLoad.currents[0]?.value).toBeCloseTo(first, 9);
    expect(build.atLoad.currents[1]?.value).toBeCloseTo(6 - first, 9);
    expect(build.atLoad.busVoltage.value).toBeCloseTo(15.21 - first * 0.118, 9);
    expect(build.atLoad.shares[0]?.value).toBeCloseTo(first / 6, 9);
    expect(build.atLoad.imbalance.value).toBeCloseTo((2 * first - 6) / 3, 9);
  });

  it('know the first current to what voltages, droops and ballasts leave open', () => {
    // To first order: 3 mV each over 239 mΩ, and 3.12 A or 2.88 A times 5 mΩ/√3 over 239 mΩ: 0.0537 A, and
    // the sum of mostly two rectangles reaches about 1.9 of it.
    const { low = NaN, high = NaN } = build.atLoad.currents[0] ?? {};
    const standard =
      Math.hypot(0.003, 0.003, (3.12 * 0.005) / Math.sqrt(3), (2.88 * 0.005) / Math.sqrt(3)) / 0.239;
    expect((high - low) / 2 / standard).toBeGreaterThan(1.8);
    expect((high - low) / 2 / standard).toBeLessThan(1.96);
  });

  it('say what one does when the other is off, or shorts its output', () => {
    const [first, second] = build.failures;
    expect(first).toMatchObject({ module: 'K1', recommended: 4, rest: 'fails' });
    expect(first?.usable).toBeCloseTo(5.2 - 1.96 * 0.008, 2);
    expect(first?.sentences[0]).toBe(
      'With K1 switched off, the group fails: K2 holds 5.18 A, and the load is 6.00 A. Take the load down to 4.00 A first.',
    );
    expect(first?.sentences.join(' ')).toMatch(/no record shows/);
    // K1 pushes its 5.3 A and what is uncertain of it through 105 mΩ.
    expect(second?.sentences[2]).toMatch(
      /the others push up to 5\.32 A into it, its ballast turns 3\.0 W into heat/,
    );
    expect(second?.sentences[3]).toMatch(/8 A and 40 V reverse/);
  });
});

describe('what the rest carries when one is off', patience, () => {
  it.each([
    [3, 'carries-it'],
    [5, 'overloaded'],
    [7, 'fails'],
  ] as const)('at %d A: %s', (load, rest) => {
    const { failures } = buildParallel([K1, K2], given(0.1, { load }));
    expect(failures.map((lost) => lost.rest)).toEqual([rest, rest]);
  });
});

describe('without ballast', patience, () => {
  const story = (modules: readonly ModuleProfile[]): ParallelBuild['withoutBallast'] =>
    buildParallel(modules, given(0.1, { load: 5 })).withoutBallast;

  it('two that hiccup and lie 120 mV apart hold hardly more than one of them', () => {
    const high = madeProfile('K1', { openCircuit: 15.33, dropout: 5.3 });
    const low = madeProfile('K2', { openCircuit: 15.21, dropout: 5.2, usable: 5.15 });
    const { failsAt, hog, imbalance, story: told } = story([high, low]);
    // K2 gives nothing before the bus is down at 15.21 V, and there K1 would have to give 6.7 A.
    expect(failsAt).toBeCloseTo(5.3, 1);
    expect(hog).toBe('K1');
    expect(imbalance.value).toBeCloseTo(2, 9);
    expect(told.join(' ')).toMatch(/K1 is at its limit and switches off and tries again/);
    expect(told.join(' ')).toMatch(/That is more than the 5\.20 A of K2: it goes as well/);
    expect(told.at(-1)).toMatch(/fails at about 5\.30 A, 50 % of the 10\.5 A/);
  });

  it('two of constant current stay, and hold what their limits add up to', () => {
    const high = madeProfile('K1', { openCircuit: 15.33, dropout: 5.3, style: 'constant-current' });
    const low = madeProfile('K2', {
      openCircuit: 15.21,
      dropout: 5.2,
      usable: 5.15,
      style: 'constant-current',
    });
    const { failsAt, story: told } = story([high, low]);
    expect(failsAt).toBeGreaterThan(10.4);
    expect(told.join(' ')).toMatch(/K1 is at its limit and stays at its 5\.30 A/);
    expect(told.at(-1)).toMatch(/when all are at their limits/);
  });

  it('one of unknown style is told as such, and reckoned with as leaving', () => {
    const high = madeProfile('K1', { openCircuit: 15.33, style: undefined });
    const { failsAt, story: told } = story([high, K2]);
    expect(failsAt).toBeLessThan(5.5);
    expect(told.join(' ')).toMatch(/nobody has measured: reckon with it leaving/);
  });

  it('is told where it fails, if that comes before the load', () => {
    const high = madeProfile('K1', { openCircuit: 15.33 });
    const { load, failsAt } = buildParallel([high, K2], given(0.2, { load: 7 })).withoutBallast;
    expect(failsAt).toBeLessThan(6);
    expect(load).toBeLessThan(failsAt);
    expect(story([K1, K2]).load).toBe(5);
  });

  it('a bus that would have to fall by volts first is held by nobody', () => {
    const W1 = madeProfile('W1', { openCircuit: 12.1, dropout: 6, label: { voltage: 12, current: 2.5 } });
    const { failsAt, story: told } = story([K1, W1]);
    expect(failsAt).toBeCloseTo(5.3, 1);
    expect(told.at(-1)).toMatch(/^What is left could hold the bus only once it had fallen by more than 5 %/);
  });

  it('nobody is called the hog where the records can’t tell', () => {
    const { hog, story: told } = story([madeProfile('K1'), madeProfile('K2')]);
    expect(hog).toBeUndefined();
    expect(told[0]).toMatch(/can't be told/);
  });
});

describe('which comes to its limit first', patience, () => {
  it('is the weaker one, with what the group does there', () => {
    const weak = madeProfile('K2', {
      openCircuit: 15.21,
      dropout: 4.2,
      usable: 4.15,
      style: 'constant-current',
    });
    const { firstToSaturate } = buildParallel([K3, weak], given(0.1));
    expect(firstToSaturate).toMatchObject({ module: 'K2' });
    expect(firstToSaturate.probability).toBeGreaterThan(0.99);
    expect(firstToSaturate.load.low).toBeGreaterThan(8);
    expect(firstToSaturate.load.high).toBeLessThan(9.4);
    expect(firstToSaturate.then).toMatch(/K2 stays at its 4\.20 A.*The group goes on to about 9\.\d\d A/);
  });

  it('takes the group down with it where it leaves and the rest can’t carry everything', () => {
    const weak = madeProfile('K2', { dropout: 4.2, usable: 4.15, style: 'latch-off' });
    const { firstToSaturate, usable } = buildParallel([K1, weak], given(0.1));
    expect(firstToSaturate.then).toMatch(
      /leaves the group for good.*The group fails there: K1 can't carry it/,
    );
    expect(usable.high).toBeLessThan(8.8);
  });

  it('can be anyone of alike ones', () => {
    const { firstToSaturate } = buildParallel([madeProfile('K1'), madeProfile('K2')], given(0.1));
    expect(firstToSaturate.probability).toBeGreaterThan(0.45);
    expect(firstToSaturate.probability).toBeLessThan(0.55);
  });
});

describe('a group that may not be built', patience, () => {
  const because = (build: ParallelBuild): string =>
    build.standing.kind === 'may-be-built' ? '' : build.standing.because.join(' ');

  it('for more than it is recommended for: the number that would do, and how many modules would', () => {
    const build = buildParallel([K1, K2], given(0.1, { load: 9 }));
    expect(build.standing.kind).toBe('must-not-be-built');
    expect(because(build)).toMatch(/^9 A is asked for, and 7\.\d\d A is the most.*about 3 would do/);
    expect(build.parts).toEqual([]);
    expect(build.load).toEqual({ current: 9, from: 'asked-for' });
  });

  it('for more than it holds at all: the sheet then speaks of what it is recommended for', () => {
    const build = buildParallel([K1, K2], within(0.2, { load: 100 }));
    expect(build.standing.kind).toBe('must-not-be-built');
    expect(because(build)).toMatch(/^100 A is asked for.*about 2\d would do/);
    expect(build.load).toEqual({ current: build.recommended.current, from: 'recommended' });
    expect(build.ballast.kind).toBe('resistor');
  });

  it('of modules made for different voltages', () => {
    const W1 = madeProfile('W1', {
      openCircuit: 12.1,
      label: { voltage: 12, current: 2.5 },
      recommended: 2.5,
    });
    const build = buildParallel([K1, W1], given(0.1));
    expect(build.standing.kind).toBe('must-not-be-built');
    expect(because(build)).toMatch(/K1 is made for 15 V and W1 for 12 V/);
    expect(build.usable.value).toBeCloseTo(K1.usable.value, 2);
  });

  it('of which one gives far less than its label says: it would idle under the voltage of the other', () => {
    const low = madeProfile('K2', { openCircuit: 12 });
    const build = buildParallel([K1, low, K3], given(0.05));
    expect(build.standing.kind).toBe('must-not-be-built');
    expect(because(build)).toMatch(/^With no load K3 gives 15\.23 V and K2 12\.00 V, 3\.23 V apart/);
    const near = madeProfile('K2', { openCircuit: 14.6 });
    expect(buildParallel([K1, near], given(0.1)).standing.kind).toBe('may-be-built');
  });

  it('with one that is recommended for nothing', () => {
    const build = buildParallel([K1, madeProfile('K2', { recommended: 0 })], within(0.1));
    expect(because(build)).toMatch(/K2 is recommended for nothing/);
  });

  it('with an imbalance that no resistor of that tolerance gives', () => {
    const build = buildParallel([K1, K2], within(0.02, { tolerance: 0.05 }));
    expect(build.ballast).toMatchObject({ kind: 'impossible' });
    expect(because(build)).toMatch(/^No ballast does what is asked for: resistors of ± 5 % alone/);
  });

  it('with ballasts that take more than a tenth of the voltage', () => {
    const build = buildParallel([K1, K2], given(51));
    expect(because(build)).toMatch(/more than a tenth/);
    expect(build.standing.kind).toBe('must-not-be-built');
  });

  it('where a record hinders it: that can’t be told, or is refused for one that did not conform', () => {
    const concern = (kind: Concern['kind']): Concern => ({
      kind,
      module: 'K2',
      run: undefined,
      weight: 'hinders',
      text: 'something is wrong: run it again',
    });
    const of = (kind: Concern['kind']) =>
      buildParallel([K1, { ...K2, concerns: [concern(kind)] }], given(0.1)).standing;
    expect(of('cut-off')).toEqual({
      kind: 'cannot-tell',
      because: ['K2: something is wrong: run it again.'],
    });
    expect(of('not-accepted').kind).toBe('must-not-be-built');
  });
});

describe('how outputs stand to earth', patience, () => {
  it('refuses nothing side by side, and is cautioned about', () => {
    const bonded = (name: string) => madeProfile(name, { earth: 'bonded' });
    const two = buildParallel([bonded('K1'), bonded('K2')], given(0.1));
    expect(two.standing.kind).toBe('may-be-built');
    expect(two.cautions.join(' ')).toMatch(/K1 and K2 are bonded to earth inside.*close a loop/);
    const one = buildParallel([bonded('K1'), madeProfile('K2', { earth: undefined })], given(0.1));
    expect(one.cautions.join(' ')).toMatch(
      /output of K1 is bonded.*How the output of K2 stands to earth is not known/,
    );
  });
});

describe('odd records', patience, () => {
  it('modules that share well enough joined directly get no ballast', () => {
    const soft = (name: string) => madeProfile(name, { droop: 0.3, uncertainty: { openCircuit: 0.001 } });
    const build = buildParallel([soft('K1'), soft('K2')], within(0.3));
    expect(build.ballast).toEqual({ kind: 'none' });
    expect(build.circuit.ballast).toBeUndefined();
    expect(build.parts.map(({ marks }) => marks[0])).toEqual(['K1', 'D1']);
  });

  it('a limit that was not reached makes a least of what the group holds', () => {
    const [low, high] = K2.usable.interval;
    const untried = madeProfile('K2', { dropout: undefined, style: undefined, usable: 4.4 });
    const build = buildParallel(
      [K1, { ...untried, usable: { ...untried.usable, bound: 'least' } }],
      given(0.1),
    );
    expect(high).toBeGreaterThan(low);
    expect(build.usable).toMatchObject({ bound: 'least' });
    expect(build.firstToSaturate.module).toBe('K2');
    expect(build.failures[0]?.sentences[2]).toMatch(/push at least/);
  });

  it('a module that may be used up to less than its limit takes the group’s usable current down, not its limit', () => {
    const build = buildParallel([K1, madeProfile('K2', { usable: 4 })], given(0.1));
    expect(build.usable.high).toBeLessThan(8.4);
    expect(build.firstToSaturate.load.low).toBeGreaterThan(10);
  });

  const styles: readonly (LimitStyle | undefined)[] = [
    'constant-current',
    'foldback',
    'constant-power',
    'hiccup',
    'latch-off',
    undefined,
  ];
  it.each(styles.map((style) => [style ?? 'unknown', style] as const))(
    'numbers come out for the limit style %s',
    (_, style) => {
      const of = (name: string, openCircuit: number) =>
        madeProfile(name, { openCircuit, style, ...(style === 'foldback' ? { shortCircuit: 1.2 } : {}) });
      const build = buildParallel([of('K1', 15.24), of('K2', 15.2), K3], within(0.15));
      expect(notNumbers(build)).toEqual([]);
      expect(build.usable.low).toBeGreaterThan(build.recommended.current);
    },
  );
});

/** The paths of what is no finite number. */
function notNumbers(value: unknown, path = ''): readonly string[] {
  if (typeof value === 'number') return Number.isFinite(value) ? [] : [path];
  if (typeof value !== 'object' || value === null || path.endsWith('.budget')) return [];
  return Object.entries(value).flatMap(([key, each]) => notNumbers(each, `${path}.${key}`));
}

describe('a silly wish', () => {
  it.each<[string, readonly ModuleProfile[], ParallelWish]>([
    ['no module', [], given(0.1)],
    ['one module', [K1], given(0.1)],
    ['a module beside itself', [K1, K1], given(0.1)],
    ['a ballast of 0 Ω', [K1, K2], given(0)],
    ['a negative ballast', [K1, K2], given(-0.1)],
    ['an endless ballast', [K1, K2], given(Infinity)],
    ['an imbalance of 0 %', [K1, K2], within(0)],
    ['an imbalance of 100 %', [K1, K2], within(1)],
    ['a tolerance of 100 %', [K1, K2], given(0.1, { tolerance: 1 })],
    ['a tolerance below 0 %', [K1, K2], given(0.1, { tolerance: -0.01 })],
    ['a load of 0 A', [K1, K2], given(0.1, { load: 0 })],
    ['a load that is no number', [K1, K2], given(0.1, { load: NaN })],
    ['an endless load', [K1, K2], given(0.1, { load: Infinity })],
  ])('%s is refused, with what to do instead', (_, modules, wish) => {
    const refusal = (): unknown => {
      try {
        return buildParallel(modules, wish);
      } catch (error) {
        return error;
      }
    };
    const error = refusal();
    expect(error).toBeInstanceOf(UnfitWishError);
    expect((error as UnfitWishError).advice).toMatch(/\.$/);
  });
});

describe('a module that does little for its group', patience, () => {
  const small = madeProfile('K4', {
    label: { voltage: 15, current: 1 },
    openCircuit: 15.5,
    usable: 1.3,
    dropout: 1.4,
    recommended: 1,
  });
  const large = madeProfile('K5', {
    label: { voltage: 15, current: 8 },
    usable: 9.5,
    dropout: 10,
    recommended: 8,
  });

  it('is told where the group is worse than its best module alone, and nothing is bought', () => {
    const { standing, recommended, parts } = buildParallel([small, large], given(0.1));
    expect(recommended.current).toBeLessThan(8);
    expect(standing).toMatchObject({
      kind: 'cannot-tell',
      because: [expect.stringMatching(/^The group is recommended for .* A, less than K5 alone, 8\.00 A/)],
    });
    expect(parts).toEqual([]);
  });

  it('is a concern where the others give as much without it', () => {
    const weak = madeProfile('K6', { openCircuit: 14.9, recommended: 4 });
    const { concerns, recommended } = buildParallel([K1, K2, weak], given(0.01));
    const without = buildParallel([K1, K2], given(0.01)).recommended.current;
    expect(recommended.current - without).toBeLessThan(0.4);
    expect(concerns).toMatchObject([{ kind: 'of-little-use', module: 'K6', weight: 'weakens' }]);
  });

  it('is none where all are alike', () => {
    const { concerns, standing } = buildParallel([K1, K2, K3], within(0.1));
    expect(concerns).toEqual([]);
    expect(standing).toEqual({ kind: 'may-be-built' });
  });
});
