import { describe, expect, it } from 'vitest';
import { buildSeries } from '../../src/arrangement/build-series.js';
import type { Concern } from '../../src/arrangement/build.js';
import type { ModuleProfile } from '../../src/arrangement/module-profile.js';
import { type MadeOf, madeProfile } from './made-profile.js';

const asRecommended = { load: undefined };
const stack = (...made: readonly MadeOf[]) => made.map((of, index) => madeProfile(`K${index + 1}`, of));
const three = stack({ usable: 5.1 }, { usable: 4.6, recommended: 3.7 }, { usable: 5.2 });
const because = (profiles: readonly ModuleProfile[], load?: number): string => {
  const { standing } = buildSeries(profiles, { load });
  return standing.kind === 'may-be-built' ? '' : `${standing.kind}: ${standing.because.join(' ')}`;
};

describe('a string of sound modules', () => {
  const build = buildSeries(three, asRecommended);

  it('may be built, for the current of its weakest module', () => {
    expect(build.standing).toEqual({ kind: 'may-be-built' });
    expect(build.usable.value).toBeCloseTo(4.6, 6);
    expect(build.recommended).toEqual({ current: 3.7, setBy: 'K2: the nameplate sets it' });
    expect(build.weakest).toMatchObject({ module: 'K2', sure: true });
    expect(build.load).toEqual({ current: 3.7, from: 'recommended' });
  });

  it('gives the sum of their voltages, less at the load', () => {
    expect(build.openVoltage.value).toBeCloseTo(45.63, 9);
    // Three independent ones of 3 mV each.
    expect(build.openVoltage.high - build.openVoltage.value).toBeCloseTo(1.959964 * 0.003 * Math.sqrt(3), 8);
    expect(build.voltageAtLoad.value).toBeCloseTo(45.63 - 3 * 0.018 * 3.7, 9);
    expect(build.curve.currents).toHaveLength(101);
    expect(build.curve.currents.at(-1)).toBe(build.usable.value);
    expect(build.curve.voltage.best[0]).toBeCloseTo(45.63, 9);
    expect(build.curve.voltage.best.at(-1)).toBeCloseTo(45.63 - 3 * 0.018 * 4.6, 6);
  });

  it('lets each output stand on those below it', () => {
    expect(build.rails.map(({ float }) => float.value)).toEqual([
      0,
      expect.closeTo(15.21, 9),
      expect.closeTo(30.42, 9),
    ]);
    expect(build.rails.map(({ verdict }) => verdict)).toEqual(['not-needed', 'within', 'within']);
    expect(build.beyondTouchable).toBe(false);
  });

  it('says what a bond at each 0 V would short', () => {
    expect(build.bonds.map(({ shorts, volts }) => [shorts, volts])).toEqual([
      [[], 0],
      [['K1'], expect.closeTo(15.21, 9)],
      [['K1', 'K2'], expect.closeTo(30.42, 9)],
    ]);
    expect(build.bonds[2]?.sentence).toBe(
      'A second bond, at the 0 V of K3, would short K1 and K2 (30.42 V) through earth.',
    );
    expect(build.cautions).toContain('Earth one point of the string at most, and its 0 V only.');
  });

  it('lists its modules and a diode for each, with what the diodes must bear', () => {
    expect(build.parts.map(({ marks, ratings }) => ({ marks, ratings }))).toEqual([
      { marks: ['K1', 'K2', 'K3'], ratings: ['15 V', '4 A'] },
      { marks: ['D1', 'D2', 'D3'], ratings: ['at least 8 A', '60 V reverse'] },
    ]);
    expect(build.diodes[0]).toMatchObject({
      module: 'K1',
      current: expect.closeTo(5.3 + 1.959964 * 0.008, 8) as number,
      rating: { current: 8, voltage: 60 },
    });
    expect(build.circuit).toMatchObject({ reverseDiodes: true, orDiodes: false, ballast: undefined });
  });

  it('that shares the meter of its modules is known less well than one of independent ones', () => {
    const byOneMeter = three.map((profile) => ({
      ...profile,
      openCircuit: {
        ...profile.openCircuit,
        budget: profile.openCircuit.budget.map((line) => ({ ...line, shared: 'meter gain' })),
      },
    }));
    const { openVoltage, rails } = buildSeries(byOneMeter, asRecommended);
    expect(openVoltage.high - openVoltage.value).toBeCloseTo(1.959964 * 0.009, 8);
    expect((rails[2]?.float.high ?? NaN) - (rails[2]?.float.value ?? NaN)).toBeCloseTo(1.959964 * 0.006, 8);
  });

  it('of two that are as weak does not say for sure which it is', () => {
    const { weakest, usable } = buildSeries(stack({ usable: 5 }, { usable: 5.005 }), asRecommended);
    expect(weakest).toMatchObject({ module: 'K1', sure: false });
    expect(weakest.then).toContain("K1 (or one that is as weak, the records can't tell)");
    expect(usable.value).toBeLessThan(5);
  });

  it('whose weakest was not driven to its limit leaves open how much more it is', () => {
    const [one, other] = stack({ usable: 4 }, { usable: 5 });
    if (one === undefined || other === undefined) throw new Error('no modules');
    const tried = { ...one, usable: { ...one.usable, bound: 'least' as const } };
    const { usable, weakest } = buildSeries([tried, other], asRecommended);
    expect(usable.bound).toBe('least');
    expect(weakest.sure).toBe(false);
  });
});

describe('what the string does past its limit', () => {
  const then = (style: MadeOf['style']) =>
    buildSeries(stack({ style, usable: 4 }, {}), asRecommended).weakest.then;

  it.each([
    ['constant-current', /^Past 4\.00 A K1 holds its current .* the string sags, by up to its 15\.1 V/],
    ['constant-power', /the string sags/],
    ['foldback', /folds back: its 15\.1 V are gone from the string at once/],
    ['hiccup', /switches off and tries again .* goes down as a whole/],
    ['latch-off', /switches off for good: .* until its input is cycled/],
    [undefined, /was not measured: .* run limit-shape on K1/],
  ] as const)('%s', (style, sentence) => {
    expect(then(style)).toMatch(sentence);
  });
});

describe('a string that is refused', () => {
  it.each([
    [
      'bonded',
      /^must-not-be-built: The output of K2 is bonded to earth inside, and would have to stand 15\.21 V/,
    ],
    ['leaky', /^must-not-be-built: K2 leaks to earth/],
  ] as const)('for a module that is %s', (earth, sentence) => {
    expect(because(stack({}, { earth }, {}))).toMatch(sentence);
  });

  it('for a bonded module even at the lowest place, and says what its bond would do there', () => {
    const text = because(stack({ earth: 'bonded' }, {}));
    expect(text).toMatch(
      /^must-not-be-built: The output of K1 is bonded to earth inside\. Only at the lowest place/,
    );
    expect(text).toContain("its bond would then earth the string's 0 V");
  });

  it('for isolation that does not bear its place', () => {
    expect(because(stack({}, {}, { outputIsolation: 40 }))).toMatch(
      /^must-not-be-built: K3 would stand at up to 45\.\d\d V above earth, and its output withstands 40 V\./,
    );
    expect(because(stack({ outputIsolation: 40 }, {}, {}))).toBe('');
  });

  it('for isolation that is within the place only if the meter is right', () => {
    expect(because(stack({}, { outputIsolation: 30.421 }))).toMatch(/^must-not-be-built/);
  });

  it('for more than it is recommended for, and gives no voltage as certain that nobody holds', () => {
    expect(because(three, 4.5)).toMatch(/^must-not-be-built: 4\.5 A is asked for, and 3\.70 A is the most/);
    expect(because(three, 3.704)).toMatch(
      /^must-not-be-built: 3\.704 A is asked for, and 3\.70 A is the most/,
    );
    const { voltageAtLoad } = buildSeries(three, { load: 4.9 });
    expect(voltageAtLoad.low).toBe(0);
    // Without K2, that holds 4.6 A.
    expect(voltageAtLoad.value).toBeCloseTo(2 * (15.21 - 0.018 * 4.9), 9);
  });

  it('for a module that its records recommend for nothing', () => {
    expect(because(stack({}, { recommended: 0 }))).toMatch(
      /^must-not-be-built: K2 is recommended for nothing/,
    );
  });

  it('has its voltages and currents given all the same, and nothing to buy', () => {
    const build = buildSeries(stack({}, { earth: 'bonded' }), asRecommended);
    expect(build.openVoltage.value).toBeCloseTo(30.42, 9);
    expect(build.diodes).toHaveLength(2);
    expect(build.parts).toEqual([]);
  });
});

describe('a string of which it cannot be told', () => {
  it('for a module whose earth was never measured, or could not be told', () => {
    expect(because(stack({}, { earth: undefined }))).toMatch(/^cannot-tell: .* run isolation on K2\.$/);
    expect(because(stack({ earth: 'undetermined' }, {}))).toMatch(
      /^cannot-tell: .* run isolation on K1 again/,
    );
    expect(buildSeries(stack({}, { earth: undefined }), asRecommended).parts).toEqual([]);
  });

  it('for a module that is fed with DC, as nothing shows that its output is cut off from its input', () => {
    expect(because(stack({ input: 'dc' }, {}))).toMatch(
      /^cannot-tell: K1 is fed with DC, and no record shows/,
    );
  });

  it('for unknown isolation beyond what is safe to touch, and not below it', () => {
    const unknown = { outputIsolation: 'unknown' as const };
    expect(because(stack(unknown, unknown, unknown, unknown))).toMatch(
      /^cannot-tell: K4: it would stand at up to 60\.\d\d V above earth, beyond the 60 V DC/,
    );
    // Each known to 3 mV, so 6 mV together.
    const four = (openCircuit: number): string =>
      because(stack(...Array.from({ length: 4 }, () => ({ ...unknown, openCircuit }))));
    expect(four(14.998)).toMatch(
      /^cannot-tell: K4: it would stand at up to 60\.01 V above earth, beyond the 60 V DC/,
    );
    expect(four(14.99)).toBe('');
    const low = buildSeries(stack(unknown, unknown, unknown), asRecommended);
    expect(low.standing.kind).toBe('may-be-built');
    expect(low.rails.map(({ verdict }) => verdict)).toEqual(['not-needed', 'unknown', 'unknown']);
    expect(low.concerns.map(({ kind, module, weight }) => [kind, module, weight])).toEqual([
      ['isolation-unknown', 'K2', 'weakens'],
      ['isolation-unknown', 'K3', 'weakens'],
    ]);
  });

  it('for a record that something hinders; one that failed is refused', () => {
    const concern: Concern = {
      kind: 'cut-off',
      module: 'K2',
      run: 'r',
      weight: 'hinders',
      text: 'its record ends without an end: run it again',
    };
    const [one, other] = stack({}, {}) as [ModuleProfile, ModuleProfile];
    expect(because([one, { ...other, concerns: [concern] }])).toBe(
      'cannot-tell: K2: its record ends without an end: run it again.',
    );
    expect(because([one, { ...other, concerns: [{ ...concern, kind: 'not-accepted' }] }])).toMatch(
      /^must-not-be-built: K2/,
    );
    expect(because([one, { ...other, concerns: [{ ...concern, weight: 'weakens' }] }])).toBe('');
  });

  it('a refusal outweighs what cannot be told', () => {
    expect(because(stack({ earth: 'bonded' }, { earth: undefined }))).toMatch(/^must-not-be-built/);
  });
});

describe('a string beyond 60 V', () => {
  it('is said not to be safe to touch', () => {
    const { beyondTouchable, cautions } = buildSeries(stack({}, {}, {}, {}), asRecommended);
    expect(beyondTouchable).toBe(true);
    expect(cautions.join(' ')).toContain('beyond the 60 V DC that are safe to touch');
  });
});

describe('the diodes', () => {
  it('of a string with modules whose limit nobody met are known as least values', () => {
    const { diodes } = buildSeries(stack({ dropout: undefined }, {}), asRecommended);
    expect(diodes.map(({ bound }) => bound)).toEqual([undefined, 'least']);
  });

  it('bear what a module gives into a short circuit where that is more than at its knee', () => {
    const { diodes } = buildSeries(
      stack({ style: 'constant-current', shortCircuit: 6.5 }, {}),
      asRecommended,
    );
    expect(diodes[1]?.current).toBeCloseTo(6.5 + 1.959964 * 0.008, 8);
  });
});

describe('a wish that is none', () => {
  it.each([
    ['no module', [], undefined, 'there is no module to stack'],
    ['one module', stack({}), undefined, 'K1 alone is no string'],
    ['a module twice', [...stack({}), ...stack({})], undefined, "K1 can't stand in two places of a string"],
    ['a load of nothing', stack({}, {}), 0, 'a load of 0 A is none'],
    ['a load below nothing', stack({}, {}), -1, 'a load of -1.00 A is none'],
    ['a load without end', stack({}, {}), Infinity, 'a load of ∞ A is none'],
  ])('%s', (_, profiles, load, message) => {
    expect(() => buildSeries(profiles, { load })).toThrow(
      expect.objectContaining({ code: 'UNFIT_WISH', message }),
    );
  });
});
