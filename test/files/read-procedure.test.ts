import { describe, expect, it } from 'vitest';
import { parseProcedure } from '../../src/files/read-procedure.js';
import { procedureExample, vocabulary } from './design-examples.js';
import { problemsOf } from './problems-of.js';

const changed = (find: string, replacement: string): string => {
  expect(procedureExample).toContain(find);
  return procedureExample.replace(find, replacement);
};
const parse = (text: string) => parseProcedure(text, 'real-limit.yaml', vocabulary);
const criterion = 'finding: usable-current, at-least: 100 % of rated-current';

it('the example of the design is read', () => {
  expect(parse(procedureExample)).toEqual({
    name: 'real-limit',
    title: 'What one module really delivers',
    purpose: '',
    circuit: 'single',
    wiring: [],
    cautions: ['mains', 'hot-surfaces'],
    limits: {},
    steps: [
      { kind: 'open-circuit', parameters: { for: 5 }, place: 'real-limit.yaml:6:5' },
      {
        kind: 'load-ramp',
        parameters: {
          from: { kind: 'absolute', value: 0 },
          to: { kind: 'share', ratio: 1, of: 'rated-current' },
          points: 21,
          dwell: 0.5,
          readings: 5,
          direction: 'up',
        },
        place: 'real-limit.yaml:7:5',
      },
      {
        kind: 'dropout-search',
        parameters: {
          from: { kind: 'share', ratio: 1, of: 'rated-current' },
          ceiling: { kind: 'share', ratio: 2, of: 'rated-current' },
          resolution: 0.01,
          sag: 0.05,
        },
        place: 'real-limit.yaml:8:5',
      },
    ],
    criteria: [
      {
        finding: 'usable-current',
        requirement: { kind: 'at-least', value: { kind: 'share', ratio: 1, of: 'rated-current' } },
      },
    ],
    derating: { margin: 0.8, aboveNameplate: 'never' },
  });
});

it('what may be left out has its default, and a step may stand without parameters', () => {
  const text = 'railproof: procedure 1\nname: look\ntitle: A look\nsteps:\n  - open-circuit:\n';
  expect(parse(text)).toEqual({
    name: 'look',
    title: 'A look',
    purpose: '',
    circuit: 'single',
    wiring: [],
    cautions: [],
    limits: {},
    steps: [{ kind: 'open-circuit', parameters: { for: 5 }, place: 'real-limit.yaml:5:5' }],
    criteria: [],
    derating: { margin: 0.8, aboveNameplate: 'never' },
  });
});

it('it may be for a group or for a stack, and say how the bench is wired', () => {
  const text = changed(
    'cautions:',
    'circuit: series\nwiring:\n  - Join plus of the lower to 0 V of the upper.\n  - The load goes across all.\ncautions:',
  );
  expect(parse(text)).toMatchObject({
    circuit: 'series',
    wiring: ['Join plus of the lower to 0 V of the upper.', 'The load goes across all.'],
  });
});

it('a purpose may fill several lines', () => {
  const text = changed(
    'cautions:',
    'purpose: |\n  Before it feeds the valves.\n  Again after each change.\ncautions:',
  );
  expect(parse(text).purpose).toBe('Before it feeds the valves.\nAgain after each change.');
});

it.each<[string, unknown]>([
  ['finding: load-regulation, at-most: 1 %', { kind: 'at-most', value: { kind: 'absolute', value: 0.01 } }],
  ['finding: share-of-K1, at-most: 60 %', { kind: 'at-most', value: { kind: 'absolute', value: 0.6 } }],
  [
    'finding: usable-current, at-least: 95 % of baseline',
    { kind: 'at-least', value: { kind: 'share', ratio: 0.95, of: 'baseline' } },
  ],
  ['finding: limit-style, is: constant-current', { kind: 'is', word: 'constant-current' }],
  ['finding: hogging-module, is: K2', { kind: 'is', word: 'K2' }],
])('a criterion: %s', (text, requirement) => {
  expect(parse(changed(criterion, text)).criteria[0]?.requirement).toEqual(requirement);
});

it('a tolerance may be named, by which it is compared with a baseline', () => {
  expect(parse(changed('cautions:', 'tolerance: earth-link-removed\ncautions:'))).toMatchObject({
    tolerance: 'earth-link-removed',
  });
});

describe('one mistake is one line, at its place', () => {
  it.each<[string, string, string]>([
    [
      'to: 100 % of rated-current',
      'to: 100 % of baseline',
      "7:33: steps.1.load-ramp.to: 'baseline' is known only when all is done, so only a criterion may refer to it; a share that gives a current refers to rated-current or dropout-current",
    ],
    [
      'finding: usable-current, at-least: 100 % of rated-current',
      'finding: share-of-*, at-least: 30 %',
      "10:16: criteria.0.finding: 'share-of-*' is one for each module; name one: share-of-K1",
    ],
    [
      '- dropout-search:',
      '- dropout-serch:',
      "8:5: steps.2: no step is called 'dropout-serch'; did you mean 'dropout-search'?",
    ],
    [
      '- open-circuit:',
      '- soak:',
      "6:5: steps.0: no step is called 'soak'; there are open-circuit, load-ramp, dropout-search, wait",
    ],
    ['open-circuit: { for: 5 s }', 'open-circuit', "6:5: steps.0: a step ends in a colon: 'open-circuit:'"],
    [
      'open-circuit: { for: 5 s }',
      '5 s',
      "6:5: steps.0: found '5 s'; a step is needed: the name of its kind, a colon, its parameters",
    ],
    [
      'open-circuit: { for: 5 s }',
      '',
      '6:5: steps.0: found nothing; a step is needed: the name of its kind, a colon, its parameters',
    ],
    ['open-circuit: { for: 5 s }', '{}', '6:5: steps.0: this step is empty; it needs the name of its kind'],
    [
      'open-circuit: { for: 5 s }',
      'open-circuit: {}\n    wait: { for: 1 s }',
      "6:5: steps.0: a step has exactly one kind; found 'open-circuit' and 'wait'",
    ],
    [
      'open-circuit: { for: 5 s }',
      'open-circuit: 5 s',
      "6:19: steps.0.open-circuit: found '5 s'; a map of keys is needed",
    ],
    ['for: 5 s', 'fro: 5 s', "6:21: steps.0.open-circuit: unknown key 'fro'; did you mean 'for'?"],
    [
      'for: 5 s',
      'for: 5 A',
      "6:26: steps.0.open-circuit.for: found '5 A', which is a current; a time is needed: 20 ms, 5 s, 1.5 min",
    ],
    ['points: 21', 'points: 1', '7:65: steps.1.load-ramp.points: found the number 1; at least 2 is needed'],
    [
      'points: 21',
      'points: 2.5',
      '7:65: steps.1.load-ramp.points: found the number 2.5; a whole number is needed',
    ],
    ['points: 21', 'points: 21 V', "7:65: steps.1.load-ramp.points: found '21 V'; a whole number is needed"],
    [
      'points: 21',
      'points: .nan',
      '7:65: steps.1.load-ramp.points: found the number NaN; a whole number is needed',
    ],
    [
      'to: 100 % of rated-current, ',
      '',
      '7:16: steps.1.load-ramp.to: missing; a current is needed: 4 A, 400 mA',
    ],
    [
      'to: 100 % of rated-current',
      'to: -5 % of rated-current',
      "7:33: steps.1.load-ramp.to: found '-5 % of rated-current'; more than 0 % is needed",
    ],
    [
      'of rated-current',
      'of rated-curent',
      "7:33: steps.1.load-ramp.to: nothing is called 'rated-curent'; did you mean 'rated-current'?",
    ],
    ['[mains,', '[main,', "4:12: cautions.0: found 'main'; did you mean 'mains'?"],
    ['80 %', '120 %', "11:21: derating.margin: found '120 %'; at most 100 % is needed"],
    [
      'usable-current',
      'usable-curent',
      "10:16: criteria.0.finding: no finding is called 'usable-curent'; did you mean 'usable-current'?",
    ],
    [
      criterion,
      'finding: share-of-, at-most: 60 %',
      "10:16: criteria.0.finding: no finding is called 'share-of-'; did you mean 'share-of-*'?",
    ],
    [
      criterion,
      'finding: usable-current',
      '10:5: criteria.0: a criterion has exactly one of at-least, at-most, is',
    ],
    [
      criterion,
      'finding: usable-current, at-least: 1 A, at-most: 2 A',
      '10:5: criteria.0: a criterion has exactly one of at-least, at-most, is',
    ],
    [
      criterion,
      'finding: usable-current, at-least: 4',
      '10:42: criteria.0.at-least: found the bare number 4; a current needs its unit: 4 A, 400 mA',
    ],
    [
      criterion,
      'finding: usable-current, at-least: 4 V',
      "10:42: criteria.0.at-least: found '4 V', which is a voltage; a current is needed: 4 A, 400 mA",
    ],
    [
      criterion,
      'finding: usable-current, is: good',
      '10:36: criteria.0.is: usable-current is a quantity; write at-least: or at-most: in place of is:',
    ],
    [
      criterion,
      'finding: limit-style, at-least: 4 A',
      '10:39: criteria.0.at-least: limit-style is a word; write is: in place of at-least:',
    ],
    [
      criterion,
      'finding: limit-style, is: hickup',
      "10:33: criteria.0.is: limit-style is never 'hickup'; did you mean 'hiccup'?",
    ],
    [
      criterion,
      'finding: usable-current, atleast: 4 A',
      "10:32: criteria.0: unknown key 'atleast'; did you mean 'at-least'?",
    ],
  ])('%s → %s', (find, replacement, problem) => {
    expect(problemsOf(() => parse(changed(find, replacement)))).toEqual([`real-limit.yaml:${problem}`]);
  });
});

it('mistakes of the file, of its steps and of its criteria are told together', () => {
  const text = changed('title:', 'titel:').replace('for: 5 s', 'for: 5').replace('usable-current', 'usable');
  expect(problemsOf(() => parse(text))).toEqual([
    "real-limit.yaml:3:1: unknown key 'titel'; did you mean 'title'?",
    'real-limit.yaml:6:26: steps.0.open-circuit.for: found the bare number 5; a time needs its unit: 20 ms, 5 s, 1.5 min',
    "real-limit.yaml:10:16: criteria.0.finding: no finding is called 'usable'",
  ]);
});

it('a procedure without steps, or with too many, is refused', () => {
  const text = (steps: string): string => `railproof: procedure 1\nname: x\ntitle: X\nsteps: ${steps}\n`;
  expect(problemsOf(() => parse(text('[]')))).toEqual([
    'real-limit.yaml:4:8: steps: found 0 of them; at least 1 are needed',
  ]);
  expect(problemsOf(() => parse(text('open-circuit')))).toEqual([
    "real-limit.yaml:4:8: steps: found 'open-circuit'; a list is needed",
  ]);
  const many = `[${Array.from({ length: 201 }, () => 'open-circuit: {}').join(', ')}]`;
  expect(problemsOf(() => parse(text(many)))).toEqual([
    'real-limit.yaml:4:8: steps: found 201 of them; at most 200 are allowed',
  ]);
});

describe('the limits of a procedure', () => {
  const limited = (limits: string) => changed('cautions:', `limits: ${limits}\ncautions:`);

  it('are quantities or shares of the nameplate, each of them optional', () => {
    expect(
      parse(limited('{ voltage: 110 % of rated-voltage, current: 5 A, temperature: 75 °C }')).limits,
    ).toEqual({
      voltage: { kind: 'share', ratio: 1.1, of: 'rated-voltage' },
      current: { kind: 'absolute', value: 5 },
      temperature: 75,
    });
    expect(parse(limited('{ power: 80 W }')).limits).toEqual({ power: 80 });
  });

  it.each([
    [
      '{ voltage: 110 % of open-circuit-voltage }',
      "real-limit.yaml:4:20: limits.voltage: 'open-circuit-voltage' is known only once it has been measured; a share here refers to rated-voltage",
    ],
    [
      '{ current: 110 % of rated-voltage }',
      "real-limit.yaml:4:20: limits.current: 'rated-voltage' is a voltage; a share that gives a current refers to rated-current or dropout-current",
    ],
    ['{ current: 0 A }', "real-limit.yaml:4:20: limits.current: found '0 A'; more than 0 A is needed"],
    [
      '{ power: 80 }',
      'real-limit.yaml:4:18: limits.power: found the bare number 80; a power needs its unit: 60 W, 500 mW',
    ],
    ['{ curent: 5 A }', "real-limit.yaml:4:11: limits: unknown key 'curent'; did you mean 'current'?"],
  ])('are refused with their place: %s', (limits, problem) => {
    expect(problemsOf(() => parse(limited(limits)))).toEqual([problem]);
  });
});
