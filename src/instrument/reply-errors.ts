import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import type { Seconds } from '../quantity/quantity.js';
import type { DriverPart } from './driver-part.js';
import { visible } from './visible.js';

const nothingCame = {
  did: 'answer',
  advice:
    'Is it switched on, is the cable in, is remote control enabled, are the driver and the line settings (baud, ends of line) right? "railproof drivers --match" asks it with every end of line.',
};
const notFinished = {
  did: 'finish its answer to',
  advice:
    "Compare the driver's reply-end with how this instrument ends a reply; a slow line may need a longer timeout.",
};
const notRepeated = {
  did: 'repeat',
  advice:
    'Its driver says that it repeats each message. Has this instrument an echo, and is it switched on? Are the line settings right?',
};

/** A question was not answered in time. */
export class InstrumentSilentError extends RailproofError {
  readonly code = 'INSTRUMENT_SILENT';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;
  readonly question: string;
  readonly timeout: Seconds;
  /** What had come of a reply that never ended, with control characters escaped; empty when nothing came. */
  readonly begun: string;

  constructor(facts: {
    address: string;
    question: string;
    timeout: Seconds;
    begun: Uint8Array;
    /** It has not repeated the question either, though its driver says that it does. */
    isUnrepeated?: boolean;
  }) {
    const begun = visible(facts.begun);
    const within = `within ${Math.round(facts.timeout * 1000)} ms`;
    const question = `"${visible(facts.question)}"`;
    const { did, advice } =
      begun === '' ? nothingCame : facts.isUnrepeated === true ? notRepeated : notFinished;
    super(`${facts.address} did not ${did} ${question} ${within}${begun === '' ? '' : `: "${begun}"`}`, {
      advice,
    });
    this.address = facts.address;
    this.question = facts.question;
    this.timeout = facts.timeout;
    this.begun = begun;
  }
}

/** A reply came and is not what was expected. */
export class ReplyNotUnderstoodError extends RailproofError {
  readonly code = 'REPLY_NOT_UNDERSTOOD';
  readonly exitCode = exitCodes.instrument;
  /** With control characters escaped, cut to about 80 characters. */
  readonly reply: string;
  readonly expected: string;
  readonly address: string | undefined;
  readonly question: string | undefined;
  /** What in the driver says how to read it, where a driver does. */
  readonly part: DriverPart | undefined;

  constructor(facts: {
    reply: Uint8Array | string;
    expected: string;
    address?: string;
    question?: string;
    part?: DriverPart | undefined;
  }) {
    const reply = visible(facts.reply);
    const who = facts.address === undefined ? '' : `${facts.address} answered `;
    const what = facts.question === undefined ? '' : `"${visible(facts.question)}" with `;
    super(`${who}${what}"${reply}" where ${facts.expected} was expected`, {
      advice:
        'Does the driver fit this instrument? "railproof drivers --try" walks through it message by message; a reply with a unit or a prefix needs a pattern in the driver.',
    });
    this.reply = reply;
    this.expected = facts.expected;
    this.address = facts.address;
    this.question = facts.question;
    this.part = facts.part;
  }
}

/** More came than any reply may hold. */
export class ReplyTooLongError extends RailproofError {
  readonly code = 'REPLY_TOO_LONG';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;
  readonly limit: number;
  readonly begins: string;

  constructor(facts: { address: string; limit: number; begins: Uint8Array }) {
    const begins = visible(facts.begins);
    super(`${facts.address} sent a reply of more than ${facts.limit} bytes: "${begins}"`, {
      advice:
        "Is this the instrument that the driver is for? Compare the baud rate and the driver's reply-end with its manual.",
    });
    this.address = facts.address;
    this.limit = facts.limit;
    this.begins = begins;
  }
}

/** After a question without an answer nobody can tell which question the next reply belongs to. */
export class OutOfStepError extends RailproofError {
  readonly code = 'OUT_OF_STEP';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;
  readonly identify: string;

  constructor(facts: { address: string; identify: string; reason: string }) {
    super(`${facts.address} is out of step: ${facts.reason}`, {
      advice:
        'Switch the instrument off and on, check its cable, and begin again. If it happens often, give the driver a longer timeout or gap.',
    });
    this.address = facts.address;
    this.identify = facts.identify;
  }
}
