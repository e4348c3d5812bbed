import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import { expression } from '../../src/files/expression.js';
import { parseDriver, readDriver } from '../../src/files/read-driver.js';
import { driverExample } from './design-examples.js';
import { problemsOf } from './problems-of.js';

const changed = (find: string, replacement: string): string => {
  expect(driverExample).toContain(find);
  return driverExample.replace(find, () => replacement);
};
const errorQueue = String.raw`{ ask: "SYST:ERR?", clear: "^[+-]?0\\b" }`;

it('the example of the design is read', () => {
  expect(parseDriver(driverExample, 'load.yaml')).toEqual({
    name: 'load-input-scpi',
    role: 'load',
    summary: 'Electronic loads that answer INPut, CURRent and MEASure',
    wire: { sendEnd: '\n', replyEnd: '\n', gap: 0, timeout: 1, echo: false },
    identify: '*IDN?',
    errors: { kind: 'queue', ask: 'SYST:ERR?', clear: expression('^[+-]?0\\b'), afterwards: [] },
    remote: [],
    prepare: [{ text: '*CLS' }],
    release: [],
    local: [],
    operations: {
      'make-safe': [{ text: 'INP OFF' }],
      'input-on': [{ text: 'INP ON' }],
      'input-off': [{ text: 'INP OFF' }],
      'current-mode': [{ text: 'FUNC CURR' }],
      'voltage-mode': [{ text: 'FUNC VOLT' }],
      'set-current': [{ text: 'CURR {amps}' }],
      'set-voltage': [{ text: 'VOLT {volts}' }],
      'protect-current': [{ text: 'CURR:PROT {amps}' }],
    },
    readings: {
      voltage: { kind: 'number', ask: [{ text: 'MEAS:VOLT?' }], dimension: 'voltage', factor: 1 },
      current: { kind: 'number', ask: [{ text: 'MEAS:CURR?' }], dimension: 'current', factor: 1 },
      'input-state': { kind: 'flag', ask: [{ text: 'INP?' }], trueWhen: expression('^(1|ON)$') },
    },
    settling: 0.02,
    ratings: { voltage: 150, current: 40, power: 200, leastVoltage: 1 },
    accuracy: { voltage: { ofReading: 0.001, fixed: 0.01 }, current: { ofReading: 0.002, fixed: 0.01 } },
  });
});

it('a meter that is spoken to simply needs little', () => {
  const text = [
    'railproof: driver 1',
    'name: meter-plain',
    'role: meter',
    'summary: Meters that answer READ?',
    'identify: "*IDN?"',
    'errors: none',
    'operations: { make-safe: [] }',
    'readings:',
    '  voltage: { ask: [CONF, "READ?"], unit: V, pattern: "VOLT (?<value>.*)" }',
    'identity: "^METER"',
    'accuracy: { voltage: { of-reading: 0.02 %, fixed: 1 mV, resolution: 0.1 mV } }',
  ].join('\n');
  expect(parseDriver(text, 'meter.yaml')).toEqual({
    name: 'meter-plain',
    role: 'meter',
    summary: 'Meters that answer READ?',
    wire: { sendEnd: '\n', replyEnd: '\n', gap: 0, timeout: 1, echo: false },
    identify: '*IDN?',
    identity: expression('^METER'),
    errors: 'none',
    remote: [],
    prepare: [],
    release: [],
    local: [],
    operations: { 'make-safe': [] },
    readings: {
      voltage: {
        kind: 'number',
        ask: [{ text: 'CONF' }, { text: 'READ?' }],
        dimension: 'voltage',
        factor: 1,
        pattern: expression('VOLT (?<value>.*)'),
      },
    },
    settling: 0,
    ratings: {},
    accuracy: { voltage: { ofReading: 0.0002, fixed: 0.001, resolution: 0.0001 } },
  });
});

describe('one mistake is one line, at its place', () => {
  it.each<[string, string, string]>([
    ['input-on:', 'inputon:', "12:3: operations: unknown key 'inputon'; did you mean 'input-on'?"],
    ['  make-safe:    ["INP OFF"]\n', '', '11:3: operations.make-safe: missing; a load needs this operation'],
    [
      'make-safe:    ["INP OFF"]',
      'make-safe: []',
      '11:14: operations.make-safe: at least one message is needed',
    ],
    [
      'set-voltage: ',
      'output-on: [X]\n  set-voltage: ',
      "17:14: operations.output-on: a load has no operation 'output-on'; did you mean 'input-on'?",
    ],
    [
      'CURR {amps}',
      'CURR {amp}',
      "16:18: operations.set-current.0: unknown placeholder '{amp}'; did you mean '{amps}'?",
    ],
    [
      'CURR {amps}',
      'CURR 1',
      '16:17: operations.set-current: no message holds {amps}, which stands for the value',
    ],
    [
      'VOLT {volts}',
      'VOLT {amps}',
      "17:18: operations.set-voltage.0: unknown placeholder '{amps}'; {volts} is known here",
    ],
    [
      'INP ON',
      'INP {on}',
      "12:18: operations.input-on.0: unknown placeholder '{on}'; none is filled in here",
    ],
    ['*CLS', '*CLS {amps}', "8:11: prepare.0: unknown placeholder '{amps}'; none is filled in here"],
    [
      'MEAS:VOLT?',
      'MEAS:VOLT? {x}',
      "20:19: readings.voltage.ask: unknown placeholder '{x}'; none is filled in here",
    ],
    [
      '"MEAS:VOLT?"',
      '[MEAS, 3]',
      "20:26: readings.voltage.ask.1: found the number 3; a message, or a map with 'send' and 'rest' or 'until', is needed",
    ],
    [
      '"MEAS:VOLT?"',
      '{ sent: "MEAS:VOLT?" }',
      "20:21: readings.voltage.ask: unknown key 'sent'; did you mean 'send'?",
    ],
    [
      'unit: V ',
      'unit: V, ranges: [{ up-to: 20 V, select: ["RANG {channel}"] }] ',
      "20:75: readings.voltage.ranges.0.select.0: unknown placeholder '{channel}'; none is filled in here",
    ],
    [
      'unit: V ',
      'unit: V, ranges: [{ up-to: -2 V, select: ["RANG 2"] }] ',
      '20:60: readings.voltage.ranges.0.up-to: a range holds more than nothing',
    ],
    [
      'unit: V ',
      'unit: V, ranges: [{ up-to: 20 V, select: ["RANG 20"] }, { up-to: 2 V, select: ["RANG 2"] }] ',
      '20:98: readings.voltage.ranges.1.up-to: the smallest range comes first',
    ],
    [
      errorQueue,
      '{ ask: "SYST:ERR?", clear: "^0", afterwards: ["*CLS {channel}"] }',
      "7:55: errors.afterwards.0: unknown placeholder '{channel}'; none is filled in here",
    ],
    [
      'release: []',
      'ready: { ask: "*OPC?", when: "^1$" }\nlocal: [{ send: "SYST:LOC", until: ready }]\nrelease: []',
      "10:9: local.0: nothing is asked here; give it a 'rest' in place of 'until'",
    ],
    [
      'unit: V ',
      'unit: V, ranges: [{ up-to: 20 V, select: [{ send: "RANG 20", until: ready }] }] ',
      "20:74: readings.voltage.ranges.0.select: 'until: ready' needs a 'ready' in this file, which says how it is asked for",
    ],
    ['"MEAS:VOLT?"', '[]', '20:19: readings.voltage.ask: found 0 of them; at least 1 are needed'],
    [
      'unit: V ',
      'unit: A ',
      '20:39: readings.voltage.unit: the unit is that of a current; this reading is a voltage',
    ],
    [
      'unit: V ',
      'unit: Volt ',
      "20:39: readings.voltage.unit: found 'Volt'; a unit is needed, one as V, mV, A, mA, W, Ohm, kOhm, °C",
    ],
    [
      ', unit: V ',
      ' ',
      "20:12: readings.voltage: a reading has a 'unit', when it is a number, or 'true-when', when it is a yes or a no, or 'channel-in', when it is a scanner's channel",
    ],
    [
      ', unit: V ',
      ', true-when: "1" ',
      "20:12: readings.voltage: the voltage is a number; give its 'unit' in place of 'true-when'",
    ],
    [
      ', unit: V ',
      ', channel-in: "(?<value>1)" ',
      "20:12: readings.voltage: the voltage is a number; give its 'unit' in place of 'channel-in'",
    ],
    [
      'true-when: "^(1|ON)$"',
      'unit: V',
      "22:16: readings.input-state: the input-state is a yes or a no; give 'true-when' in place of 'unit'",
    ],
    [
      'true-when: "^(1|ON)$"',
      'true-when: 1',
      '22:42: readings.input-state.true-when: found the number 1; a regular expression, as a text in quotes, is needed',
    ],
    [
      'true-when: "^(1|ON)$"',
      'true-when: "^(1|ON$"',
      "22:42: readings.input-state.true-when: '^(1|ON$' is no regular expression: missing closing ), in '^(1|ON$'",
    ],
    [
      'true-when: "^(1|ON)$"',
      `true-when: "${'x'.repeat(201)}"`,
      '22:42: readings.input-state.true-when: found an expression of 201 characters; at most 200 are allowed',
    ],
    [
      'unit: V ',
      'unit: V, pattern: "(.*)" ',
      "20:51: readings.voltage.pattern: '(.*)' lacks a group named 'value': (?<value>…)",
    ],
    [errorQueue, 'nonee', "7:9: errors: found 'nonee'; none, or a map with 'ask' and 'clear', is needed"],
    [
      errorQueue,
      '{ ask: "SYST:ERR?" }',
      "7:9: errors: errors have a 'clear', where a queue is read entry by entry, or 'error-bits', where a register is read",
    ],
    [
      'release: []',
      'release: ["A\\nB"]',
      "9:11: release.0: found 'A\\u000aB'; a message is 1 to 200 plain ASCII characters on one line",
    ],
    [
      'release: []',
      'release: ["Ω"]',
      "9:11: release.0: found 'Ω'; a message is 1 to 200 plain ASCII characters on one line",
    ],
    [
      'send-end: "\\n"',
      'send-end: ""',
      '5:19: wire.send-end: found \'\'; 1 to 4 ASCII characters are needed, as in "\\n" or "\\r\\n"',
    ],
    ['timeout: 1 s', 'timeout: 0 s', "5:62: wire.timeout: found '0 s'; more than 0 s is needed"],
    ['role: load', 'role: laod', "3:7: role: found 'laod'; did you mean 'load'?"],
    [
      '  current: { of-reading',
      '  power: { fixed: 1 W, of-reading: 1 % }\n  current: { of-reading',
      "27:10: accuracy.power: this driver has no reading 'power'",
    ],
    [
      'of-reading: 0.1 %',
      'of-reading: 0.1',
      '26:26: accuracy.voltage.of-reading: found the bare number 0.1; a ratio needs its unit: 80 %, 0.5 %',
    ],
  ])('%s → %s', (find, replacement, problem) => {
    expect(problemsOf(() => parseDriver(changed(find, replacement), 'd.yaml'))).toEqual([
      `d.yaml:${problem}`,
    ]);
  });
});

describe('a scanner', () => {
  const scanner = (reading: string): string =>
    [
      'railproof: driver 1',
      'name: scanner-plain',
      'role: scanner',
      'summary: Scanners of few words',
      'identify: "*IDN?"',
      'errors: none',
      'operations: { make-safe: [], open-all: [OPEN], close-channel: ["CLOSE {channel}"] }',
      `readings: { closed-channel: ${reading} }`,
    ].join('\n');

  it('says which channel is closed by a number that is found in its reply', () => {
    const { readings } = parseDriver(scanner('{ ask: "CLOSED?", channel-in: "(?<value>[0-9]+)" }'), 's.yaml');
    expect(readings).toEqual({
      'closed-channel': {
        kind: 'channel',
        ask: [{ text: 'CLOSED?' }],
        channelIn: expression('(?<value>[0-9]+)'),
      },
    });
  });

  it('may say in a way of its own that none is closed', () => {
    const text = scanner('{ ask: "CLOSED?", channel-in: "(?<value>[0-9]+)", none-when: "^NONE$" }');
    expect(parseDriver(text, 's.yaml').readings['closed-channel']).toMatchObject({
      channelIn: expression('(?<value>[0-9]+)'),
      noneWhen: expression('^NONE$'),
    });
  });

  it.each([
    [
      '{ ask: "CLOSED?", true-when: "^1$", none-when: "^NONE$" }',
      "8:76: readings.closed-channel.none-when: only a reading with 'channel-in' can be none",
    ],
    [
      '{ ask: "CLOSED?", unit: V }',
      "8:29: readings.closed-channel: the closed-channel is a channel's number; give 'channel-in' in place of 'unit'",
    ],
    [
      '{ ask: "CLOSED?", channel-in: "[0-9]+" }',
      "8:59: readings.closed-channel.channel-in: '[0-9]+' lacks a group named 'value': (?<value>…)",
    ],
  ])('can not say it by %s', (reading, problem) => {
    expect(problemsOf(() => parseDriver(scanner(reading), 's.yaml'))).toEqual([`s.yaml:${problem}`]);
  });

  it('must say into which channel', () => {
    const text = scanner('{ ask: "CLOSED?", channel-in: "(?<value>[0-9]+)" }').replace(' {channel}', ' 1');
    expect(problemsOf(() => parseDriver(text, 's.yaml'))).toEqual([
      's.yaml:7:63: operations.close-channel: no message holds {channel}, which stands for the value',
    ]);
  });
});

describe('a meter that can be asked what it is set to', () => {
  it('answers with a yes or a no', () => {
    const text = [
      'railproof: driver 1',
      'name: meter-plain',
      'role: meter',
      'summary: Meters that answer READ?',
      'identify: "*IDN?"',
      'errors: none',
      'operations: { make-safe: [] }',
      'readings:',
      '  voltage: { ask: "READ?", unit: V }',
      '  measures-voltage: { ask: "CONF?", unit: V }',
    ].join('\n');
    expect(problemsOf(() => parseDriver(text, 'm.yaml'))).toEqual([
      "m.yaml:10:21: readings.measures-voltage: measures-voltage is a yes or a no; give 'true-when' in place of 'unit'",
    ]);
    const right = text.replace('"CONF?", unit: V', '"CONF?", true-when: VOLT');
    expect(parseDriver(right, 'm.yaml').readings['measures-voltage']).toEqual({
      kind: 'flag',
      ask: [{ text: 'CONF?' }],
      trueWhen: expression('VOLT'),
    });
  });
});

describe('a driver is found by name or by path', () => {
  const shelves = async (): Promise<{ relativeTo: string; shipped: string }> => {
    const folder = await mkdtemp(join(tmpdir(), 'railproof-drivers-'));
    onTestFinished(() => rm(folder, { recursive: true }));
    const shipped = join(folder, 'shipped');
    await mkdir(shipped);
    await writeFile(join(shipped, 'load-input-scpi.yaml'), driverExample);
    await writeFile(join(shipped, 'README.md'), 'About the drivers.');
    await writeFile(join(folder, 'mine.yaml'), driverExample.replace('name: load-input-scpi', 'name: mine'));
    return { relativeTo: folder, shipped };
  };

  it('a bare name is that of a shipped one', async () => {
    const places = await shelves();
    const { value, path } = await readDriver('load-input-scpi', places);
    expect(value.name).toBe('load-input-scpi');
    expect(path).toBe(join(places.shipped, 'load-input-scpi.yaml'));
  });

  it.each(['mine.yaml', './mine.yaml', 'shipped/../mine.yaml'])(
    '%s is a path from where the bench file is',
    async (path) => {
      expect((await readDriver(path, await shelves())).value.name).toBe('mine');
    },
  );

  it('an absolute path is one', async () => {
    const places = await shelves();
    expect((await readDriver(join(places.relativeTo, 'mine.yaml'), places)).value.name).toBe('mine');
  });

  it('a misspelt name is told with the right one, and how to give a driver of one’s own', async () => {
    await expect(readDriver('load-imput-scpi', await shelves())).rejects.toMatchObject({
      code: 'NOT_SHIPPED',
      exitCode: 66,
      message: "no driver is called 'load-imput-scpi'; did you mean 'load-input-scpi'?",
      advice: 'A driver of your own is given as a path: ./load-imput-scpi.yaml.',
    });
    await expect(readDriver('mine', await shelves())).rejects.toMatchObject({
      message: "no driver is called 'mine'; there are load-input-scpi",
    });
  });

  it('a path that leads nowhere is a missing file', async () => {
    await expect(readDriver('./other.yaml', await shelves())).rejects.toMatchObject({ code: 'MISSING_FILE' });
  });
});
