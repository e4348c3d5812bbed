import type { Clock } from '../clock/clock.js';
import type { Driver, Message } from '../files/driver.js';
import type { Dialogue } from './dialogue.js';
import type { DriverPart } from './driver-part.js';
import { type Fate, fateOf, type ReportedError, readErrors } from './error-report.js';
import { InstrumentComplainedError } from './instrument-errors.js';
import { noticeText, type Notice, type OnNotice } from './notice.js';
import { untilReady } from './ready.js';

/** Whom something is told, in what words, and who is told what came of it. */
export interface Talk {
  readonly dialogue: Dialogue;
  readonly driver: Driver;
  readonly clock: Clock;
  readonly onNotice?: OnNotice | undefined;
  /** Aborted when nothing is to be waited for any more but an answer. */
  readonly signal?: AbortSignal | undefined;
}

/** Before what was told is told once more: what came too soon must not come too soon again. */
const pausesBeforeAgain = [0.2, 1];

/**
 * Tells messages, each after the rest of the one before it, and waits until the instrument has done those that
 * it must say it has done.
 * @throws NotReadyError, ConnectionLostError and the rest of the dialogue's
 */
export async function tell(talk: Talk, messages: readonly Message[], part: DriverPart): Promise<void> {
  const own = messages.filter(isOwn);
  for (const message of messages) {
    const { text, rest } = message;
    await talk.dialogue.tell(text, rest);
    if (message.untilReady !== true) continue;
    const at: DriverPart = isOwn(message)
      ? { ...part, index: own.indexOf(message) }
      : { driver: part.driver, section: 'channels' };
    await untilReady(talk, { told: text, part: at });
  }
}

/**
 * Asks the last of these messages, once the others are told.
 * @throws as `tell`, and InstrumentSilentError
 */
export async function ask(talk: Talk, messages: readonly Message[], part: DriverPart): Promise<string> {
  const question = messages.at(-1);
  if (question === undefined) throw new Error('nothing to ask');
  await tell(talk, messages.slice(0, -1), part);
  const { text, rest, untilReady: waits } = question;
  const reply = await talk.dialogue.ask(text, rest === undefined ? {} : { rest });
  if (waits === true) await untilReady(talk, { told: text, part });
  return reply;
}

/**
 * Tells messages, all of them, then asks whether anything was wrong, where there is a way to ask. What the
 * driver calls harmless is passed over; what it says came too soon is told again, each act being the same when
 * it is done twice.
 * @throws InstrumentComplainedError, once the instrument was told what clears its error
 * @throws as `tell`
 */
export async function tellAndCheck(
  talk: Talk,
  messages: readonly Message[],
  part: DriverPart,
): Promise<void> {
  if (messages.length === 0) return;
  for (const pause of [...pausesBeforeAgain, undefined]) {
    await tell(talk, messages, part);
    const errors = await seriousErrors(talk);
    if (errors.length === 0) return;
    if (pause === undefined || !errors.every((error) => fateIn(talk.driver, error) === 'again'))
      return complain(talk, errors, messages, part);
    for (const entry of errors) notice(talk, { kind: 'told-again', entry });
    await talk.clock.sleep(pause);
  }
}

/**
 * Asks whether anything was wrong with messages that are told already, where there is a way to ask.
 * @throws InstrumentComplainedError, once the instrument was told what clears its error
 */
export async function check(talk: Talk, messages: readonly Message[], part: DriverPart): Promise<void> {
  const errors = await seriousErrors(talk);
  if (errors.length > 0) await complain(talk, errors, messages, part);
}

/**
 * Takes from an instrument what errors it has from before; they are told, and not held against it.
 * @throws InstrumentComplainedError when there is no end to them
 */
export async function clearErrors(talk: Talk): Promise<void> {
  const { entries, clear } = await readErrors(talk.dialogue, talk.driver);
  for (const entry of entries) notice(talk, { kind: 'stale-error', entry });
  if (!clear) throw complaint(talk, entries, [], { driver: talk.driver.name, section: 'errors' });
}

/** What it complains of, but for what its driver calls harmless. */
async function seriousErrors(talk: Talk): Promise<readonly ReportedError[]> {
  const { entries } = await readErrors(talk.dialogue, talk.driver);
  return entries.filter((entry) => {
    if (fateIn(talk.driver, entry) !== 'harmless') return true;
    notice(talk, { kind: 'harmless-error', entry });
    return false;
  });
}

function fateIn({ errors }: Driver, entry: ReportedError): Fate {
  return errors === 'none' ? 'error' : fateOf(entry, errors);
}

async function complain(
  talk: Talk,
  entries: readonly ReportedError[],
  messages: readonly Message[],
  part: DriverPart,
): Promise<never> {
  const { dialogue, driver } = talk;
  const afterwards = driver.errors === 'none' ? [] : driver.errors.afterwards;
  // What is the matter is known already; that the remedy fails as well changes nothing about it.
  for (const { text, rest } of afterwards) await dialogue.tell(text, rest).catch(() => undefined);
  throw complaint(talk, entries, messages, part);
}

function complaint(
  { dialogue: { address } }: Talk,
  entries: readonly ReportedError[],
  messages: readonly Message[],
  part: DriverPart,
): InstrumentComplainedError {
  return new InstrumentComplainedError({
    address,
    entries: entries.map(({ number, text }) => ({ number, text })),
    after: messages.map(({ text }) => text),
    part: messages.filter(isOwn).length === 1 ? { ...part, index: 0 } : part,
  });
}

/** In a driver's file it stands where it is told, and not among what chooses a channel. */
function isOwn({ selectsChannel }: Message): boolean {
  return selectsChannel !== true;
}

function notice({ dialogue, onNotice }: Talk, what: Notice): void {
  onNotice?.(noticeText(dialogue.address, what), what);
}
