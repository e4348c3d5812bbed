import { placeholderOf } from '../files/driver-checks.js';
import { driverOfChannel } from '../files/driver-channel.js';
import type { Exchange } from '../files/driver-dialogue.js';
import { meaningText } from '../files/driver-dialogue-text.js';
import type { Driver } from '../files/driver.js';
import { judgedAnswer } from './error-report.js';
import { isIdentityFor } from './identity.js';
import { fillMessage, type OperationValues } from './message.js';
import { saysReady } from './ready.js';
import { isSameMeaning, meaningOf } from './reading-meaning.js';
import type { About } from './reading.js';
import { ReplyNotUnderstoodError } from './reply-errors.js';
import { visible } from './visible.js';

/** An exchange that does not come out as the driver file says it must. */
export interface DialogueMistake {
  /** Which one, from 0, and the key that is not met. */
  readonly index: number;
  readonly key: 'is' | 'sends';
  readonly message: string;
}

/**
 * Goes through the `dialogue` of a driver without an instrument: what is sent, and what an answer is taken for,
 * by the same functions that speak with one. Values are the same where they differ by rounding only.
 */
export function checkDialogue(driver: Driver): DialogueMistake[] {
  return (driver.dialogue ?? []).flatMap((exchange, index) => [
    ...sendingMistakes(driver, exchange, index),
    ...answerMistakes(driver, exchange, index),
  ]);
}

function* sendingMistakes(driver: Driver, exchange: Exchange, index: number): Generator<DialogueMistake> {
  if (!('sends' in exchange)) return;
  const sent = sentFor(driver, exchange);
  const expected = exchange.sends;
  if (sent.length === expected.length && sent.every((each, at) => each === expected[at])) return;
  yield { index, key: 'sends', message: `this driver sends ${listed(sent)}; expected ${listed(expected)}` };
}

/** All that goes out, the choice of the channel included; a meter's choice of a range is no part of it. */
function sentFor(driver: Driver, exchange: Extract<Exchange, { kind: 'operation' | 'reading' }>): string[] {
  const { operations, readings } = ofChannel(driver, exchange.channel);
  if (exchange.kind === 'reading') return (readings[exchange.reading]?.ask ?? []).map(({ text }) => text);
  const values = valuesOf(exchange);
  return (operations[exchange.operation] ?? []).map(({ text }) => fillMessage(text, values));
}

function* answerMistakes(driver: Driver, exchange: Exchange, index: number): Generator<DialogueMistake> {
  const said = saidIn(exchange);
  if (said === undefined) return;
  const { answer, is } = said;
  const mistake = (what: string): DialogueMistake => ({
    ...{ index, key: 'is' },
    message: `${quoted(answer)} ${what}; expected ${is}`,
  });
  try {
    const came = cameOut(driver, exchange, answer);
    if (came !== is) yield mistake(`came out as ${came}`);
  } catch (error) {
    if (!(error instanceof ReplyNotUnderstoodError)) throw error;
    if (is !== 'not-understood') yield mistake(`was not understood, ${error.expected} was due`);
  }
}

/** An answer, and in the words of the file what it is to be taken for. */
function saidIn(exchange: Exchange): { readonly answer: string; readonly is: string } | undefined {
  if (exchange.kind === 'operation') return undefined;
  if (exchange.kind !== 'reading') return exchange;
  const { heard } = exchange;
  return heard && { answer: heard.answer, is: meaningText(heard.is) };
}

/**
 * What an answer is taken for, in the words of the file; a number that is the expected one but for rounding, in
 * the very same words.
 * @throws ReplyNotUnderstoodError
 */
function cameOut(driver: Driver, exchange: Exchange, answer: string): string | undefined {
  const { errors, ready } = driver;
  switch (exchange.kind) {
    case 'operation':
      return undefined;
    case 'identity':
      return isIdentityFor(driver)(answer) ? 'understood' : 'not-understood';
    case 'errors':
      return errors === 'none' ? undefined : judgedAnswer(answer, errors, aboutNobody);
    case 'ready':
      return ready && (saysReady(answer, ready.when, aboutNobody) ? 'yes' : 'no');
    case 'reading': {
      const reading = ofChannel(driver, exchange.channel).readings[exchange.reading];
      if (reading === undefined) return undefined;
      const came = meaningOf(answer, reading, aboutNobody);
      const is = exchange.heard?.is;
      return meaningText(is !== undefined && isSameMeaning(came, is) ? is : came);
    }
  }
}

/** No instrument has answered anything here. */
const aboutNobody: About = { address: '', question: '' };

function ofChannel(driver: Driver, channel: number | undefined): Driver {
  const { channels } = driver;
  return channels === undefined ? driver : driverOfChannel(driver, channel ?? channels.first);
}

function valuesOf({ operation, value }: Extract<Exchange, { kind: 'operation' }>): OperationValues {
  const name = placeholderOf[operation]?.slice(1, -1);
  return name === undefined || value === undefined ? {} : { [name]: value };
}

function listed(messages: readonly string[]): string {
  return messages.length === 0 ? 'nothing' : messages.map(quoted).join(', ');
}

function quoted(text: string): string {
  return `"${visible(text)}"`;
}
