import type { Clock } from '../clock/clock.js';
import type { RailproofError } from '../errors/railproof-error.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Seconds } from '../quantity/quantity.js';
import { ConnectionLostError, InstrumentUnreachableError, PortBusyError } from './connection-errors.js';
import type { Connection } from './connection.js';
import { NotReadyError, WrongInstrumentError } from './instrument-errors.js';
import {
  InstrumentSilentError,
  OutOfStepError,
  ReplyNotUnderstoodError,
  ReplyTooLongError,
} from './reply-errors.js';

/** How an instrument is found again, for as long as somebody wants it to be. */
export interface WayBack {
  /** A new connection to the same place; not to be waited for any longer than that. */
  connect(within: Seconds): Promise<Connection>;
  /** Not once the bench is made safe or given up: that has a way of its own. */
  isWanted(): boolean;
  /** Aborted when the run must stop: then nothing is tried any more. */
  readonly signal?: AbortSignal;
  /** Told as soon as there is a gap: what is being measured is measured across it. */
  onGap(): void;
  /** Told how it ended, in words that name the instrument. */
  onNotice(text: string): void;
}

/** Nobody wants it to be found any more. */
export function isOver(way: WayBack): boolean {
  return way.signal?.aborted === true || !way.isWanted();
}

/** `ask`: on the same connection; `open`: on a new one. */
export type Again = 'ask' | 'open';

/** Before each new connection. */
const pauses: readonly Seconds[] = [0, 0.25, 0.5, 1, 2];
/** No new connection is begun later than this; one is tried in any case. */
const patience: Seconds = 5;
const leastConnecting: Seconds = 1;

/** The line or a reply failed, and not what was asked: the same may be asked again. */
export function isGap(error: unknown): error is RailproofError {
  return (
    error instanceof ConnectionLostError ||
    error instanceof InstrumentSilentError ||
    error instanceof ReplyNotUnderstoodError ||
    error instanceof ReplyTooLongError ||
    error instanceof OutOfStepError ||
    // One that answers, and is still busy, is not to be told the same once more.
    (error instanceof NotReadyError && error.answer === undefined)
  );
}

/** Not answered, or not so that anything could be made of it; the line is still there. */
export function isUnheard(error: unknown): boolean {
  return isGap(error) && !(error instanceof ConnectionLostError);
}

/** Nobody is there yet, or speaks clearly yet. */
function isStillAway(error: unknown): error is RailproofError {
  return (
    isGap(error) ||
    error instanceof InstrumentUnreachableError ||
    error instanceof PortBusyError ||
    error instanceof WrongInstrumentError
  );
}

/**
 * Tries what failed once more on the same connection, where there still is one, then on new ones, for about
 * five seconds in all. A question that is under way is waited for; between two tries a wish to stop is heeded.
 * @throws the failure itself when it stays so; WrongInstrumentError when somebody else answers now; and
 * whatever else a try throws that is neither the line's nor a reply's fault
 */
export async function throughGap<Result>(
  failure: RailproofError,
  { clock, way }: { readonly clock: Clock; readonly way: WayBack },
  again: (how: Again, within: Seconds) => Promise<Result>,
): Promise<Result> {
  const began = clock.now();
  let tries = 0;
  let last = failure;
  for (const { how, pause } of waysAgain(failure)) {
    if (pause > 0 && clock.now() + pause - began > patience) break;
    await clock.sleep(pause, way.signal).catch(() => undefined);
    if (isOver(way)) throw failure;
    tries += 1;
    try {
      return await again(how, Math.max(leastConnecting, patience - (clock.now() - began)));
    } catch (error) {
      if (!isStillAway(error)) throw error;
      last = error;
    }
  }
  const why = last.message === failure.message ? '' : `: ${last.message}`;
  way.onNotice(
    `${failure.message}; tried again ${tries} times in ${shown(clock.now() - began)}, in vain${why}`,
  );
  throw last instanceof WrongInstrumentError ? last : failure;
}

function* waysAgain(failure: RailproofError): Generator<{ readonly how: Again; readonly pause: Seconds }> {
  if (!(failure instanceof ConnectionLostError)) yield { how: 'ask', pause: 0 };
  for (const pause of pauses) yield { how: 'open', pause };
}

/** What was the matter, and how it went on; `found` is what was found first of all. */
export function gapText(failure: RailproofError, how: Again, lasted: Seconds, found: string): string {
  const on = how === 'ask' ? 'asked again, it answered' : 'it answers again';
  return `${failure.message}; ${on} after ${shown(lasted)}${found === '' ? '' : `; ${found}`}`;
}

function shown(lasted: Seconds): string {
  return formatQuantity(lasted, 'time', { significant: 2 });
}
