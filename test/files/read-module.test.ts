import { describe, expect, it } from 'vitest';
import { parseModule, readModule } from '../../src/files/read-module.js';
import { moduleExample } from './design-examples.js';
import { problemsOf } from './problems-of.js';

const changed = (find: string, replacement: string): string => {
  expect(moduleExample).toContain(find);
  return moduleExample.replace(find, replacement);
};
const rated = 'rated: { voltage: 15 V, current: 4 A, ambient: 40 °C }';

it('the example of the design is read', () => {
  expect(parseModule(moduleExample, 'K1.yaml')).toEqual({
    name: 'K1',
    description: '15 V brick from a retired label printer',
    rated: { voltage: 15, current: 4, ambient: 40 },
    protectionClass: 'I',
    input: 'mains',
    outputIsolation: 'unknown',
    changes: [{ date: '2026-11-14', what: 'link from output to earth removed' }],
  });
});

it('what may be left out has its plain default', () => {
  const text =
    'railproof: module 1\nname: K4\nrated: { voltage: 12 V, current: 2.5 A }\nprotection-class: II\ninput: dc\n';
  expect(parseModule(text, 'K4.yaml')).toEqual({
    name: 'K4',
    description: '',
    rated: { voltage: 12, current: 2.5 },
    protectionClass: 'II',
    input: 'dc',
    outputIsolation: 'unknown',
    changes: [],
  });
});

it.each(['K1', 'K2', 'K3'])('the nursery knows %s', async (name) => {
  const { value, path } = await readModule(`fixtures/modules/${name}.yaml`);
  expect(value).toMatchObject({ name, rated: { voltage: 15, current: 4, ambient: 40 }, input: 'mains' });
  expect(path).toBe(`fixtures/modules/${name}.yaml`);
});

it('K1 of the nursery is that of the design', async () => {
  const { value } = await readModule('fixtures/modules/K1.yaml');
  expect(value).toEqual(parseModule(moduleExample, 'K1.yaml'));
});

describe('one mistake is one line, at its place', () => {
  it.each<[string, string, string]>([
    ['voltage: 15 V', 'volage: 15 V', "4:10: rated: unknown key 'volage'; did you mean 'voltage'?"],
    [
      'current: 4 A',
      'current: 4',
      '4:34: rated.current: found the bare number 4; a current needs its unit: 4 A, 400 mA',
    ],
    [
      'current: 4 A',
      'current: 4 V',
      "4:34: rated.current: found '4 V', which is a voltage; a current is needed: 4 A, 400 mA",
    ],
    ['current: 4 A', 'current: 0 A', "4:34: rated.current: found '0 A'; more than 0 A is needed"],
    ['current: 4 A, ', '', '4:8: rated.current: missing; a current is needed: 4 A, 400 mA'],
    [
      'ambient: 40 °C',
      'ambient:',
      '4:39: rated.ambient: found nothing; a temperature is needed: 40 °C, 40 degC',
    ],
    [rated, 'rated:', '4:1: rated: found nothing; a map of keys is needed'],
    [rated, 'rated: [15 V, 4 A]', '4:8: rated: found a list; a map of keys is needed'],
    [rated, '', '1:1: rated: missing; a map of keys is needed'],
    ['input: mains', 'input: mans', "6:8: input: found 'mans'; did you mean 'mains'?"],
    ['input: mains', 'input: ac', "6:8: input: found 'ac'; one of mains, dc is needed"],
    ['input: mains', 'input: battery', "6:8: input: found 'battery'; one of mains, dc is needed"],
    ['class: I ', 'class: 1 ', '5:19: protection-class: found the number 1; one of I, II is needed'],
    ['unknown', 'unkown', "7:19: output-isolation: found 'unkown'; did you mean 'unknown'?"],
    [
      'unknown',
      'plenty',
      "7:19: output-isolation: found 'plenty'; unknown, or a voltage is needed: 15 V, 200 mV",
    ],
    [
      'unknown',
      '500',
      '7:19: output-isolation: found the bare number 500; a voltage needs its unit: 15 V, 200 mV',
    ],
    ['unknown', '-500 V', "7:19: output-isolation: found '-500 V'; more than 0 V is needed"],
    [
      '2026-11-14',
      '2026-02-30',
      "9:13: changes.0.date: found '2026-02-30'; a date is needed, year first: 2026-11-14",
    ],
    [
      '2026-11-14',
      '14.11.2026',
      "9:13: changes.0.date: found '14.11.2026'; a date is needed, year first: 2026-11-14",
    ],
    [
      'K1',
      '../K1',
      "2:7: name: found '../K1'; a name is needed: 1 to 64 letters, digits, '.', '_' or '-', not starting with '.'",
    ],
    [
      'K1',
      '.',
      "2:7: name: found '.'; a name is needed: 1 to 64 letters, digits, '.', '_' or '-', not starting with '.'",
    ],
    [
      'K1',
      '"K1\\n"',
      "2:7: name: found 'K1\\u000a'; a name is needed: 1 to 64 letters, digits, '.', '_' or '-', not starting with '.'",
    ],
    ['K1', '7', '2:7: name: found the number 7; a text is needed'],
    [
      '15 V brick from',
      '"\\e[31m" # ',
      "3:14: description: found '\\u001b[31m'; control characters are not allowed here",
    ],
    [
      '15 V brick from',
      `${'x'.repeat(300)} #`,
      '3:14: description: found 300 characters; at most 200 characters are allowed',
    ],
    [
      'input: mains',
      'input: mains\n__proto__: { input: dc }',
      "7:1: unknown key '__proto__'; known here: railproof, name, description, rated, protection-class, input, output-isolation, changes",
    ],
  ])('%s → %s', (find, replacement, problem) => {
    expect(problemsOf(() => parseModule(changed(find, replacement), 'K1.yaml'))).toEqual([
      `K1.yaml:${problem}`,
    ]);
  });
});

it('all mistakes are told at once, in the order of the file', () => {
  const text = changed('15 V,', '15,').replace('input: mains', 'input: mans').replace('name: K1', 'nam: K1');
  expect(problemsOf(() => parseModule(text, 'K1.yaml'))).toEqual([
    "K1.yaml:2:1: unknown key 'nam'; did you mean 'name'?",
    'K1.yaml:4:19: rated.voltage: found the bare number 15; a voltage needs its unit: 15 V, 200 mV',
    "K1.yaml:6:8: input: found 'mans'; did you mean 'mains'?",
  ]);
});

it('changes out of order are told, since they are read as a history', () => {
  const text = `${moduleExample}  - { date: 2026-11-13, what: lid opened }\n`;
  expect(problemsOf(() => parseModule(text, 'K1.yaml'))).toEqual([
    'K1.yaml:10:13: changes.1.date: found 2026-11-13 after 2026-11-14; the oldest change comes first',
  ]);
});
