import { describe, expect, it } from 'vitest';
import { RailproofError } from '../../src/errors/railproof-error.js';
import { AddressError, formatAddress, parseAddress } from '../../src/files/connection-address.js';
import { expression } from '../../src/files/expression.js';
import { dialogueLine, readDialogueHeader, readDialogueLine } from '../../src/instrument/dialogue-record.js';
import { readChannel, readFlag, readNumber } from '../../src/instrument/reading.js';
import { ReplyNotUnderstoodError } from '../../src/instrument/reply-errors.js';
import { parseScpiError } from '../../src/instrument/scpi-error.js';
import { parseScpiNumber } from '../../src/instrument/scpi-number.js';
import fc from '../property.js';

const about = { address: 'tcp://127.0.0.1:5025', question: 'MEAS?' };

/** As replies come: one character a byte; often nearly what was expected. */
const reply = fc.oneof(
  fc.uint8Array({ maxLength: 80 }).map((bytes) => Buffer.from(bytes).toString('latin1')),
  fc
    .array(
      fc.constantFrom(
        '1',
        '0',
        '.',
        'E',
        'e',
        '+',
        '-',
        '9.91E37',
        '9.9E37',
        '1e309',
        'NaN',
        'INF',
        'V',
        ' ',
        'ON',
        'OFF',
        '(@',
        ')',
        ',',
        '"',
        '\0',
        '\x1b',
      ),
      { maxLength: 12 },
    )
    .map((parts) => parts.join('')),
  fc
    .tuple(fc.constantFrom(' ', '0', '"', '\x1b[2J', '1,'), fc.nat({ max: 65536 }))
    .map(([text, times]) => text.repeat(times).slice(0, 65536)),
);

/** What is read, or undefined where the reply was refused as replies are: in one line that can be shown. */
function readOrRefused<T>(read: () => T): T | undefined {
  try {
    return read();
  } catch (error) {
    expect(error).toBeInstanceOf(ReplyNotUnderstoodError);
    const { message } = error as ReplyNotUnderstoodError;
    expect(message).not.toMatch(/[\p{Cc}\p{Cf}\p{Cs}\u2028\u2029]/u);
    expect(message.length).toBeLessThan(600);
    return undefined;
  }
}

describe('whatever an instrument replies', () => {
  it('a number is finite, or said to be none', () => {
    const pattern = expression('(?<value>[^V ]+) ?V?');
    fc.assert(
      fc.property(reply, (text) => {
        for (const measured of [
          readOrRefused(() => parseScpiNumber(text, about)),
          readOrRefused(() =>
            readNumber(
              text,
              { kind: 'number', ask: [{ text: 'MEAS?' }], dimension: 'voltage', factor: 1 },
              about,
            ),
          ),
          readOrRefused(() =>
            readNumber(
              text,
              { kind: 'number', ask: [{ text: 'MEAS?' }], dimension: 'voltage', factor: 1, pattern },
              about,
            ),
          ),
        ]) {
          if (measured?.kind !== 'value') continue;
          expect(Math.abs(measured.value)).toBeLessThan(9.9e37);
        }
      }),
      { numRuns: 1000 },
    );
  });

  it('a no is said, never guessed', () => {
    fc.assert(
      fc.property(reply, (text) => {
        const on = readOrRefused(() =>
          readFlag(text, { kind: 'flag', ask: [{ text: 'INP?' }], trueWhen: expression('^(1|ON)$') }, about),
        );
        if (on === true) expect(text.trim()).toMatch(/^(1|ON)$/);
        if (on === false) expect(text.trim()).toMatch(/(0|OFF|FALSE|NO)$/i);
      }),
      { numRuns: 1000 },
    );
  });

  it('a channel is a whole number, or none', () => {
    const channelIn = expression('^\\(@(?<value>[^)]*)\\)$');
    fc.assert(
      fc.property(reply, (text) => {
        const channel = readOrRefused(() =>
          readChannel(text, { kind: 'channel', ask: [{ text: 'C?' }], channelIn }, about),
        );
        if (typeof channel === 'number') expect(Number.isSafeInteger(channel) && channel >= 0).toBe(true);
        if (channel === null) expect(text.trim()).toMatch(/^(#\d+)?\s*\(\s*@\s*\)$/);
      }),
      { numRuns: 1000 },
    );
  });

  it('an entry of the error queue has a whole number', () => {
    fc.assert(
      fc.property(reply, (text) => {
        const entry = readOrRefused(() => parseScpiError(text, about));
        if (entry !== undefined) expect(Number.isSafeInteger(entry.number)).toBe(true);
      }),
      { numRuns: 1000 },
    );
  });
});

describe('whatever a text is', () => {
  it('it is an address that is written as it is read, or refused', () => {
    const text = fc.oneof(
      fc.string({ unit: 'binary', maxLength: 60 }),
      fc
        .array(
          fc.constantFrom(
            'tcp:',
            '//',
            'serial:',
            'replay:',
            'simulated:',
            '127.0.0.1',
            '[::1]',
            ':',
            '5025',
            '?baud=',
            '&data=',
            '7',
            '/../',
            '%',
            'a',
          ),
          { maxLength: 8 },
        )
        .map((parts) => parts.join('')),
      fc.nat({ max: 65536 }).map((length) => `tcp://${'a.'.repeat(length)}`),
    );
    fc.assert(
      fc.property(text, (written) => {
        try {
          const address = parseAddress(written);
          expect(parseAddress(formatAddress(address))).toEqual(address);
        } catch (error) {
          expect(error).toBeInstanceOf(AddressError);
          expect(error).toBeInstanceOf(RailproofError);
        }
      }),
      { numRuns: 1000 },
    );
  });

  it('as a line of a recorded dialogue it is read to the byte, or is none', () => {
    const line = fc.oneof(
      fc.string({ unit: 'binary', maxLength: 80 }),
      fc.json(),
      fc.constantFrom(
        '{"t":1e309,"sent":"a"}',
        '{"t":null,"sent":"a"}',
        '{"t":1,"__proto__":"a"}',
        '['.repeat(9999),
      ),
    );
    fc.assert(
      fc.property(line, (text) => {
        readDialogueHeader(text);
        const entry = readDialogueLine(text);
        if (entry === undefined) return;
        expect(Number.isFinite(entry.t)).toBe(true);
        expect(readDialogueLine(dialogueLine(entry))).toEqual(entry);
      }),
      { numRuns: 1000 },
    );
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), fc.uint8Array(), (t, bytes) => {
        const entry = { t: t + 0, kind: 'received', bytes: Buffer.from(bytes) } as const;
        expect(readDialogueLine(dialogueLine(entry))).toEqual(entry);
      }),
    );
  });
});
