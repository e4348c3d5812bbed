import type { Clock } from '../../../src/clock/clock.js';
import type { Seconds } from '../../../src/quantity/quantity.js';

/** What an instrument makes of a message: its answer, or undefined where it has none. It may take its time. */
export type Knows = (message: string) => string | undefined | Promise<string | undefined>;

/** How an instrument speaks; none of it changes what it knows. */
export interface Quirks {
  /** It repeats each message that it heard, with this end of line, before it deals with it. */
  readonly echo?: '\r\n' | '\n' | '\r';
  /** Sent without an end of line after each message that it dealt with. */
  readonly prompt?: string;
  /** Says its prompt by itself to whoever connects. */
  readonly greets?: boolean;
  /** What ends a reply; a line feed when left out. */
  readonly replyEnd?: string;
  /** It never hears what comes sooner than this after the last message, or after the last thing it said. */
  readonly gap?: Seconds;
  /** It hears nothing for so long after a message like this. */
  readonly deaf?: { readonly after: RegExp; readonly lasting: Seconds };
  /** How long it takes to answer, or to say that it takes the next message. */
  readonly thinks?: Seconds;
  /** From one byte that it sends to the next: 1.04 ms at 9600 baud. */
  readonly perByte?: Seconds;
}

/** One program that is connected to it. */
export interface Listener {
  say(bytes: Uint8Array): void;
}

export interface QuirkyInstrument {
  /** All messages that it heard, in order. */
  readonly heard: readonly string[];
  /** Those that came while it did not hear. */
  readonly missed: readonly string[];
  /** Somebody connects: what they send goes into the function that this gives. */
  connect(listener: Listener): (bytes: Uint8Array) => void;
}

/** An instrument with the manners of real ones, in the time of a clock. It deals with one message after the other. */
export function quirkyInstrument(quirks: Quirks, knows: Knows, clock: Clock): QuirkyInstrument {
  const heard: string[] = [];
  const missed: string[] = [];
  let deafUntil = -Infinity;
  let lastHeardOrSaid = -Infinity;
  let work = Promise.resolve();

  async function say(text: string, listener: Listener): Promise<void> {
    const bytes = Buffer.from(text, 'latin1');
    const pieces = quirks.perByte === undefined ? [bytes] : [...bytes].map((byte) => Uint8Array.of(byte));
    for (const piece of pieces) {
      if (quirks.perByte !== undefined) await clock.sleep(quirks.perByte);
      listener.say(piece);
      lastHeardOrSaid = clock.now();
    }
  }

  async function dealWith(message: string, listener: Listener): Promise<void> {
    if (quirks.echo !== undefined) await say(message + quirks.echo, listener);
    const answer = await knows(message);
    if (quirks.thinks !== undefined) await clock.sleep(quirks.thinks);
    if (answer !== undefined) await say(answer + (quirks.replyEnd ?? '\n'), listener);
    if (quirks.prompt !== undefined) await say(quirks.prompt, listener);
  }

  function hear(message: string, listener: Listener): void {
    const now = clock.now();
    if (now < deafUntil || now < lastHeardOrSaid + (quirks.gap ?? 0)) {
      missed.push(message);
      return;
    }
    heard.push(message);
    lastHeardOrSaid = now;
    if (quirks.deaf?.after.test(message) === true) deafUntil = now + quirks.deaf.lasting;
    work = work.then(() => dealWith(message, listener));
  }

  return {
    heard,
    missed,
    connect: (listener) => {
      let begun = '';
      if (quirks.greets === true) work = work.then(() => say(quirks.prompt ?? '', listener));
      return (bytes) => {
        const messages = (begun + Buffer.from(bytes).toString('latin1')).split(/\r\n|\n|\r/);
        begun = messages.pop() ?? '';
        for (const message of messages) hear(message, listener);
      };
    },
  };
}
