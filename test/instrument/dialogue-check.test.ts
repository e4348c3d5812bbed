import { expect, it } from 'vitest';
import { parseDriver } from '../../src/files/read-driver.js';
import { checkDialogue } from '../../src/instrument/dialogue-check.js';

const loadOfTwoChannels = String.raw`railproof: driver 1
name: load-nursery
role: load
summary: The load of the nursery's workshop
identify: "*IDN?"
identity: "^nursery"
errors: { ask: "SYST:ERR?", clear: "^0\\b", harmless: "^-221", again: "^-363" }
ready: { ask: "*STB?", bits-set: 16 }
channels: { select: ["INST:NSEL {channel}"], from: 1, to: 2 }
operations:
  make-safe: ["INP OFF"]
  input-on: ["INP ON"]
  input-off: ["INP OFF"]
  current-mode: [{ send: "FUNC CURR", rest: 300 ms }]
  set-current: ["CURR {amps}"]
readings:
  voltage: { ask: "MEAS:VOLT?", unit: mV, pattern: '^(?<value>[-+0-9.E]+) ?(?<unit>m?V)?$' }
  current: { ask: "MEAS:CURR?", unit: A }
  input-state: { ask: "INP?", true-when: "^(1|ON)$" }
dialogue:
`;

const mistakes = (exchange: string): string[] =>
  checkDialogue(parseDriver(`${loadOfTwoChannels}  - ${exchange}\n`, 'load.yaml')).map(
    ({ key, message }) => `${key}: ${message}`,
  );

it.each([
  '{ identity: "nursery,load 1,7,2.1", is: understood }',
  '{ identity: "barn,load 1,7,2.1", is: not-understood }',
  '{ operation: set-current, value: 2500 mA, sends: ["INST:NSEL 1", "CURR 2.5"] }',
  '{ operation: current-mode, channel: 2, sends: ["INST:NSEL 2", "FUNC CURR"] }',
  '{ reading: voltage, sends: ["INST:NSEL 1", "MEAS:VOLT?"], answer: "15.21 V", is: 15.21 V }',
  '{ reading: voltage, answer: "1.5210E+04", is: 15.21 V }',
  '{ reading: voltage, answer: "15210.3", is: 15210.3 mV }',
  '{ reading: current, answer: "+9.9E37", is: overload }',
  '{ reading: current, answer: "NAN", is: not-a-number }',
  '{ reading: current, answer: "4 apples", is: not-understood }',
  '{ reading: input-state, answer: "1", is: yes }',
  '{ reading: input-state, answer: "OFF", is: no }',
  `{ errors: '0,"No error"', is: clear }`,
  `{ errors: '-221', is: harmless }`,
  `{ errors: '-363,"Input buffer overrun"', is: again }`,
  `{ errors: '-113,"Undefined header"', is: error }`,
  '{ errors: "none at all", is: not-understood }',
  '{ ready: "48", is: yes }',
  '{ ready: "32", is: no }',
  '{ ready: "soon", is: not-understood }',
])('finds nothing wrong with %s', (exchange) => {
  expect(mistakes(exchange)).toEqual([]);
});

it.each([
  [
    '{ operation: set-current, value: 2.5 A, channel: 2, sends: ["CURR 2.500"] }',
    'sends: this driver sends "INST:NSEL 2", "CURR 2.5"; expected "CURR 2.500"',
  ],
  [
    '{ reading: voltage, answer: "15.21", is: 15.21 V }',
    'is: "15.21" came out as 15.21 mV; expected 15.21 V',
  ],
  [
    '{ reading: voltage, answer: "V 15.21", is: 15.21 V }',
    'is: "V 15.21" was not understood, a reply that fits /^(?<value>[-+0-9.E]+) ?(?<unit>m?V)?$/ was due; expected 15.21 V',
  ],
  [
    '{ reading: current, answer: "4", is: not-understood }',
    'is: "4" came out as 4 A; expected not-understood',
  ],
  ['{ reading: input-state, answer: "1", is: no }', 'is: "1" came out as yes; expected no'],
  ['{ identity: "barn", is: understood }', 'is: "barn" came out as not-understood; expected understood'],
  [
    '{ errors: "what?", is: clear }',
    'is: "what?" was not understood, an entry of the error queue (a whole number, a comma, a text) was due; expected clear',
  ],
  ['{ ready: "32", is: yes }', 'is: "32" came out as no; expected yes'],
])('says of %s what came out in place of what', (exchange, mistake) => {
  expect(mistakes(exchange)).toEqual([mistake]);
});

it('reads the channel of a scanner, and that none is closed', () => {
  const scanner = [
    'railproof: driver 1',
    'name: scanner-nursery',
    'role: scanner',
    'summary: The scanner of the workshop',
    'identify: "*IDN?"',
    'errors: { ask: "*ESR?", error-bits: 60 }',
    'operations: { make-safe: ["OPEN"], open-all: ["OPEN"], close-channel: ["CLOS {channel}"] }',
    'readings:',
    `  closed-channel: { ask: "CLOS?", channel-in: '@(?<value>[0-9]+)' }`,
    'dialogue:',
    '  - { operation: close-channel, value: 101, sends: ["CLOS 101"] }',
    '  - { reading: closed-channel, answer: "(@101)", is: 101 }',
    '  - { reading: closed-channel, answer: "(@)", is: none }',
    '  - { reading: closed-channel, answer: "(@102)", is: 101 }',
    '  - { errors: "128", is: clear }',
    '  - { errors: "32", is: error }',
  ].join('\n');
  expect(checkDialogue(parseDriver(scanner, 'scanner.yaml'))).toEqual([
    { index: 3, key: 'is', message: '"(@102)" came out as 102; expected 101' },
  ]);
});
