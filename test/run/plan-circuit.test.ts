import { describe, expect, it } from 'vitest';
import type { Bench, BenchDrivers } from '../../src/files/bench.js';
import type { Module } from '../../src/files/module.js';
import { circuitProblems, needProblems, needsOperator, underTestOf } from '../../src/run/plan-circuit.js';
import type { PlanStep } from '../../src/run/plan.js';
import type { StepKind } from '../../src/steps/step-kind.js';
import { k1 } from '../steps/one-step.js';
import { groupBench } from '../bench/group-bench.js';

const named = (name: string, change: Partial<Module> = {}): Module => ({ ...k1, name, ...change });
const k2 = named('K2', { rated: { voltage: 14, current: 3 } });
const k3 = named('K3');
const { description, drivers } = await groupBench();
const { group, simulation, ...plain } = description;
if (group === undefined || simulation === undefined) throw new Error('the bench has a group');

describe('what is under test', () => {
  it('is one module with its own label', () => {
    expect(underTestOf('single', [k1])).toEqual({
      circuit: 'single',
      modules: [k1],
      name: 'K1',
      rated: { voltage: 15, current: 4 },
    });
  });

  it('is a group: the currents add, the smallest voltage counts', () => {
    expect(underTestOf('parallel', [k1, k2])).toMatchObject({
      name: 'K1+K2',
      rated: { voltage: 14, current: 7 },
    });
  });

  it('is a stack: the voltages add, the smallest current counts', () => {
    expect(underTestOf('series', [k1, k2, k3])).toMatchObject({
      name: 'K1+K2+K3',
      rated: { voltage: 44, current: 3 },
    });
  });
});

describe('modules that do not fit are told', () => {
  it.each<[string, Parameters<typeof underTestOf>, Bench, readonly string[]]>([
    ['a group that fits', ['parallel', [k1, k2, k3]], description, []],
    [
      'one module on a bench with a group',
      ['single', [k1]],
      description,
      ['the procedure is for one module and the bench simulates a parallel circuit'],
    ],
    [
      'a module given twice',
      ['parallel', [k1, k2, k1]],
      description,
      ['K1 was given twice; each module has a place of its own'],
    ],
    [
      'two for a procedure of one',
      ['single', [k1, k2]],
      plain,
      ['the procedure tests one module, K1; K2 was given too'],
    ],
    [
      'one for a procedure of several',
      ['series', [k1]],
      plain,
      ['the procedure is for modules in series; give --module for each of them, in the order of the circuit'],
    ],
    [
      'fewer than places',
      ['parallel', [k1, k2]],
      description,
      ["2 modules were given and the bench's group has 3 places"],
    ],
    [
      'another circuit than is simulated',
      ['series', [k1, k2, k3]],
      description,
      ['the procedure is for modules in series and the bench simulates a parallel circuit'],
    ],
    ['a bench that simulates nothing', ['series', [k1, k2, k3]], { ...plain, group }, []],
  ])('%s', (_, [circuit, modules], bench, problems) => {
    expect([...circuitProblems(underTestOf(circuit, modules), bench)]).toEqual(problems);
  });
});

describe('what a step needs and does not find is told', () => {
  const step = { place: 'sharing.yaml:7:5', kind: 'sharing-log', parameters: {} };
  const problems = (
    needs: Partial<StepKind['needs']>,
    circuit: 'single' | 'parallel' | 'series' = 'parallel',
    bench: Bench = description,
    of: BenchDrivers = drivers,
    modules: Parameters<typeof underTestOf>[1] = [k1, k2, k3],
  ): string[] => {
    const kind = { needs: { liveModule: true, operator: 'never', ...needs } } as StepKind;
    return [...needProblems(step, kind, underTestOf(circuit, modules), bench, of)];
  };

  it.each<[string, string[], readonly string[]]>([
    ['nothing', problems({}), []],
    ['taps that are there', problems({ taps: true }), []],
    [
      'another circuit',
      problems({ circuits: ['parallel', 'series'] }, 'single'),
      ["sharing-log: is for parallel and series circuits, and the procedure's is single"],
    ],
    [
      'a group',
      problems({ taps: true }, 'parallel', plain),
      ["sharing-log: the bench file has no 'group' section, which says how the modules are told apart"],
    ],
    [
      'ballasts',
      problems({ taps: true }, 'parallel', {
        ...plain,
        group: { ...group, places: [...group.places.slice(1), {}] },
      }),
      ["sharing-log: place 3 of the bench's group has no ballast, from whose voltage its current is known"],
    ],
    [
      'no ballasts in a stack',
      problems({ taps: true }, 'series', { ...plain, group: { ...group, places: [{}, {}, {}] } }),
      [],
    ],
    [
      'a meter for the operator to move',
      problems({ taps: true }, 'series', {
        ...plain,
        instruments: { load: plain.instruments.load },
        group: { ...group, measuredBy: 'operator' },
      }),
      ['sharing-log: needs a meter, and the bench has none'],
    ],
    [
      'nobody who moves probes in a stack that is not touch-safe',
      problems(
        { taps: true },
        'series',
        { ...description, group: { ...group, measuredBy: 'operator' } },
        drivers,
        [k1, k2, k3, named('K4', { rated: { voltage: 24, current: 4 } })],
      ),
      [
        'sharing-log: a stack of 68 V is above the 60 V DC that are touch-safe, so nobody may move probes in it: use a scanner or a meter at each place',
      ],
    ],
    [
      'operations and readings that drivers have',
      problems({
        operations: { load: ['voltage-mode'], meter: ['measure-resistance'] },
        readings: { meter: ['resistance'] },
      }),
      [],
    ],
    [
      'a meter',
      problems({ readings: { meter: ['resistance'] } }, 'parallel', description, { load: drivers.load }),
      ['sharing-log: needs a meter, and the bench has none'],
    ],
    [
      'what drivers do not say',
      problems({ operations: { load: ['fly'] }, readings: { meter: ['humidity'] } }),
      [
        'sharing-log: the driver load-input-scpi does not say how to do fly',
        'sharing-log: the driver meter-read-scpi does not say how to read humidity',
      ],
    ],
  ])('%s', (_, found, expected) => {
    expect(found).toEqual(expected.map((problem) => `sharing.yaml:7:5: ${problem}`));
  });
});

describe('someone has to be there', () => {
  const stepOf = (needs: Partial<StepKind['needs']>, asks?: StepKind['asks']): PlanStep => ({
    kind: { needs: { liveModule: true, operator: 'never', ...needs }, ...(asks && { asks }) } as StepKind,
    parameters: {},
    summary: '',
    duration: 0,
  });

  it('for a step that always needs one, or asks someone, and for taps that only a hand can reach', () => {
    const byHand = { ...description, group: { ...group, measuredBy: 'operator' } } as const;
    expect(needsOperator(stepOf({ operator: 'always' }), description)).toBe(true);
    expect(
      needsOperator(
        stepOf({}, () => true),
        description,
      ),
    ).toBe(true);
    expect(
      needsOperator(
        stepOf({}, () => false),
        description,
      ),
    ).toBe(false);
    expect(needsOperator(stepOf({ taps: true }), byHand)).toBe(true);
    expect(needsOperator(stepOf({ taps: true }), description)).toBe(false);
    expect(needsOperator(stepOf({}), byHand)).toBe(false);
  });
});
