import { describe, expect, it } from 'vitest';
import { jsonSchemaOf } from '../../src/files/json-schema.js';
import { parseDriver } from '../../src/files/read-driver.js';
import { driverExample } from './design-examples.js';
import { problemsOf } from './problems-of.js';

const withDialogue = (...exchanges: string[]): string =>
  [driverExample.trimEnd(), 'dialogue:', ...exchanges.map((each) => `  - ${each}`), ''].join('\n');

const problems = (...exchanges: string[]): string[] =>
  problemsOf(() => parseDriver(withDialogue(...exchanges), 'load.yaml')).map((line) =>
    line.replace(/^load\.yaml:\d+:(\d+): dialogue\./, '$1: '),
  );

describe('the dialogue of a driver file', () => {
  it('is read into what must be sent and what answers must be taken for', () => {
    const text = withDialogue(
      '{ identity: "nursery,load 1,7,2.1", is: understood }',
      '{ operation: set-current, value: 2500 mA, sends: ["CURR 2.5"] }',
      '{ operation: input-off, sends: ["INP OFF"] }',
      '{ reading: voltage, sends: ["MEAS:VOLT?"], answer: "1.5210E+01", is: 15.21 V }',
      '{ reading: input-state, answer: "1", is: yes }',
      '{ reading: voltage, answer: "9.9E37", is: overload }',
      '{ reading: voltage, answer: "garbage", is: not-understood }',
      `{ errors: '-113,"Undefined header"', is: error }`,
    );
    expect(parseDriver(text, 'load.yaml').dialogue).toEqual([
      { kind: 'identity', answer: 'nursery,load 1,7,2.1', is: 'understood' },
      { kind: 'operation', operation: 'set-current', value: 2.5, sends: ['CURR 2.5'] },
      { kind: 'operation', operation: 'input-off', sends: ['INP OFF'] },
      {
        kind: 'reading',
        reading: 'voltage',
        sends: ['MEAS:VOLT?'],
        heard: { answer: '1.5210E+01', is: { kind: 'number', value: 15.21, dimension: 'voltage' } },
      },
      { kind: 'reading', reading: 'input-state', heard: { answer: '1', is: { kind: 'flag', value: true } } },
      { kind: 'reading', reading: 'voltage', heard: { answer: '9.9E37', is: { kind: 'overload' } } },
      { kind: 'reading', reading: 'voltage', heard: { answer: 'garbage', is: { kind: 'not-understood' } } },
      { kind: 'errors', answer: '-113,"Undefined header"', is: 'error' },
    ]);
  });

  it.each([
    ['{ answer: "1", is: yes }', '5: 0: an exchange has one of identity, operation, reading, errors, ready'],
    ['{ identity: "x" }', "5: 0.is: missing; 'identity' needs it"],
    ['{ identity: "x", is: understod }', "26: 0.is: found 'understod'; did you mean 'understood'?"],
    ['{ operation: set-current, sends: [] }', '5: 0.value: missing; it stands for {amps}'],
    [
      '{ operation: set-current, value: 2.5, sends: [] }',
      '38: 0.value: found the bare number 2.5; a current needs its unit',
    ],
    ['{ operation: input-on, value: 2 A, sends: [] }', '35: 0.value: this operation is given no value'],
    [
      '{ operation: input-onn, sends: [] }',
      "18: 0.operation: this driver has no operation 'input-onn'; did you mean 'input-on'?",
    ],
    ['{ reading: current, answer: "1" }', "5: 0: 'answer' needs an 'is'"],
    ['{ reading: current }', "5: 0: a reading has 'sends', or 'answer' and 'is', or all three"],
    ['{ reading: current, answer: "1", is: 1 V }', "42: 0.is: found '1 V', which is a voltage"],
    [
      '{ reading: power, answer: "1", is: 1 W }',
      "16: 0.reading: this driver has no reading 'power'; it has voltage, current, input-state",
    ],
    ['{ reading: input-state, answer: "1", is: on }', "46: 0.is: found 'on'; one of yes, no is needed"],
    [
      '{ reading: current, channel: 2, sends: ["MEAS:CURR?"] }',
      "34: 0.channel: this driver has no 'channels'",
    ],
    ['{ ready: "1", is: yes }', "14: 0.ready: there is no 'ready' in this file"],
    ['{ errors: "0", is: clear, sends: [] }', "38: 0.sends: 'errors' has no 'sends'; it has is"],
  ])('says of %s what is wrong with it, and where', (exchange, problem) => {
    expect(problems(exchange).join('\n')).toContain(problem);
  });

  it('is known to an editor', () => {
    const schema = JSON.stringify(jsonSchemaOf('driver'));
    expect(schema).toContain('"required":["operation","sends"]');
    expect(schema).toContain('What the answer is taken for.');
  });
});
