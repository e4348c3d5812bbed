import type { Wire } from '../files/driver.js';
import type { ReplyReader } from './reply-reader.js';

/** What an instrument sends besides its replies, and does not send though it is due. */
export type Missing = 'echo' | 'prompt';

/** Lines that are neither a reply nor anything else that was due. */
export interface Overheard {
  readonly size: number;
  /** Its first bytes. */
  readonly begins: Uint8Array;
}

type Ahead = { readonly kind: 'whole'; readonly size: number } | { readonly kind: 'part' | 'other' };

const nothing: Overheard = { size: 0, begins: new Uint8Array() };
const mostShown = 100;
/** Of a dead instrument that is told on and on. */
const mostUnrepeated = 16;
/** With room for the numbers that are filled in. */
const longestMessage = 1000;

/**
 * What an instrument sends besides its replies: it may repeat each message before it deals with it, with an
 * end of line of its own, and it may send a prompt, without an end, when it will take the next message.
 *
 * Neither is known by its looks, since a reply may look the same, but by its turn: the message repeated, the
 * reply, the prompt. So what comes before the message is repeated belongs to earlier messages and is no reply
 * to this one, and once it has been repeated the next thing is the reply, whatever it looks like. Only where a
 * prompt stayed away, and on a new connection, one more may come first; the next reply settles that.
 */
export class SideTalk {
  readonly #echoes: boolean;
  readonly #prompt: string;
  /** An instrument whose prompt begins on a line of its own may end a line before it or not. */
  readonly #onItsOwnLine: boolean;
  /** The last message, where it has not been repeated yet. */
  #awaited: string | undefined;
  /** This and earlier ones that have not been repeated. */
  #unrepeated: string[] = [];
  #promptIsDue = false;
  /** An empty message may be passed over without a prompt. */
  #promptIsOwed = false;
  #isAnswered = false;
  /** A prompt that was not waited for any longer may still come. */
  #mayStray = true;
  /** In the middle of a line that belongs to nothing. */
  #isOverhearing = false;
  #overheard = nothing;

  constructor({ echo = false, prompt = '' }: Wire) {
    this.#echoes = echo;
    this.#prompt = prompt.replace(/^[\r\n]+/, '');
    this.#onItsOwnLine = this.#prompt !== prompt;
  }

  /** The last message has not been repeated. */
  get isUnrepeated(): boolean {
    return this.#awaited !== undefined;
  }

  /** A message has gone out: what is due after it? */
  sent(message: string): void {
    this.#isAnswered = false;
    this.#promptIsDue = this.#prompt !== '';
    this.#promptIsOwed = message !== '';
    this.#awaited = this.#echoes && message !== '' ? message : undefined;
    if (this.#awaited === undefined) return;
    this.#unrepeated = [...this.#unrepeated, message].slice(-mostUnrepeated);
  }

  /** A reply was read, this message's or an earlier one's. */
  answered(): void {
    this.#isAnswered = true;
    this.#promptIsDue = this.#prompt !== '';
  }

  /** The last reply was this message's: whatever else was to come before it has come, or never will. */
  caughtUp(): void {
    this.#mayStray = false;
  }

  /** Passes over what comes before a reply; whether there is the beginning of one. */
  replyIsNext(reader: ReplyReader): boolean {
    for (;;) {
      if (!this.#overhear(reader)) return false;
      const echo = this.#echoAhead(reader);
      if (echo === 'passed') continue;
      if (echo === 'part') return false;
      const mayPrompt = this.isUnrepeated || this.#mayStray || (this.#isAnswered && this.#promptIsDue);
      const prompt = mayPrompt ? this.#promptAhead(reader, this.#isAnswered) : 'other';
      if (prompt === 'passed') continue;
      if (prompt === 'part') return false;
      if (!this.isUnrepeated) return true;
      this.#isOverhearing = true;
    }
  }

  /** Passes over what comes where no reply is due; whether all that was due has come. */
  isSettled(reader: ReplyReader): boolean {
    for (;;) {
      const isDue = this.isUnrepeated || this.#promptIsDue;
      if (!this.#overhear(reader)) return !isDue;
      const echo = this.#echoAhead(reader);
      if (echo === 'passed') continue;
      const prompt = echo === 'part' ? 'part' : this.#promptAhead(reader, true);
      if (prompt === 'passed') continue;
      if (prompt === 'part' || !isDue) return !isDue;
      this.#isOverhearing = true;
    }
  }

  /** What is due is not waited for any longer. Tells what that is, where it should have come. */
  giveUp(): Missing | undefined {
    const prompt = this.#promptIsDue && this.#promptIsOwed ? 'prompt' : undefined;
    const missing = this.isUnrepeated ? 'echo' : prompt;
    this.#mayStray ||= this.#promptIsDue;
    this.#promptIsDue = false;
    this.#awaited = undefined;
    return missing;
  }

  /** Throws away what has come, and gives what of it belongs to nothing; the beginning of a prompt is kept. */
  discard(reader: ReplyReader): Uint8Array {
    this.isSettled(reader);
    if (this.#promptIn(reader.ahead).kind === 'part' && reader.held > 0) {
      this.#mayStray = true;
      return new Uint8Array();
    }
    const held = reader.discard();
    this.#isOverhearing = false;
    return this.#echoes && isBlank(held) ? new Uint8Array() : held;
  }

  /** A question was not answered in time: what has come of it, if it is more than the next prompt. */
  begun(reader: ReplyReader): Uint8Array {
    const { begins } = this.overheard();
    const held = reader.discard();
    this.#isOverhearing = false;
    const prompt = this.#promptIn(Buffer.from(held));
    const isPrompt = prompt.kind === 'whole' && prompt.size === held.length;
    return isPrompt ? begins : Buffer.concat([begins, held]);
  }

  /** What was passed over since this was last asked for, though nothing like it was due. */
  overheard(): Overheard {
    const overheard = this.#overheard;
    this.#overheard = nothing;
    return overheard;
  }

  /** To the end of a line that belongs to nothing; whether there is anything beyond. */
  #overhear(reader: ReplyReader): boolean {
    if (!this.#isOverhearing) return reader.held > 0;
    const { ahead } = reader;
    const end = lineEnd(ahead);
    const isReturn = ahead[end] === 0x0d && ahead[end + 1] === 0x0a;
    const line = ahead.subarray(0, end === -1 ? ahead.length : end + (isReturn ? 2 : 1));
    if (!isBlank(line)) {
      const { size, begins } = this.#overheard;
      this.#overheard = {
        size: size + line.length,
        begins: Buffer.concat([begins, line]).subarray(0, mostShown),
      };
    }
    reader.pass(line.length);
    this.#isOverhearing = end === -1;
    return reader.held > 0;
  }

  #echoAhead(reader: ReplyReader): 'passed' | 'part' | 'other' {
    if (this.#unrepeated.length === 0) return 'other';
    const ahead = reader.ahead.subarray(0, longestMessage + 1);
    const end = lineEnd(ahead);
    const line = ahead.toString('latin1', 0, end === -1 ? ahead.length : end);
    if (end === -1) return this.#unrepeated.some((message) => message.startsWith(line)) ? 'part' : 'other';
    const at = this.#unrepeated.indexOf(line);
    if (at === -1) return 'other';
    // Messages are repeated in their order: an earlier one is not repeated any more.
    this.#unrepeated = this.#unrepeated.slice(at + 1);
    if (line === this.#awaited) {
      this.#awaited = undefined;
      this.#mayStray = false;
    }
    reader.pass(end + 1);
    return 'passed';
  }

  #promptAhead(reader: ReplyReader, isItsTurn: boolean): 'passed' | 'part' | 'other' {
    const prompt = this.#promptIn(reader.ahead);
    if (prompt.kind !== 'whole') return prompt.kind;
    reader.pass(prompt.size);
    // One that comes before the message is repeated was due after an earlier one.
    if (isItsTurn && !this.isUnrepeated) this.#promptIsDue = false;
    return 'passed';
  }

  #promptIn(ahead: Buffer): Ahead {
    if (this.#prompt === '') return { kind: 'other' };
    const text = ahead.toString('latin1', 0, mostShown);
    const blank = this.#onItsOwnLine ? (/^[\r\n]*/.exec(text)?.[0].length ?? 0) : 0;
    const rest = text.slice(blank);
    if (rest.startsWith(this.#prompt)) return { kind: 'whole', size: blank + this.#prompt.length };
    return { kind: this.#prompt.startsWith(rest) ? 'part' : 'other' };
  }
}

function lineEnd(bytes: Buffer): number {
  const feed = bytes.indexOf(0x0a);
  const before = bytes.subarray(0, feed === -1 ? bytes.length : feed).indexOf(0x0d);
  return before === -1 ? feed : before;
}

function isBlank(bytes: Uint8Array): boolean {
  return bytes.every((byte) => byte === 0x0d || byte === 0x0a);
}
