import { describe, expect, it } from 'vitest';
import { expression } from '../../src/files/expression.js';
import { readChannel, readFlag, readNumber } from '../../src/instrument/reading.js';

const about = { address: 'tcp://127.0.0.1:5025', question: 'VOL?' };

describe('a number that a driver finds by its pattern', () => {
  const short = {
    kind: 'number',
    ask: [{ text: 'VOL?' }],
    dimension: 'voltage',
    factor: 1,
    pattern: expression('^(?<value>[+-]?[0-9.]+) ?V$'),
  } as const;
  const prefixed = { ...short, pattern: expression('^VOLT (?<value>\\S+)$') } as const;

  it.each([
    ['15.21V', short, { kind: 'value', value: 15.21 }],
    [' 15.21 V ', short, { kind: 'value', value: 15.21 }],
    ['-0.003V', short, { kind: 'value', value: -0.003 }],
    ['VOLT 12.031', prefixed, { kind: 'value', value: 12.031 }],
    ['VOLT 9.91E37', prefixed, { kind: 'not-a-number' }],
  ] as const)('%s', (reply, reading, measurement) => {
    expect(readNumber(reply, reading, about)).toEqual(measurement);
  });

  it.each(['15.21A', '15.21', '1.2.3V', 'V', '15.21V15.21V', `${' '.repeat(2000)}1V`])(
    'is not in "%s"',
    (reply) => {
      expect(() => readNumber(reply, short, about)).toThrow(
        expect.objectContaining({ code: 'REPLY_NOT_UNDERSTOOD', question: 'VOL?' }) as Error,
      );
    },
  );

  it('is the whole reply where there is no pattern', () => {
    const plain = { kind: 'number', ask: [{ text: 'VOL?' }], dimension: 'voltage', factor: 1 } as const;
    expect(readNumber('15.21', plain, about)).toEqual({ kind: 'value', value: 15.21 });
    expect(() => readNumber('15.21V', plain, about)).toThrow(/a bare number/);
  });
});

describe('a yes or no', () => {
  const reading = {
    kind: 'flag',
    ask: [{ text: 'INP?' }],
    trueWhen: expression('^(INPUT )?(1|ON)$'),
  } as const;

  it.each(['1', 'ON', ' ON ', 'INPUT ON'])('is yes by "%s"', (reply) => {
    expect(readFlag(reply, reading, about)).toBe(true);
  });

  it.each(['0', '+0', '00', 'OFF', 'off', 'FALSE', 'NO', 'INPUT OFF', 'INP:0', 'input=off'])(
    'is no by "%s"',
    (reply) => {
      expect(readFlag(reply, reading, about)).toBe(false);
    },
  );

  it.each(['', '2', 'ERR', '10', '1.0', '3.0', 'KNOFF', '15.1', 'OFF?', '\x00'])(
    'is neither by "%s"',
    (reply) => {
      expect(() => readFlag(reply, reading, about)).toThrow(/0, OFF, FALSE or NO/);
    },
  );
});

describe('a yes or no', () => {
  it('is neither in a reply that is longer than any, even where an empty one means yes', () => {
    const reading = { kind: 'flag', ask: [{ text: 'INP?' }], trueWhen: expression('^1?$') } as const;
    expect(readFlag('', reading, about)).toBe(true);
    expect(() => readFlag(`1${' '.repeat(2000)}`, reading, about)).toThrow(/0, OFF, FALSE or NO/);
  });
});

describe('a yes or no whose no the driver describes', () => {
  const reading = {
    kind: 'flag',
    ask: [{ text: 'CONF?' }],
    trueWhen: expression('^"VOLT'),
    falseWhen: expression('^"[A-Z]+'),
  } as const;

  it.each([
    ['"VOLT 10,0.001"', true],
    ['"RES 1000,0.001"', false],
    [' "CURR" ', false],
  ])('%s', (reply, yes) => {
    expect(readFlag(reply, reading, about)).toBe(yes);
  });

  it.each(['', '10', '0', 'NO', `"${'R'.repeat(2000)}"`])('is neither in "%s"', (reply) => {
    expect(() => readFlag(reply, reading, about)).toThrow(
      expect.objectContaining({
        code: 'REPLY_NOT_UNDERSTOOD',
        expected: 'a reply that fits /^"VOLT/, or /^"[A-Z]+/',
      }) as Error,
    );
  });
});

describe('the closed channel of a scanner', () => {
  const reading = {
    kind: 'channel',
    ask: [{ text: 'CLOSED?' }],
    channelIn: expression('^\\(@(?<value>[0-9,]+)\\)$'),
  } as const;

  it.each([
    ['(@101)', 101],
    [' (@7) ', 7],
    ['(@)', null],
    ['', null],
    ['nothing is closed', null],
  ])('in "%s"', (reply, channel) => {
    expect(readChannel(reply, reading, about)).toBe(channel);
  });

  it.each(['(@101,102)', '(@1234567)', `(@1)${' '.repeat(2000)}`])('is not in "%s"', (reply) => {
    expect(() => readChannel(reply, reading, about)).toThrow(
      expect.objectContaining({ code: 'REPLY_NOT_UNDERSTOOD' }) as Error,
    );
  });
});
