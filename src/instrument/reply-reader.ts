import { ReplyNotUnderstoodError, ReplyTooLongError } from './reply-errors.js';

export interface ReplyLimits {
  /** Most bytes of a line. */
  readonly line: number;
  /** Most bytes of a block. */
  readonly block: number;
}

const carriageReturn = Buffer.from('\r');
const lineFeed = Buffer.from('\n');
const bothEnds = Buffer.from('\r\n');
const hash = 0x23;
const digitZero = 0x30;

/**
 * Cuts received bytes into replies: lines up to the reply-end, and blocks of known length
 * (IEEE 488.2: `#`, one digit n, n digits of length, the bytes; `#0` runs to the end of the line).
 *
 * Bytes go in as they come and replies come out when they are whole. Every byte is copied and looked at a
 * bounded number of times however the bytes are split, and no more than the limits is held.
 */
export class ReplyReader {
  readonly #address: string;
  readonly #end: Buffer;
  readonly #limits: ReplyLimits;
  #buffer = Buffer.alloc(256);
  #from = 0;
  #to = 0;
  /** Up to here there is no reply-end. */
  #searched = 0;
  /** Ends of line of which one may still follow a reply that is already out. */
  #trailing: readonly Buffer[] = [];

  /** @param replyEnd at least one character, in Latin-1. */
  constructor(
    address: string,
    replyEnd: string,
    limits: ReplyLimits = { line: 64 * 1024, block: 16 * 1024 * 1024 },
  ) {
    if (replyEnd === '') throw new RangeError('A reply needs an end.');
    this.#address = address;
    this.#end = Buffer.from(replyEnd, 'latin1');
    this.#limits = limits;
  }

  push(bytes: Uint8Array): void {
    this.#makeRoom(bytes.length);
    this.#buffer.set(bytes, this.#to);
    this.#to += bytes.length;
    this.#passTrailing();
  }

  /**
   * The next whole line without its end, in Latin-1; undefined when it has not all come yet. A carriage
   * return before a line-feed end is no part of the line.
   * @throws ReplyTooLongError as soon as more has come than a line may hold.
   */
  line(): string | undefined {
    return this.#lineOf(this.#limits.line);
  }

  /**
   * The bytes of the next block; undefined when it has not all come yet.
   * @throws ReplyTooLongError as soon as its length is known to be more than a block may hold.
   * @throws ReplyNotUnderstoodError when what came is no block; the line it came in is gone.
   */
  block(): Uint8Array | undefined {
    if (this.held === 0) return undefined;
    const header = this.#header();
    switch (header.kind) {
      case 'part':
        return undefined;
      case 'to-the-end': {
        const line = this.#lineOf(this.#limits.block);
        return line === undefined ? undefined : Buffer.from(line.slice(2), 'latin1');
      }
      case 'other': {
        const line = this.line();
        if (line === undefined) return undefined;
        throw new ReplyNotUnderstoodError({
          address: this.#address,
          reply: line,
          expected: 'a block (#, the count of digits, the length, the bytes)',
        });
      }
      case 'counted': {
        if (header.length > this.#limits.block) this.#tooLong(this.#limits.block);
        const begin = this.#from + header.size;
        if (this.#to < begin + header.length) return undefined;
        const block = new Uint8Array(this.#buffer.subarray(begin, begin + header.length));
        this.#passTo(begin + header.length);
        this.#mayFollow(this.#end.equals(lineFeed) ? [lineFeed, bothEnds] : [this.#end]);
        return block;
      }
    }
  }

  /** How many bytes have come that are in no reply yet. */
  get held(): number {
    return this.#to - this.#from;
  }

  /** What has come that is in no reply yet; only to be looked at, and only now. */
  get ahead(): Buffer {
    return this.#buffer.subarray(this.#from, this.#to);
  }

  /** Passes over bytes that are no part of a reply; a line feed goes with the carriage return before it. */
  pass(count: number): void {
    const last = this.#buffer[this.#from + count - 1];
    this.#passTo(this.#from + count);
    if (last === carriageReturn[0]) this.#mayFollow([lineFeed]);
  }

  /** Throws away what has come, and gives it to whoever wants to say so. */
  discard(): Uint8Array {
    const held = new Uint8Array(this.#buffer.subarray(this.#from, this.#to));
    this.#passTo(this.#to);
    return held;
  }

  #lineOf(limit: number): string | undefined {
    const at = this.#buffer.subarray(0, this.#to).indexOf(this.#end, Math.max(this.#from, this.#searched));
    // Of an end of several characters all but the last may be there already.
    const length = (at === -1 ? this.#to - this.#end.length + 1 : at) - this.#from;
    if (length > limit) this.#tooLong(limit);
    if (at === -1) {
      this.#searched = Math.max(this.#from, this.#to - this.#end.length + 1);
      return undefined;
    }
    const line = this.#buffer.toString('latin1', this.#from, this.#withoutReturn(at));
    this.#passTo(at + this.#end.length);
    if (this.#end.equals(carriageReturn)) this.#mayFollow([lineFeed]);
    return line;
  }

  #header():
    | { readonly kind: 'part' | 'to-the-end' | 'other' }
    | { readonly kind: 'counted'; readonly size: number; readonly length: number } {
    if (this.#buffer[this.#from] !== hash) return { kind: 'other' };
    if (this.held < 2) return { kind: 'part' };
    const digits = (this.#buffer[this.#from + 1] ?? 0) - digitZero;
    if (digits === 0) return { kind: 'to-the-end' };
    if (digits < 0 || digits > 9) return { kind: 'other' };
    let length = 0;
    for (let index = 0; index < digits; index++) {
      const at = this.#from + 2 + index;
      if (at >= this.#to) return { kind: 'part' };
      const digit = (this.#buffer[at] ?? 0) - digitZero;
      if (digit < 0 || digit > 9) return { kind: 'other' };
      length = length * 10 + digit;
    }
    return { kind: 'counted', size: 2 + digits, length };
  }

  #withoutReturn(at: number): number {
    const returns =
      this.#end.equals(lineFeed) && at > this.#from && this.#buffer[at - 1] === carriageReturn[0];
    return returns ? at - 1 : at;
  }

  #mayFollow(ends: readonly Buffer[]): void {
    this.#trailing = ends;
    this.#passTrailing();
  }

  #passTrailing(): void {
    if (this.#trailing.length === 0) return;
    const held = this.#buffer.subarray(this.#from, this.#to);
    const whole = this.#trailing.find((end) => held.subarray(0, end.length).equals(end));
    if (whole !== undefined) this.#passTo(this.#from + whole.length);
    const mayStillCome = this.#trailing.some((end) => end.subarray(0, held.length).equals(held));
    if (whole?.equals(carriageReturn)) this.#mayFollow([lineFeed]);
    else if (whole !== undefined || !mayStillCome) this.#trailing = [];
  }

  #passTo(at: number): void {
    this.#from = at;
    this.#searched = at;
    if (this.#from !== this.#to) return;
    this.#from = this.#to = this.#searched = 0;
    // What one large block needed is not kept for the lines after it.
    if (this.#buffer.length > 4 * this.#limits.line) this.#buffer = Buffer.alloc(256);
  }

  #makeRoom(more: number): void {
    if (this.#to + more <= this.#buffer.length) return;
    const held = this.held;
    // Moving within the buffer only when it is at most half full keeps the cost of a byte constant.
    const target =
      (held + more) * 2 <= this.#buffer.length
        ? this.#buffer
        : Buffer.alloc(Math.max((held + more) * 2, 256));
    this.#buffer.copy(target, 0, this.#from, this.#to);
    this.#buffer = target;
    this.#searched = Math.max(0, this.#searched - this.#from);
    this.#from = 0;
    this.#to = held;
  }

  #tooLong(limit: number): never {
    throw new ReplyTooLongError({
      address: this.#address,
      limit,
      begins: this.#buffer.subarray(this.#from, Math.min(this.#to, this.#from + 100)),
    });
  }
}
