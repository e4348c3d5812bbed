import { expect, it } from 'vitest';
import * as errors from '../../src/instrument/errors.js';

const address = 'tcp://127.0.0.1:5025';
const begun = Buffer.from('15.');

// The codes are promised to journals and scripts: a change here is a change for users.
it.each([
  [new errors.InstrumentUnreachableError({ address, reason: 'refused' }), 'INSTRUMENT_UNREACHABLE', 69],
  [new errors.PortBusyError({ address: 'serial:/dev/ttyUSB0?baud=9600' }), 'PORT_BUSY', 69],
  [new errors.ConnectionLostError({ address, reason: 'hung up' }), 'CONNECTION_LOST', 69],
  [
    new errors.InstrumentSilentError({ address, question: 'READ?\n', timeout: 1, begun }),
    'INSTRUMENT_SILENT',
    69,
  ],
  [new errors.ReplyNotUnderstoodError({ reply: 'ERR', expected: 'a number' }), 'REPLY_NOT_UNDERSTOOD', 69],
  [new errors.ReplyTooLongError({ address, limit: 65536, begins: begun }), 'REPLY_TOO_LONG', 69],
  [new errors.OutOfStepError({ address, identify: '*IDN?', reason: 'silent' }), 'OUT_OF_STEP', 69],
  [
    new errors.InstrumentComplainedError({
      address,
      entries: [{ number: -113, text: 'a\nb' }],
      after: ['INP ON'],
    }),
    'INSTRUMENT_COMPLAINED',
    69,
  ],
  [
    new errors.NotReadyError({
      ...{ address, told: 'INIT', question: '*OPC?', answer: '0\n', within: 10 },
      part: { driver: 'toy', section: 'operations', name: 'input-on' },
    }),
    'NOT_READY',
    69,
  ],
  [
    new errors.WrongInstrumentError({ address, role: 'load', driver: 'toy', identity: '\x00' }),
    'WRONG_INSTRUMENT',
    69,
  ],
  [
    new errors.ReplayMismatchError({ file: 'a.jsonl', line: 2, expected: 'x', found: 'y', advice: 'z' }),
    'REPLAY_MISMATCH',
    69,
  ],
  [new errors.NotInDriverError({ driver: 'toy', what: 'operation "x"' }), 'NOT_IN_DRIVER', 65],
  [new errors.DialogueFileError({ file: 'a.jsonl', line: 2, reason: 'odd' }), 'DIALOGUE_FILE', 65],
  [new errors.DialogueFileError({ file: 'a.jsonl', reason: 'gone', missing: true }), 'DIALOGUE_FILE', 66],
])('%s: one printable line, a code, an exit status, advice', (error, code, exitCode) => {
  expect(error).toMatchObject({ code, exitCode, name: error.constructor.name });
  expect(error.message).toMatch(/^[ -~…]+$/);
  expect(error.advice).toMatch(/\w/);
});

it('a reply that was begun and not ended is told from silence', () => {
  const silent = (bytes: Uint8Array): string =>
    new errors.InstrumentSilentError({ address, question: 'READ?', timeout: 0.15, begun: bytes }).message;
  expect(silent(Buffer.from(''))).toBe(`${address} did not answer "READ?" within 150 ms`);
  expect(silent(begun)).toBe(`${address} did not finish its answer to "READ?" within 150 ms: "15."`);
});
