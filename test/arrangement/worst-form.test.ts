import { describe, expect, it } from 'vitest';
import { type Form, modulesOf } from '../../src/arrangement/build.js';
import type { ModuleProfile } from '../../src/arrangement/module-profile.js';
import { worstOf } from '../../src/arrangement/worst-form.js';
import { limitOf, voltageOf } from '../../src/circuit/supply-line.js';
import fc from '../property.js';
import { madeProfile } from './made-profile.js';

const alone = (name: string): Form => ({ kind: 'module', name });
const group = (...of: Form[]): Form => ({ kind: 'group', of });
const stack = (...of: Form[]): Form => ({ kind: 'stack', of });
const [a, b, c, d] = ['A', 'B', 'C', 'D'].map(alone) as [Form, Form, Form, Form];
const forms: readonly Form[] = [
  a,
  group(a, b),
  group(a, b, c),
  stack(a, b, c),
  stack(group(a, b), c),
  stack(group(a, b), group(c, d)),
  group(stack(a, b), stack(c, d)),
  group(stack(group(a, b), c), d),
];

const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const profile = (name: string): fc.Arbitrary<ModuleProfile> =>
  fc
    .record({
      openCircuit: number(14.9, 15.3),
      droop: number(0.005, 0.1),
      recommended: number(2, 4),
      uncertainty: fc.record({ openCircuit: number(0, 0.02), droop: number(0, 0.004) }),
    })
    .map((made) => madeProfile(name, made));
const drawer = fc.tuple(profile('A'), profile('B'), profile('C'), profile('D'));

/** A module as it may really be. */
interface Real {
  readonly voltage: number;
  readonly resistance: number;
}
type Reals = ReadonlyMap<string, Real>;

/** By halves and not by corners: what a part gives into a voltage. */
function givenAt(form: Form, voltage: number, reals: Reals): number {
  switch (form.kind) {
    case 'module': {
      const real = reals.get(form.name);
      return real === undefined ? Number.NaN : Math.max(0, (real.voltage - voltage) / real.resistance);
    }
    case 'group':
      return form.of.reduce((sum, part) => sum + givenAt(part, voltage, reals), 0);
    case 'stack':
      return byHalves(0, 1e4, (current) => voltageAt(form, current, reals) > voltage);
  }
}

function voltageAt(form: Form, current: number, reals: Reals): number {
  switch (form.kind) {
    case 'module': {
      const real = reals.get(form.name);
      return real === undefined ? Number.NaN : real.voltage - current * real.resistance;
    }
    case 'group':
      return byHalves(-1e4, 100, (voltage) => givenAt(form, voltage, reals) > current);
    case 'stack':
      return form.of.reduce((sum, part) => sum + voltageAt(part, current, reals), 0);
  }
}

function byHalves(from: number, to: number, isBelow: (place: number) => boolean): number {
  let [low, high] = [from, to];
  for (let turn = 0; turn < 60; turn += 1) {
    const middle = (low + high) / 2;
    if (isBelow(middle)) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** What each module carries when the form gives so much. */
function carried(form: Form, current: number, reals: Reals): readonly (readonly [string, number])[] {
  switch (form.kind) {
    case 'module':
      return [[form.name, current]];
    case 'stack':
      return form.of.flatMap((part) => carried(part, current, reals));
    case 'group': {
      const bus = voltageAt(form, current, reals);
      return form.of.flatMap((part) => carried(part, givenAt(part, bus, reals), reals));
    }
  }
}

const ballast = { resistance: 0.051, tolerance: 0.05 };
const places = fc.array(fc.tuple(number(0, 1), number(0, 1), number(0, 1)), { minLength: 4, maxLength: 4 });

function realOf({ openCircuit, droop }: ModuleProfile, at: readonly [number, number, number]): Real {
  const between = ([low, high]: readonly [number, number], share: number) => low + (high - low) * share;
  const own = ballast.resistance * (1 + ballast.tolerance * (2 * at[2] - 1));
  return {
    voltage: between(openCircuit.interval, at[0]),
    resistance: Math.max(0, between(droop.interval, at[1])) + own,
  };
}

describe('the worst case of whatever is built', () => {
  it.each(forms.map((form) => [shownForm(form), form] as const))(
    '%s: within its limit no module is ever above what it is recommended for',
    (_, form) => {
      fc.assert(
        fc.property(drawer, places, (profiles, where) => {
          const { limit, strong, weak } = worstOf(form, profiles, ballast);
          const reals: Reals = new Map(
            profiles.map((each, index) => [each.name, realOf(each, where[index] ?? [0, 0, 0])]),
          );
          for (const [name, current] of carried(form, limit, reals)) {
            const own = profiles.find((each) => each.name === name)?.recommended.current ?? 0;
            expect(current).toBeLessThanOrEqual(own * (1 + 1e-6) + 1e-6);
          }
          const voltage = voltageAt(form, limit, reals);
          expect(voltage).toBeLessThanOrEqual(voltageOf(strong, limit) + 1e-6);
          expect(voltage).toBeGreaterThanOrEqual(voltageOf(weak, limit) - 1e-6);
          expect(Math.min(limitOf(strong), limitOf(weak))).toBeGreaterThanOrEqual(limit * (1 - 1e-9));
        }),
        { numRuns: modulesOf(form).length > 3 ? 25 : 100 },
      );
    },
  );

  it('of a group is reached: at its corner the module that sets it carries just that', () => {
    fc.assert(
      fc.property(drawer, (profiles) => {
        const form = group(a, b, c, d);
        const { limit, by } = worstOf(form, profiles, ballast);
        const reals: Reals = new Map(
          profiles.map((each) => [each.name, realOf(each, each.name === by ? [1, 0, 0] : [0, 1, 1])]),
        );
        const own = profiles.find(({ name }) => name === by)?.recommended.current ?? 0;
        expect(new Map(carried(form, limit, reals)).get(by)).toBeCloseTo(own, 4);
      }),
    );
  });

  it('is that of the weakest in a stack', () => {
    const profiles = [madeProfile('A'), madeProfile('B', { recommended: 3.1 }), madeProfile('C')];
    expect(worstOf(stack(a, b, c), profiles, undefined)).toMatchObject({ limit: 3.1, by: 'B' });
  });

  it('is less than twice one module where two share unequally, and more with a ballast', () => {
    const profiles = [madeProfile('A', { openCircuit: 15.25 }), madeProfile('B', { openCircuit: 15.2 })];
    const direct = worstOf(group(a, b), profiles, undefined);
    const with51 = worstOf(group(a, b), profiles, { resistance: 0.051, tolerance: 0.05 });
    expect(direct.by).toBe('A');
    expect(direct.limit).toBeLessThan(with51.limit);
    expect(with51.limit).toBeLessThan(8);
  });

  it('takes another limit where one is given, and a diode into account', () => {
    const profiles = [madeProfile('A'), madeProfile('B')];
    const behind = worstOf({ kind: 'behind', drop: 0.5, of: a }, profiles, undefined, () => 2);
    const bare = worstOf(a, profiles, undefined, () => 2);
    expect(behind.limit).toBe(2);
    expect(voltageOf(bare.weak, 2) - voltageOf(behind.weak, 2)).toBeCloseTo(0.5, 12);
    const both = group(a, { kind: 'module', name: 'B' });
    const unequal = worstOf(
      { kind: 'group', of: [{ kind: 'behind', drop: 0.5, of: a }, b] },
      profiles,
      ballast,
    );
    expect(unequal.limit).toBeLessThan(worstOf(both, profiles, ballast).limit);
  });
});

function shownForm(form: Form): string {
  if (form.kind === 'module') return form.name;
  return `${form.kind}(${form.of.map(shownForm).join(' ')})`;
}

it('every form of these tests names its modules', () => {
  expect(forms.map((form) => modulesOf(form).length)).toEqual([1, 2, 3, 3, 3, 4, 4, 4]);
});
