import { describe, expect, it } from 'vitest';
import { expression } from '../../src/files/expression.js';
import { readChannel, readFlag, readNumber } from '../../src/instrument/reading.js';
import fc from '../property.js';

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

describe('a number in another unit than that of its dimension', () => {
  const plain = { kind: 'number', ask: [{ text: 'VOL?' }], dimension: 'voltage', factor: 0.001 } as const;
  const withUnit = {
    ...plain,
    pattern: expression('^(?<value>[-+0-9.Ee]+) ?(?<unit>[a-zA-Z\u0080-\u00ff]*)$'),
  } as const;
  const ohms = { ...withUnit, dimension: 'resistance', factor: 1 } as const;

  it.each([
    ['12.031', plain, 0.012031],
    ['-4.35', { ...plain, factor: 100 }, -435],
    ['12.031', { ...plain, factor: -0.001, scale: -1 }, -0.012031],
    ['12.031 mV', withUnit, 0.012031],
    ['12.031V', withUnit, 12.031],
    ['12.031', withUnit, 0.012031],
    ['1.2 kOhm', ohms, 1200],
    ['4.7MOHM', ohms, 4_700_000],
    ['1.2E3 OHM', ohms, 1200],
    ['0.5 uA', { ...withUnit, dimension: 'current' }, 5e-7],
  ] as const)('%s keeps its last digit', (reply, reading, value) => {
    expect(readNumber(reply, reading, about)).toEqual({ kind: 'value', value });
  });

  it('is, whatever its form, the number that moving the point gives', () => {
    const units = { V: 0, mV: -3, uV: -6, kV: 3, MV: -3, v: 0 } as const;
    const digits = fc.string({
      unit: fc.constantFrom(...['0', '1', '2', '3', '5', '7', '9']),
      minLength: 1,
      maxLength: 6,
    });
    fc.assert(
      fc.property(
        fc.constantFrom('', '+', '-'),
        digits,
        digits,
        fc.option(fc.integer({ min: -12, max: 12 })),
        fc.constantFrom(...(Object.keys(units) as (keyof typeof units)[])),
        fc.constantFrom('', ' '),
        (sign, whole, part, exponent, unit, space) => {
          const number = `${sign}${whole}.${part}`;
          fc.pre(Number(number) !== 0);
          const reply = `${number}${exponent === null ? '' : `E${exponent}`}${space}${unit}`;
          const value = Number(`${number}e${(exponent ?? 0) + units[unit]}`);
          expect(readNumber(reply, withUnit, about)).toEqual({ kind: 'value', value });
        },
      ),
    );
  });

  it('is turned round by its scale, whoever names the unit', () => {
    const reversed = { ...withUnit, factor: -0.001, scale: -1 } as const;
    expect(readNumber('12.031 mV', reversed, about)).toEqual({ kind: 'value', value: -0.012031 });
    expect(readNumber('12.031 V', reversed, about)).toEqual({ kind: 'value', value: -12.031 });
  });

  it.each([
    ['9.9E37', { kind: 'overload' }],
    ['-9.9E37 mV', { kind: 'overload' }],
    ['9.91E37 V', { kind: 'not-a-number' }],
  ] as const)('%s is no value in any unit', (reply, measurement) => {
    expect(readNumber(reply, withUnit, about)).toEqual(measurement);
    expect(readNumber(reply.split(' ')[0] ?? '', plain, about)).toEqual(measurement);
  });

  it.each([
    ['1.2 mohm', ohms, 'a resistance in a unit that can be read in one way only'],
    ['12.031 A', withUnit, 'a voltage in a unit that can be read in one way only'],
    ['12.031 xV', withUnit, 'a voltage in a unit that can be read in one way only'],
  ] as const)('%s is not guessed at', (reply, reading, expected) => {
    expect(() => readNumber(reply, reading, about)).toThrow(
      expect.objectContaining({ code: 'REPLY_NOT_UNDERSTOOD', reply, expected }) as Error,
    );
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
    [' ( @ ) ', null],
    ['#13(@)', null],
    ['#0(@)', null],
    ['#14(@ )', null],
  ])('in "%s"', (reply, channel) => {
    expect(readChannel(reply, reading, about)).toBe(channel);
  });

  it.each([
    '',
    '0',
    '1',
    'nothing is closed',
    '-113,"Undefined header"',
    '(@)(@101)',
    '(@101)(@)',
    '(@',
    '#3(@)',
    '(@101,102)',
    '(@1234567)',
    `(@1)${' '.repeat(2000)}`,
  ])('is not in "%s", which does not say that none is closed either', (reply) => {
    expect(() => readChannel(reply, reading, about)).toThrow(
      expect.objectContaining({ code: 'REPLY_NOT_UNDERSTOOD' }) as Error,
    );
  });

  it('is none where the reply looks as the driver says, and in no other way', () => {
    const inWords = {
      ...reading,
      channelIn: expression('(?<value>[0-9]+)'),
      noneWhen: expression('^(NONE|0)$'),
    };
    expect(readChannel('NONE', inWords, about)).toBeNull();
    expect(readChannel('0', inWords, about)).toBeNull();
    expect(readChannel('101', inWords, about)).toBe(101);
    expect(() => readChannel('(@)', inWords, about)).toThrow(
      expect.objectContaining({
        code: 'REPLY_NOT_UNDERSTOOD',
        message: expect.stringContaining('or /^(NONE|0)$/ where none is closed') as string,
      }) as Error,
    );
  });

  it('is never taken from the length of a block that holds an empty list', () => {
    const anyNumber = { ...reading, channelIn: expression('(?<value>[0-9]+)') };
    expect(readChannel('#13(@)', anyNumber, about)).toBeNull();
  });
});
