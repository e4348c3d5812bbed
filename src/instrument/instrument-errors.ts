import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Seconds } from '../quantity/quantity.js';
import type { DriverPart } from './driver-part.js';
import type { ScpiError } from './scpi-error.js';
import { visible } from './visible.js';

/** The instrument's own error queue holds something after what it was told. */
export class InstrumentComplainedError extends RailproofError {
  readonly code = 'INSTRUMENT_COMPLAINED';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;
  readonly entries: readonly ScpiError[];
  /** The messages that were sent before the queue was read. */
  readonly after: readonly string[];
  /** What in the driver says to send them. */
  readonly part: DriverPart | undefined;

  constructor(facts: {
    address: string;
    entries: readonly ScpiError[];
    after: readonly string[];
    part?: DriverPart | undefined;
  }) {
    const entries = facts.entries.map(({ number, text }) => `${number} "${visible(text)}"`);
    const shown = entries.length > 3 ? [...entries.slice(0, 3), `and ${entries.length - 3} more`] : entries;
    const after = facts.after.map((message) => `"${visible(message)}"`).join(', ');
    super(`${facts.address} reports ${shown.join(', ')}${after === '' ? '' : ` after ${after}`}`, {
      advice:
        'Does the driver fit this instrument, and is the value within its range? "railproof drivers --try" shows which messages it refuses.',
    });
    this.address = facts.address;
    this.entries = facts.entries;
    this.after = facts.after;
    this.part = facts.part;
  }
}

/** Told to do something and asked whether it has, an instrument did not say so in time. */
export class NotReadyError extends RailproofError {
  readonly code = 'NOT_READY';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;
  /** What it was told. */
  readonly told: string;
  readonly question: string;
  /** The last one, escaped and cut; undefined where none came. */
  readonly answer: string | undefined;
  readonly within: Seconds;
  readonly part: DriverPart | undefined;

  constructor(facts: {
    address: string;
    told: string;
    question: string;
    answer: string | undefined;
    within: Seconds;
    part: DriverPart | undefined;
    cause?: unknown;
  }) {
    const answer = facts.answer === undefined ? undefined : visible(facts.answer);
    const said = answer === undefined ? 'without an answer' : `and answered "${answer}" last`;
    super(
      `${facts.address} was not ready within ${formatQuantity(facts.within, 'time')} of "${visible(facts.told)}": ` +
        `it was asked "${visible(facts.question)}", ${said}`,
      {
        advice:
          "Does it wait for something at its panel? If it is only slow, give the driver's ready a longer within; else compare its ask and when with the manual.",
        cause: facts.cause,
      },
    );
    this.address = facts.address;
    this.told = facts.told;
    this.question = facts.question;
    this.answer = answer;
    this.within = facts.within;
    this.part = facts.part;
  }
}

/** Something answers at the address, and it is not what the driver is for. */
export class WrongInstrumentError extends RailproofError {
  readonly code = 'WRONG_INSTRUMENT';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;
  readonly role: string;
  readonly driver: string;
  readonly identity: string;

  /** `before`: who answered at that address earlier, and must again; `isEcho`: the question came back. */
  constructor(facts: {
    address: string;
    role: string;
    driver: string;
    identity: string;
    before?: string | undefined;
    isEcho?: boolean;
  }) {
    const identity = visible(facts.identity);
    super(
      facts.before === undefined
        ? `${facts.address} answers as "${identity}", which is not a ${facts.role} that the driver ${facts.driver} is for`
        : `${facts.address} answers as "${identity}" and answered as "${visible(facts.before)}" before`,
      {
        advice:
          facts.isEcho === true
            ? 'It repeats what it is told. Say so in its driver, wire: { echo: true }, or switch its echo off.'
            : 'Are two cables or two lines of the bench file swapped? Is the driver the right one, and the baud rate?',
      },
    );
    this.address = facts.address;
    this.role = facts.role;
    this.driver = facts.driver;
    this.identity = identity;
  }
}

/** Something was asked of an instrument that its driver does not say how to do. */
export class NotInDriverError extends RailproofError {
  readonly code = 'NOT_IN_DRIVER';
  readonly exitCode = exitCodes.badFile;
  readonly driver: string;
  readonly what: string;

  constructor(facts: { driver: string; what: string }) {
    super(`The driver ${facts.driver} has no ${facts.what}`, {
      advice:
        'Add it to the driver file if the instrument can do it (drivers/README.md says how), or use another instrument.',
    });
    this.driver = facts.driver;
    this.what = facts.what;
  }
}
