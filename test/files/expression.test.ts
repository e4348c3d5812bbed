import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { expression, ExpressionError, longestSearched } from '../../src/files/expression.js';
import { parseDriver } from '../../src/files/read-driver.js';
import fc from '../property.js';

/** Of the three on a machine that is also busy with other things. */
function quickest(act: () => void): number {
  const times = [0, 1, 2].map(() => {
    const began = performance.now();
    act();
    return performance.now() - began;
  });
  return Math.min(...times);
}

describe('an expression of a driver', () => {
  it('finds what it is like, anywhere in the text, and names what its group holds', () => {
    const volts = expression('(?<value>[+-]?[0-9.]+) ?V$');
    expect(volts.finds('VOLT 12.5 V')).toBe(true);
    expect(volts.group('value', 'VOLT 12.5 V')).toBe('12.5');
    expect(volts.group('value', 'VOLT 12.5 A')).toBeUndefined();
    expect(volts.group('amps', 'VOLT 12.5 V')).toBeUndefined();
  });

  it('gives nothing for a group that took no part', () => {
    expect(expression('^(?<value>[0-9]+)?A').group('value', 'A')).toBeUndefined();
  });

  it('is made again from its source, in another process say', () => {
    const sent = JSON.parse(JSON.stringify(expression('^(1|ON)$'))) as { source: string };
    expect(expression(sent.source).finds('ON')).toBe(true);
  });

  it('finds nothing in a text that is longer than any reading', () => {
    expect(expression('a').finds('a'.repeat(longestSearched))).toBe(true);
    expect(expression('a').finds('a'.repeat(longestSearched + 1))).toBe(false);
    expect(expression('(?<value>a)').group('value', 'a'.repeat(longestSearched + 1))).toBeUndefined();
  });

  it.each([
    ['^VOLT(?!:AC)', "'^VOLT(?!:AC)' looks ahead with (?!, which is not read here: it can take for ever"],
    ['(?=x)', "'(?=x)' looks ahead with (?=, which is not read here: it can take for ever"],
    ['(?<!-)5', "'(?<!-)5' looks behind with (?<!, which is not read here: it can take for ever"],
    ['(?<=-)5', "'(?<=-)5' looks behind with (?<=, which is not read here: it can take for ever"],
    ['(a)\\1', "'(a)\\1' refers back to a group with \\1, which is not read here: it can take for ever"],
    [
      '(?<v>a)\\k<v>',
      "'(?<v>a)\\k<v>' refers back to a group with \\k, which is not read here: it can take for ever",
    ],
    ['(1|ON', "'(1|ON' is no regular expression: missing closing ), in '(1|ON'"],
    ['[z-a]', "'[z-a]' is no regular expression: invalid character class range, in 'z-a'"],
    ['a{1001}', "'a{1001}' is no regular expression: invalid repeat count, in '{1001}'"],
    ['(?:.{0,1000}){2}', "'(?:.{0,1000}){2}' is no regular expression: invalid repeat count, in '{2}'"],
    [
      '.{0,900}.{0,900}.{0,900}',
      "'.{0,900}.{0,900}.{0,900}' counts too far: an expression for a reply needs fewer repeats",
    ],
  ])('%s is refused, and why is said', (source, message) => {
    expect(() => expression(source)).toThrow(new ExpressionError(message));
  });

  it('means what it means in JavaScript, on any reply of letters, digits and signs', () => {
    const part = fc.oneof(
      fc.constantFrom(
        'A',
        'V',
        '0',
        '1',
        '\\.',
        '-',
        '[0-9]',
        '[^:A-Z]',
        '\\d',
        '\\w',
        '\\b',
        '\\s',
        '.',
        '^',
        '$',
      ),
    );
    const counted = fc
      .tuple(part, fc.constantFrom('', '', '', '?', '*', '+', '{2}', '{0,3}', '*?', '+?'))
      .map(([what, often]) => (/^(?:\\b|\^|\$)$/.test(what) ? what : what + often));
    const sequence = fc.array(counted, { maxLength: 5 }).map((parts) => parts.join(''));
    const source = fc
      .tuple(sequence, sequence, sequence, sequence)
      .map(([before, one, other, after]) => `${before}(?<value>${one}|${other})${after}`);
    const reply = fc
      .array(fc.constantFrom('A', 'V', 'B', '0', '1', '7', '.', '-', ':', ' ', '"'), { maxLength: 12 })
      .map((characters) => characters.join(''));
    fc.assert(
      fc.property(source, reply, (written, text) => {
        const ours = expression(written);
        const theirs = new RegExp(written).exec(text);
        expect(ours.finds(text)).toBe(theirs !== null);
        expect(ours.group('value', text)).toBe(theirs?.groups?.['value']);
      }),
      { numRuns: 2000 },
    );
  });

  it('of the shipped drivers means what it means in JavaScript', () => {
    const folder = 'drivers';
    const sources = readdirSync(folder)
      .filter((name) => name.endsWith('.yaml'))
      .flatMap((name) => expressionsOf(readFileSync(`${folder}/${name}`, 'utf8'), name));
    expect(sources.length).toBeGreaterThan(12);
    const replies = fc.oneof(
      fc.constantFrom(
        ...[
          '0',
          '1',
          'ON',
          'OFF',
          '+0,"No error"',
          '-113,"Undefined header"',
          '0.5',
          '(@)',
          '(@ 101)',
          '(@1!2)',
        ],
        ...[
          '"VOLT +1.0E+01,+1.0E-05"',
          'VOLT:DC',
          'VOLT:AC',
          'VOLTAGE',
          '"RES 1"',
          'RESX',
          'RES',
          '15.21V',
          '4 A',
        ],
      ),
      fc
        .array(fc.constantFrom(...Array.from('VOLTRESDCNF01.+-@(), ":!')), { maxLength: 14 })
        .map((characters) => characters.join('')),
    );
    fc.assert(
      fc.property(fc.constantFrom(...sources), replies, (source, reply) => {
        // Where the whole of it takes any case, JavaScript wants to be told so beside it.
        const [, anyCase = '', rest = ''] = /^(\(\?i\))?(.*)$/s.exec(source) ?? [];
        const theirs = new RegExp(rest, anyCase === '' ? '' : 'i').exec(reply);
        expect(expression(source).finds(reply)).toBe(theirs !== null);
        expect(expression(source).group('value', reply)).toBe(theirs?.groups?.['value']);
      }),
      { numRuns: 2000 },
    );
  });

  it.each([
    ['^(a+)+$', 'a'.repeat(999) + '!'],
    ['^(?:a|a)*$', 'a'.repeat(999) + '!'],
    ['(.*)*=(.*)*=(.*)*x', '='.repeat(1000)],
    ['(?:a?){100}a{100}b', 'a'.repeat(1000)],
    [`(?:${'.{0,100}'.repeat(18)})$`, 'a'.repeat(999) + '\n'],
    [`(?:${'(\\pL{0,90})'.repeat(12)})$`, 'ä'.repeat(999) + '\n'],
    [`${'('.repeat(27)}a?${')+'.repeat(27)}$`, 'a'.repeat(999) + 'b'],
  ])('%s ends soon, or is refused', (source, reply) => {
    const took = quickest(() => {
      try {
        expression(source).finds(reply);
      } catch (error) {
        expect(error).toBeInstanceOf(ExpressionError);
      }
    });
    expect(took).toBeLessThan(2000);
  });

  it('whatever it is, ends soon on whatever is replied', () => {
    const pieces = fc.constantFrom(
      ...[
        'a',
        'b',
        '.',
        '\\w',
        '[^a]',
        '(',
        '(?:',
        ')',
        '|',
        '*',
        '+',
        '?',
        '{0,90}',
        '{40}',
        '^',
        '$',
        '\\b',
      ],
      ...['(?<value>', '\\pL', '(?i)', '*?', '[a-z', ']', '\\'],
    );
    const source = fc.oneof(
      fc.array(pieces, { maxLength: 60 }).map((parts) => parts.join('').slice(0, 200)),
      fc.string({ maxLength: 200, unit: 'binary' }),
    );
    const reply = fc.oneof(
      fc
        .array(fc.constantFrom('a', 'b', '\n'), { minLength: 900, maxLength: 1000 })
        .map((all) => all.join('')),
      fc.string({ maxLength: 1000, unit: 'binary' }),
    );
    fc.assert(
      fc.property(source, reply, (written, text) => {
        const began = performance.now();
        try {
          expression(written).finds(text);
        } catch (error) {
          expect(error).toBeInstanceOf(ExpressionError);
        }
        expect(performance.now() - began).toBeLessThan(5000);
      }),
      { numRuns: 300 },
    );
  });
});

function expressionsOf(text: string, fileName: string): string[] {
  const { identity, errors, readings } = parseDriver(text, fileName);
  const all = [
    identity,
    errors === 'none' || errors.kind !== 'queue' ? undefined : errors.clear,
    ...Object.values(readings).flatMap((reading) => {
      if (reading.kind === 'number') return [reading.pattern];
      return reading.kind === 'flag'
        ? [reading.trueWhen, reading.falseWhen]
        : [reading.channelIn, reading.noneWhen];
    }),
  ];
  return all.flatMap((one) => (one === undefined ? [] : [one.source]));
}
