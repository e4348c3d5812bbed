import { describe, expect, it } from 'vitest';
import { UnfitRecordsError, UnfitWishError } from '../../src/arrangement/arrangement-error.js';
import { buildStages } from '../../src/arrangement/build-stages.js';
import type { LinearStage, Sequence, StagesWish } from '../../src/arrangement/stages-wish.js';
import { modulesOf } from '../../src/arrangement/build.js';
import fc from '../property.js';
import { alone, bricks, group, stack, valveBench, w1, w2, w3 } from './staged.js';
import { breaks, changeOvers, changes, diode, makes, pairWires, singleContacts } from './switched.js';

/** W1 and W2 only, side by side or one upon the other, by contacts that are given. */
function pairBench(contacts: StagesWish['contacts'], sequence: Sequence): StagesWish {
  return valveBench({
    contacts,
    wires: pairWires,
    arrangements: [
      { name: 'pair', form: group(w1, w2), driven: [] },
      { name: 'two', form: stack(w1, w2), driven: contacts.map(({ name }) => name) },
    ],
    sequence,
    output: { from: 0, to: 20 },
  });
}
const because = (wish: StagesWish, profiles = bricks()) => {
  const { standing } = buildStages(profiles, wish);
  return standing.kind === 'may-be-built' ? [] : standing.because;
};

describe('a staged supply that may be built', () => {
  const build = buildStages(bricks(), valveBench());

  it('has its arrangements by rising voltage, each with what it gives', () => {
    expect(build.standing).toEqual({ kind: 'may-be-built' });
    expect(build.arrangements.map(({ name, closed }) => [name, closed])).toEqual([
      ['pair', ['S1 on W2+', 'S2 on W1-', 'S3 on W2+']],
      ['two', ['S1 on link', 'S2 on link', 'S3 on W2+']],
      ['three', ['S1 on link', 'S2 on link', 'S3 on W3+']],
    ]);
    const [pair, two, three] = build.arrangements;
    expect(pair?.openVoltage.value).toBeCloseTo(12.1, 9);
    expect(three?.openVoltage.value).toBeCloseTo(36.3, 9);
    // Three times 20 mΩ and 51 mΩ at the recommended 2.5 A.
    expect(three?.fullVoltage.value).toBeCloseTo(36.3 - 3 * 0.071 * 2.5, 9);
    expect(two?.current).toBe(2.5);
    expect(pair?.current).toBeGreaterThan(4.5);
    expect(pair?.current).toBeLessThan(5);
    expect(pair?.setBy).toContain('W1, which would be the first above what it is recommended for');
  });

  it('is switched over where the lower one, at its weakest, leaves just the drop-out', () => {
    const [pair] = build.arrangements;
    const [first, second] = build.switchOvers;
    expect(first).toMatchObject({ lower: 'pair', upper: 'two' });
    expect(first?.up).toBeCloseTo((pair?.fullVoltage.low ?? 0) - 2, 9);
    expect(first?.down).toBeCloseTo((first?.up ?? 0) - 1, 9);
    expect(second?.swing.noLoad).toBeGreaterThan(12.1);
    expect(second?.swing.fullLoad).toBeLessThan(12.3);
  });

  it('gives what is guaranteed from end to end, its switch-overs among the places', () => {
    const outputs = build.guaranteed.map(({ output }) => output);
    expect(outputs[0]).toBe(0);
    expect(outputs.at(-1)).toBe(32);
    expect(outputs).toEqual([...outputs].sort((one, other) => one - other));
    for (const { up, down } of build.switchOvers) {
      expect(outputs).toContain(up);
      expect(outputs).toContain(down);
      const within = build.guaranteed.filter(({ output }) => output > down && output <= up);
      for (const { rising, falling } of within) expect(rising.arrangement).not.toBe(falling.arrangement);
    }
    expect(new Set(build.guaranteed.map(({ rising }) => rising.setBy))).toEqual(
      new Set(['dissipation', 'module']),
    );
  });

  it('has a map that never shows more heat than is allowed', () => {
    const { outputs, currents, watts } = build.map;
    expect([outputs.length, currents.length]).toEqual([40, 30]);
    const known = watts.flat().filter((each) => each !== null);
    expect(known.length).toBeGreaterThan(500);
    expect(Math.max(...known)).toBeLessThanOrEqual(25 * (1 + 1e-9));
    expect(Math.max(...known)).toBeGreaterThan(20);
  });

  it('lists what to buy: modules, ballasts, diodes, contacts with what they bear, a heat sink', () => {
    expect(build.parts.map(({ marks }) => marks.join(' '))).toEqual([
      'W1 W2 W3',
      'R1 R2 R3',
      'D1 D2 D3',
      'S1 S2 S3',
      'heat sink',
    ]);
    expect(build.parts[3]?.ratings).toEqual(['breaks 37 V DC', 'at least 5 A']);
    expect(build.parts[4]?.ratings).toEqual(['carries off 25.0 W']);
  });

  it('leaves modules out that no arrangement has', () => {
    const only = buildStages(bricks(), pairBench(changeOvers(false), 'any-order'));
    expect(only.modules.map(({ name }) => name)).toEqual(['W1', 'W2']);
  });
});

describe('what is guaranteed', () => {
  const voltage = fc.double({ min: 12, max: 12.2, noNaN: true });
  const made = fc.record({ openCircuit: voltage, droop: fc.double({ min: 0, max: 0.08, noNaN: true }) });
  const stage: fc.Arbitrary<LinearStage> = fc.record({
    dropOut: fc.double({ min: 1, max: 3, noNaN: true }),
    current: fc.double({ min: 1, max: 6, noNaN: true }),
    dissipation: fc
      .double({ min: 5, max: 60, noNaN: true })
      .map((most) => ({ kind: 'fixed', most }) as const),
  });

  it('holds for every module as it may be: neither too hot at any current, nor starved', () => {
    const places = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 3, maxLength: 3 });
    fc.assert(
      fc.property(made, made, made, stage, places, (one, two, three, linearStage, where) => {
        const profiles = bricks({ W1: one, W2: two, W3: three });
        const build = buildStages(profiles, valveBench({ linearStage }));
        const most = linearStage.dissipation.kind === 'fixed' ? linearStage.dissipation.most : 0;
        // The same voltage, droop and ballast for all: between the ends of each.
        const source = (current: number, form: string): number => {
          const each = profiles.map(({ openCircuit, droop }, index) => {
            const at = where[index] ?? 0;
            const between = ([low, high]: readonly [number, number]) => low + (high - low) * at;
            const own = 0.051 * (0.95 + 0.1 * at);
            return { volts: between(openCircuit.interval), ohms: Math.max(0, between(droop.interval)) + own };
          });
          if (form === 'pair') {
            const [a, b] = each;
            if (a === undefined || b === undefined) return Number.NaN;
            // Millman, while both carry something; else the higher one alone.
            const both = (a.volts / a.ohms + b.volts / b.ohms - current) / (1 / a.ohms + 1 / b.ohms);
            const [strong, weak] = a.volts >= b.volts ? [a, b] : [b, a];
            const single = strong.volts - strong.ohms * current;
            return single > weak.volts ? single : both;
          }
          return each
            .slice(0, form === 'two' ? 2 : 3)
            .reduce((sum, { volts, ohms }) => sum + volts - ohms * current, 0);
        };
        for (const { output, rising, falling } of build.guaranteed) {
          for (const { arrangement, current } of [rising, falling]) {
            for (const part of [0.25, 0.5, 0.75, 1]) {
              const heat = (source(part * current, arrangement) - output) * part * current;
              expect(heat).toBeLessThanOrEqual(most * (1 + 1e-6));
            }
            if (current > 0)
              expect(source(current, arrangement) - output).toBeGreaterThan(linearStage.dropOut - 1e-6);
          }
        }
      }),
      { numRuns: 40 },
    );
  });

  it('is set by the ballast where it bears less than its module', () => {
    const wish = valveBench({ ballast: { resistance: 0.51, tolerance: 0.05, rating: 2 } });
    const { arrangements, guaranteed } = buildStages(bricks(), wish);
    // √(2 W / 0.5355 Ω)
    expect(arrangements[2]?.current).toBeCloseTo(Math.sqrt(2 / (0.51 * 1.05)), 9);
    expect(arrangements[2]?.setBy).toContain('the ballast of W1');
    expect(guaranteed.map(({ rising }) => rising.setBy)).toContain('ballast');
  });

  it('is set by the drop-out near the top of the range, and by the linear stage where that is weakest', () => {
    const high = buildStages(
      bricks({ W1: { droop: 0.5 }, W2: { droop: 0.5 }, W3: { droop: 0.5 } }),
      valveBench({ output: { from: 0, to: 33 } }),
    );
    expect(high.guaranteed.at(-1)?.rising.setBy).toBe('drop-out');
    const weak = buildStages(
      bricks(),
      valveBench({ linearStage: { dropOut: 2, current: 0.5, dissipation: { kind: 'fixed', most: 25 } } }),
    );
    expect(new Set(weak.guaranteed.map(({ rising }) => rising.setBy))).toEqual(new Set(['linear-stage']));
  });

  it('is no more than the linear stage can bear, but a short at its output is', () => {
    // 3 × 12.1 V, and what the records leave open, at 5 A.
    expect(buildStages(bricks(), valveBench()).cautions.join('\n')).toMatch(
      /a short at the output would put up to 36\.3 V across the linear stage, and at its 5\.00 A make 18\d W of heat, where it may make 25\.0 W/,
    );
  });

  it('falls with the temperature of the case', () => {
    const by = (hottest: number) =>
      buildStages(
        bricks(),
        valveBench({
          linearStage: {
            dropOut: 2,
            current: 5,
            dissipation: { kind: 'by-case', full: 60, fullTo: 25, noneAt: 150, case: hottest },
          },
        }),
      );
    expect(by(25).mostDissipation).toBe(60);
    expect(by(87.5).mostDissipation).toBe(30);
    expect(by(87.5).parts.at(-1)?.ratings).toEqual([
      'keeps the case at 87.5 °C at most',
      'at most 1.58 K/W from case to air of 40 °C',
    ]);
  });

  it('counts what diodes take as lost where voltage is short, and as there where it makes heat', () => {
    const behind: StagesWish = valveBench({
      contacts: [],
      wires: [
        ['W1-', 'in-'],
        ['W2-', 'in-'],
      ],
      diodes: [diode('E1', 'W1+', 'in+'), diode('E2', 'W2+', 'in+')],
      arrangements: [{ name: 'pair', form: group(w1, w2), driven: [] }],
      output: { from: 0, to: 9 },
    });
    const { cautions, arrangements, parts } = buildStages(bricks(), behind);
    expect(arrangements[0]?.openVoltage.value).toBeCloseTo(11.6, 9);
    expect(arrangements[0]?.openVoltage.high).toBeGreaterThan(12.1);
    expect(arrangements[0]?.circuit.orDiodes).toBe(true);
    expect(cautions).toContainEqual(
      expect.stringMatching(/^Where modules side by side feed through diodes, those are taken to drop alike/),
    );
    expect(parts.find(({ marks }) => marks.includes('E1'))?.ratings).toContain('at most 500 mV forward');
  });
});

describe('contacts that move at different times', () => {
  it('are refused with the order that shorts a module', () => {
    const build = buildStages(bricks(), pairBench(singleContacts, 'any-order'));
    expect(build.standing).toEqual({
      kind: 'must-not-be-built',
      because: [
        'From pair to two, whose contacts may move in any order: S closes, and the output of W1 would be shorted, through B and S. Driven break before make no order does that.',
        'From two to pair, whose contacts may move in any order: A closes, and the output of W2 would be shorted, through A and S. Driven break before make no order does that.',
      ],
    });
    expect(build.parts).toEqual([]);
  });

  it('may be built where whatever opens opens first, with a word on what happens without supply', () => {
    const build = buildStages(bricks(), pairBench(singleContacts, 'break-before-make'));
    expect(build.standing).toEqual({ kind: 'may-be-built' });
    expect(build.cautions.join('\n')).toContain(
      'When the contacts lose their supply in two they fall back in any order: A closes, and the output of W2 would be shorted',
    );
    expect(build.cautions.join('\n')).toContain('Between pair and two the linear stage is without any feed');
  });

  describe('that harm in no step, and in a leap over one', () => {
    // W1; W2 upon W1; W3, of 24 V, upon W1. T lies across W3 at rest, through the node that C joins.
    const profiles = bricks({ W3: { openCircuit: 24.2, label: { voltage: 24, current: 2.5 } } });
    const leaping = valveBench({
      ballast: undefined,
      wires: [['W1-', 'in-']],
      contacts: [breaks('T', 'W3+', 'W1+'), makes('B', 'W1+', 'W2-'), makes('C', 'W1+', 'W3-')],
      diodes: [diode('D1', 'W1+', 'in+'), diode('D2', 'W2+', 'in+'), diode('D3', 'W3+', 'in+')],
      arrangements: [
        { name: 'one', form: w1, driven: [] },
        { name: 'two', form: stack(w1, w2), driven: ['T', 'B'] },
        { name: 'three', form: stack(w1, w3), driven: ['T', 'B', 'C'] },
      ],
      output: { from: 3, to: 30 },
    });
    const { standing, cautions } = buildStages(profiles, leaping);
    const said = cautions.join('\n');

    it('come with a word on what happens without supply, in whatever order they may move', () => {
      expect(standing).toEqual({ kind: 'may-be-built' });
      expect(said).toContain(
        'When the contacts lose their supply in three they fall back in any order: T closes, and the output of W3 would be shorted',
      );
    });

    it('come with a word on an output that leaps', () => {
      expect(said).toContain(
        'From one straight to three, as when the output leaps: C closes, and the output of W3 would be shorted, through C and T.',
      );
    });
  });

  it('are refused in any way of driving where they bridge', () => {
    for (const sequence of ['any-order', 'break-before-make', 'make-before-break'] as const) {
      expect(because(pairBench(changeOvers(true), sequence)).join('\n')).toContain(
        'S1 reaches link, still on W2+, then S2 reaches link, still on W1-, and the output of',
      );
    }
  });

  it('are refused where they short something at rest, though no arrangement rests there', () => {
    const wish = valveBench({
      contacts: [...valveBench().contacts, breaks('T', 'W3+', 'W3-')],
      arrangements: valveBench().arrangements.map((each) => ({ ...each, driven: [...each.driven, 'T'] })),
    });
    expect(because(wish)).toEqual([
      'With no contact driven, as when the relays lose their supply, the output of W3 would be shorted, through T. Wire it so that nothing is joined wrongly at rest.',
    ]);
  });
});

describe('contacts that make something else than is said', () => {
  it.each([
    [
      { name: 'pair', form: stack(w1, w2), driven: [] },
      'pair is to be the stack of W1 and W2. With no contact driven the contacts make the group of W1 and W2.',
    ],
    [
      { name: 'two', form: stack(w2, w1), driven: ['S1', 'S2'] },
      'two is to be the stack of W2 and W1. With S1, S2 driven the contacts make the stack of W1 and W2.',
    ],
    [
      { name: 'two', form: stack(w1, w2), driven: ['S1'] },
      'two is to be the stack of W1 and W2. With S1 driven the contacts make W2.',
    ],
  ])('are refused with what they make', (arrangement, message) => {
    const wish = valveBench({ arrangements: [arrangement], output: { from: 0, to: 9 } });
    expect(() => buildStages(bricks(), wish)).toThrow(message);
  });

  it('are refused with what they short, and where they feed nothing', () => {
    const shorted = valveBench({
      contacts: [makes('T', 'W1+', 'W1-'), makes('U', 'W1+', 'in+')],
      wires: [['W1-', 'in-']],
      arrangements: [{ name: 'one', form: w1, driven: ['T', 'U'] }],
    });
    expect(() => buildStages(bricks(), shorted)).toThrow(
      'one is to be W1. With T, U driven the output of W1 would be shorted, through T.',
    );
    const dark = { ...shorted, arrangements: [{ name: 'one', form: w1, driven: [] }] };
    expect(() => buildStages(bricks(), dark)).toThrow('no module feeds the linear stage');
  });
});

describe('modules that may not be stacked', () => {
  it.each(['bonded', 'leaky'] as const)('are refused: %s', (earth) => {
    const build = buildStages(bricks({ W2: { earth } }), valveBench());
    expect(build.standing.kind).toBe('must-not-be-built');
    expect(because(valveBench(), bricks({ W2: { earth } })).join('\n')).toContain('W2');
  });

  it('cannot be told where nobody measured them', () => {
    const { standing } = buildStages(bricks({ W3: { earth: undefined } }), valveBench());
    expect(standing).toMatchObject({ kind: 'cannot-tell' });
    expect(because(valveBench(), bricks({ W3: { earth: undefined } }))[0]).toContain('run isolation on W3');
  });

  it('are no matter where nothing is stacked', () => {
    const wish = valveBench({
      arrangements: [{ name: 'pair', form: group(w1, w2), driven: [] }],
      output: { from: 0, to: 9 },
    });
    expect(buildStages(bricks({ W2: { earth: 'bonded' } }), wish).standing.kind).toBe('may-be-built');
  });

  it('are refused where their isolation does not bear their place', () => {
    expect(because(valveBench(), bricks({ W3: { outputIsolation: 30 } })).join('\n')).toContain(
      'its output withstands 30 V',
    );
  });
});

it('an output beyond what the arrangements give is refused, and how far they go is said', () => {
  const [reason] = because(valveBench({ output: { from: 0, to: 40 } }));
  expect(reason).toMatch(/^Above 34\.3 V nothing is guaranteed, and the output is to reach 40\.0 V/);
});

/** K2 alone or W1 alone, each from in- on, by contacts that put K2 upon W1 meanwhile or at rest. */
function eitherBench(changed: Partial<StagesWish> = {}): StagesWish {
  return valveBench({
    wires: [['W1-', 'in-']],
    contacts: [changes('S1', ['W2-', 'in-', 'W1+']), makes('S2', 'W2+', 'in+'), breaks('S3', 'W1+', 'in+')],
    arrangements: [
      { name: 'one', form: w1, driven: [] },
      { name: 'other', form: w2, driven: ['S2', 'S3'] },
    ],
    sequence: 'break-before-make',
    output: { from: 0, to: 9 },
    ...changed,
  });
}
const hanging: Partial<StagesWish> = {
  arrangements: [
    { name: 'one', form: w1, driven: ['S1'] },
    { name: 'other', form: w2, driven: ['S2', 'S3'] },
  ],
};
const other = { openCircuit: 15.1, label: { voltage: 15, current: 4 } };

describe('modules that feed nothing and hang upon another', () => {
  it('may stand where they are free of earth and what they withstand is known', () => {
    expect(because(eitherBench(hanging), bricks({ W2: other }))).toEqual([]);
    const { cautions } = buildStages(bricks({ W2: other }), eitherBench(hanging));
    expect(cautions).toContainEqual(expect.stringMatching(/^Earth one point of the supply at most/));
    expect(cautions).toContainEqual(
      expect.stringMatching(
        /^In one modules that feed nothing there are live all the same .* W2 by up to 27\.2/,
      ),
    );
  });

  it('are refused where they are bonded to earth, which shorts what they hang upon', () => {
    const bonded = bricks({ W2: { ...other, earth: 'bonded' } });
    expect(because(eitherBench(), bonded)).toEqual([]);
    expect(because(eitherBench(hanging), bonded)).toEqual([
      expect.stringMatching(/^The output of W2 is bonded to earth inside, and would have to stand 12\.1/),
    ]);
  });

  it('are refused where they are bonded and hang so at rest only', () => {
    const bonded = bricks({ W2: { ...other, earth: 'bonded' } });
    const atRest = eitherBench({
      contacts: [changes('S1', ['W2-', 'W1+', 'in-']), makes('S2', 'W2+', 'in+'), breaks('S3', 'W1+', 'in+')],
      arrangements: [
        { name: 'one', form: w1, driven: ['S1'] },
        { name: 'other', form: w2, driven: ['S1', 'S2', 'S3'] },
      ],
    });
    expect(because(atRest, bonded)).toEqual([expect.stringContaining('W2 is bonded to earth inside')]);
  });

  it("can't be decided on where their earth was never measured, nor are beyond 60 V with nobody knowing what they withstand", () => {
    expect(because(eitherBench(hanging), bricks({ W2: { ...other, earth: undefined } }))).toEqual([
      expect.stringContaining('run isolation on W2'),
    ]);
    const high = {
      openCircuit: 36.1,
      label: { voltage: 36, current: 2 },
      outputIsolation: 'unknown' as const,
    };
    expect(because(eitherBench(hanging), bricks({ W1: high, W2: { ...high, openCircuit: 36.2 } }))).toEqual([
      expect.stringContaining('beyond the 60 V DC that are safe to touch'),
    ]);
  });

  it('count for what contacts and diodes are rated for, and for what must not be touched', () => {
    const high = { openCircuit: 36.1, label: { voltage: 36, current: 2 }, outputIsolation: 500 };
    const build = buildStages(bricks({ W1: high, W2: { ...high, openCircuit: 36.2 } }), eitherBench(hanging));
    expect(build.standing.kind).toBe('may-be-built');
    expect(build.cautions).toContainEqual(expect.stringMatching(/^It reaches 72\.[3-9].* beyond the 60 V/));
    expect(build.parts.find(({ marks }) => marks.includes('S2'))?.ratings[0]).toBe('breaks 73 V DC');
  });
});

it('a module that is recommended for nothing is refused where nothing is stacked too', () => {
  const wish = valveBench({
    arrangements: [{ name: 'pair', form: group(w1, w2), driven: [] }],
    output: { from: 0, to: 9 },
  });
  expect(because(wish, bricks({ W1: { recommended: 0 }, W2: { recommended: 0 } }))).toEqual([
    expect.stringMatching(/^W1 is recommended for nothing by its records: /),
    expect.stringMatching(/^W2 is recommended for nothing by its records: /),
  ]);
});

it('an output at which nothing at all is left to feed is refused', () => {
  const { arrangements } = buildStages(bricks(), valveBench());
  const top = (arrangements.at(-1)?.openVoltage.low ?? 0) - 2;
  expect(because(valveBench({ output: { from: 0, to: top } })).join(' ')).toContain('nothing is guaranteed');
  expect(because(valveBench({ output: { from: 0, to: top - 0.1 } }))).toEqual([]);
});

describe('contacts that lose their supply', () => {
  it('may not put more on the linear stage than any arrangement does', () => {
    const wish = valveBench({
      wires: [
        ['W1-', 'in-'],
        ['W2+', 'in+'],
      ],
      contacts: [changes('S1', ['W2-', 'W1+', 'in-']), makes('S2', 'W1+', 'in+')],
      arrangements: [{ name: 'pair', form: group(w1, w2), driven: ['S1', 'S2'] }],
      output: { from: 0, to: 9 },
    });
    expect(because(wish)).toEqual([
      expect.stringMatching(
        /^With no contact driven, .* the linear stage would stand at up to 24\.2.* V, and no arrangement goes beyond 12\.1/,
      ),
    ]);
  });

  it('are warned of where they put the highest arrangement on it whatever the output is', () => {
    const wish = valveBench({
      wires: [
        ['W1-', 'in-'],
        ['W1+', 'W2-'],
      ],
      contacts: [changes('S1', ['in+', 'W2+', 'W1+'])],
      arrangements: [
        { name: 'one', form: w1, driven: ['S1'] },
        { name: 'two', form: stack(w1, w2), driven: [] },
      ],
      output: { from: 0, to: 20 },
    });
    const warned = expect.stringMatching(
      /^Contacts that lose their supply put up to 24\.2 V on the linear stage, whatever its output then is: .* 121 W of heat, where it may make 25\.0 W/,
    ) as string;
    expect(because(wish)).toEqual([]);
    expect(buildStages(bricks(), wish).cautions).toContainEqual(warned);
    expect(buildStages(bricks(), valveBench()).cautions).not.toContainEqual(
      expect.stringContaining('Contacts that lose their supply put'),
    );
  });
});

describe('a group in an arrangement', () => {
  const grouped = valveBench({
    arrangements: [{ name: 'pair', form: group(w1, w2), driven: [] }],
    output: { from: 0, to: 9 },
  });

  it("can't be decided on where it gives less than its best module alone", () => {
    const unlike = bricks({ W2: { openCircuit: 12.5, recommended: 0.5 } });
    expect(because(grouped, unlike)).toEqual([
      expect.stringMatching(/^In pair W1 and W2 side by side are good for .*, less than W1 alone, 2\.50 A/),
    ]);
  });

  it('has a module named that adds hardly anything', () => {
    const unlike = bricks({ W2: { openCircuit: 12.5 } });
    const { standing, concerns } = buildStages(unlike, grouped);
    expect(standing.kind).toBe('may-be-built');
    expect(concerns).toContainEqual(
      expect.objectContaining({ kind: 'of-little-use', module: 'W1', weight: 'weakens' }),
    );
    expect(buildStages(bricks(), grouped).concerns).toEqual([]);
  });
});

it('a bond to earth that shorts a module only while contacts move is refused with the order that does it', () => {
  // Should T close first, W2 is for a moment upon W1; the diodes make nothing worse of that than more volts.
  const wish = valveBench({
    wires: [['W1-', 'in-']],
    contacts: [changes('S1', ['W2-', 'mid', 'in-']), makes('T', 'mid', 'W1+')],
    diodes: [diode('X1', 'W1+', 'in+'), diode('X2', 'W2+', 'in+')],
    arrangements: [
      { name: 'one', form: w1, driven: [] },
      { name: 'both', form: group(w1, w2), driven: ['S1', 'T'] },
    ],
    output: { from: 0, to: 9 },
  });
  expect(because(wish)).toEqual([]);
  expect(buildStages(bricks(), wish).cautions).toContainEqual(
    expect.stringMatching(/^While the contacts move between one and both .* at 2[23]\.\d V or more/),
  );
  expect(buildStages(bricks(), { ...wish, sequence: 'break-before-make' }).cautions).not.toContainEqual(
    expect.stringContaining('While the contacts move between one and both'),
  );
  expect(because(wish, bricks({ W2: { earth: 'bonded' } }))).toEqual([
    expect.stringMatching(
      /: T closes, and the output of W1 would be shorted, through S1, T and the bond of W2 to earth\. Driven break before make no order does that\.$/,
    ),
    expect.stringContaining('From both to one'),
  ]);
});

describe('silly wishes are refused', () => {
  const stage = (changed: Partial<LinearStage>): Partial<StagesWish> => ({
    linearStage: { ...valveBench().linearStage, ...changed },
  });
  it.each<[string, Partial<StagesWish>, string]>([
    ['no arrangement', { arrangements: [] }, 'There is no arrangement'],
    ['no drop-out', stage({ dropOut: 0 }), 'A drop-out of 0 V is none'],
    ['a negative drop-out', stage({ dropOut: -2 }), 'A drop-out of -2 V is none'],
    ['no current', stage({ current: 0 }), 'passes nothing'],
    ['no dissipation', stage({ dissipation: { kind: 'fixed', most: 0 } }), 'turn nothing into heat'],
    [
      'a case too warm',
      stage({ dissipation: { kind: 'by-case', full: 60, fullTo: 25, noneAt: 150, case: 160 } }),
      'turn nothing into heat',
    ],
    ['an output upside down', { output: { from: 20, to: 5 } }, 'An output from 20 V to 5 V is none'],
    ['no hysteresis', { hysteresis: 0 }, 'chatter'],
    ['a word that is none', { sequence: 'at-random' as Sequence }, "no sequence called 'at-random'"],
    [
      'a hysteresis as wide as a step',
      { hysteresis: 12.5, output: { from: 0, to: 32 } },
      'From two it would never come back to pair',
    ],
    [
      'a module twice',
      { arrangements: [{ name: 'pair', form: group(w1, w1), driven: [] }] },
      'W1 stands in two places of pair',
    ],
    ['a ballast of nothing', { ballast: { resistance: 0, tolerance: 0.05, rating: undefined } }, 'above 0 Ω'],
  ])('%s', (_, changed, message) => {
    const build = () => buildStages(bricks(), valveBench(changed));
    expect(build).toThrow(UnfitWishError);
    expect(build).toThrow(message);
  });

  it('a hysteresis that leaps over the step before', () => {
    const three = valveBench({
      contacts: [changes('S3', ['in+', 'W1+', 'W2+']), makes('T', 'W3-', 'W1-'), makes('U', 'W3+', 'W1+')],
      wires: [
        ['W1-', 'in-'],
        ['W1+', 'W2-'],
      ],
      arrangements: [
        { name: 'one', form: w1, driven: [] },
        { name: 'pair', form: group(w1, w3), driven: ['T', 'U'] },
        { name: 'two', form: stack(w1, w2), driven: ['S3'] },
      ],
      output: { from: 0, to: 20 },
    });
    expect(() => buildStages(bricks(), three)).toThrow('lie no further apart than the hysteresis');
  });

  it('a module without records', () => {
    const build = () => buildStages(bricks().slice(0, 2), valveBench());
    expect(build).toThrow(UnfitRecordsError);
    expect(build).toThrow('W3: none of the records is of it');
  });
});

it('every arrangement of these tests is of the bricks', () => {
  expect(modulesOf(stack(group(alone('W1'), alone('W2')), w3))).toEqual(['W1', 'W2', 'W3']);
});
