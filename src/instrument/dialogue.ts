import type { Clock } from '../clock/clock.js';
import type { Wire } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connection } from './connection.js';
import { Line } from './line.js';
import { noticeText, type Notice, type OnNotice } from './notice.js';
import { InstrumentSilentError, OutOfStepError, ReplyTooLongError } from './reply-errors.js';
import type { ReplyReader } from './reply-reader.js';
import { Turns } from './turns.js';
import { visible } from './visible.js';

export interface DialogueParts {
  readonly connection: Connection;
  readonly wire: Wire;
  readonly clock: Clock;
  /** The question for the identity; also what the dialogue gets back in step by. */
  readonly identify: string;
  /** Whether a reply may be this instrument's identity; any that is not empty will do when left out. */
  readonly isIdentity?: (reply: string) => boolean;
  readonly onNotice?: OnNotice;
}

export interface Asking {
  /** The instrument hears nothing for so long after the question. */
  readonly rest?: Seconds;
  /** How long the answer may take, in place of the wire's timeout: for what is answered when all is done. */
  readonly within?: Seconds;
}

interface Question<Reply> {
  readonly message: string;
  readonly rest?: Seconds | undefined;
  readonly cut: (reader: ReplyReader) => Reply | undefined;
  /** Longest silence. */
  readonly silence: Seconds;
  /** Longest wait in all. */
  readonly atMost: Seconds;
}

/** How long a block may take in all, and getting back in step, in timeouts. */
const blockPatience = 60;
const stepPatience = 10;
const attempts = 4;
/** So often the identity may be asked for and nothing at all come back. */
const mostSilent = 2;
const mostLateReplies = 256;

/**
 * Questions and answers with one instrument, one question at a time; those asked meanwhile wait.
 *
 * Replies carry no sign of the question they answer, so a late one must be kept from being taken for the
 * next answer. What is on the line before a question is thrown away and told. After a question without an
 * answer the dialogue is out of step: before the next question it asks for the identity, and since
 * instruments answer in order, all that comes before the identity is late. So it does where an instrument
 * that repeats messages, or sends a prompt, did not. Where the identity was asked for
 * more often than it was answered, or is not known yet, one answer proves little: then it must be asked
 * and answered twice, with the line quiet for a whole timeout after each. Telling needs no step, so an
 * instrument can always be told to be safe.
 */
export class Dialogue {
  readonly #connection: Connection;
  readonly #line: Line;
  readonly #wire: Wire;
  readonly #clock: Clock;
  readonly #identify: string;
  readonly #isIdentity: (reply: string) => boolean;
  readonly #onNotice: OnNotice | undefined;
  readonly #turns = new Turns();
  #inStep = true;
  #identity: string | undefined;
  /** How many times the identity was asked for and has not been answered: so many may still come. */
  #identitiesDue = 0;

  constructor(parts: DialogueParts) {
    this.#connection = parts.connection;
    this.#line = new Line(parts.connection, parts.wire, parts.clock);
    this.#wire = parts.wire;
    this.#clock = parts.clock;
    this.#identify = parts.identify;
    this.#isIdentity = parts.isIdentity ?? ((reply) => reply.trim() !== '');
    this.#onNotice = parts.onNotice;
    const { remark } = parts.connection;
    if (remark !== undefined) this.#notice(remark);
  }

  get address(): string {
    return this.#connection.address;
  }

  /**
   * Sends a message that has no answer. The instrument hears nothing for the `rest` after it, so nothing is
   * sent before that is over; it is not waited for here.
   * @throws ConnectionLostError
   */
  tell(message: string, rest?: Seconds): Promise<void> {
    return this.#turns.take(() => this.#line.send(message, rest));
  }

  /**
   * Sends a question and waits for its answer, a line, for the wire's timeout in all, or as long as is said.
   * @throws InstrumentSilentError, ReplyTooLongError, OutOfStepError, ConnectionLostError
   */
  async ask(message: string, { rest, within = this.#wire.timeout }: Asking = {}): Promise<string> {
    return this.#turns.take(async () => {
      const cut = (reader: ReplyReader): string | undefined => this.#answer(reader, message);
      const reply = await this.#question({ message, rest, cut, silence: within, atMost: within });
      if (message === this.#identify) this.#learn(reply);
      return reply;
    });
  }

  /**
   * Sends a question that is answered by a block of bytes. The timeout is the longest silence; a block that
   * keeps coming may take sixty times as long.
   * @throws as `ask`, and ReplyNotUnderstoodError when the answer is no block
   */
  askBlock(message: string): Promise<Uint8Array> {
    const silence = this.#wire.timeout;
    return this.#turns.take(() =>
      this.#question({ message, cut: (reader) => reader.block(), silence, atMost: blockPatience * silence }),
    );
  }

  /** Says that the last answer made no sense: the next question finds out first whether we are in step. */
  doubt(): void {
    this.#inStep = false;
  }

  /** Never rejects; a question under way ends with ConnectionLostError. */
  close(): Promise<void> {
    return this.#connection.close();
  }

  async #question<Reply>({ message, rest, cut, silence, atMost }: Question<Reply>): Promise<Reply> {
    const { isWhole, isMissing } = await this.#clearLine();
    if (!isWhole || isMissing || !this.#inStep) await this.#getInStep();
    // In step again only once this question is answered: whatever is thrown below leaves that open.
    this.#inStep = false;
    await this.#send(message, rest);
    const reply = await this.#line.reply(cut, { since: this.#line.outAt, silence, atMost });
    if (reply === undefined) {
      this.#notice({ kind: 'out-of-step', question: visible(message) });
      throw new InstrumentSilentError({
        address: this.address,
        question: message,
        timeout: silence,
        isUnrepeated: this.#line.isUnrepeated,
        begun: this.#line.begun(),
      });
    }
    this.#line.caughtUp();
    this.#inStep = true;
    return reply;
  }

  /** The next line. An identity that is still due is passed over: it is not the answer to another question. */
  #answer(reader: ReplyReader, message: string): string | undefined {
    const line = reader.line();
    if (line === undefined || message === this.#identify || this.#identitiesDue === 0) return line;
    if (line.trim() !== this.#identity) return line;
    this.#identitiesDue--;
    this.#notice({ kind: 'late-reply', shown: visible(line) });
    return undefined;
  }

  #learn(reply: string): void {
    this.#identitiesDue--;
    const identity = reply.trim();
    if (this.#identity === undefined && this.#isIdentity(identity)) this.#identity = identity;
    else if (this.#identity !== identity) this.#inStep = false;
  }

  async #send(message: string, rest?: Seconds): Promise<void> {
    if (message === this.#identify) this.#identitiesDue++;
    await this.#line.send(message, rest);
  }

  /**
   * Whether what was thrown away, if anything, had come to an end, and whether something that was due after a
   * message before is missing: then nobody can tell how far the instrument is.
   */
  async #clearLine(): Promise<{ readonly isWhole: boolean; readonly isMissing: boolean }> {
    const { size, begins, unfinished, missing } = await this.#line.clear();
    if (size > 0) this.#notice({ kind: 'unasked-bytes', shown: visible(begins), size });
    if (missing !== undefined && this.#inStep) this.#notice({ kind: 'missing', what: missing });
    return { isWhole: !unfinished, isMissing: missing !== undefined };
  }

  async #getInStep(): Promise<void> {
    this.#inStep = false;
    const giveUp = this.#clock.now() + stepPatience * this.#wire.timeout;
    let quietRounds = 0;
    let silentRounds = 0;
    for (let attempt = 0; attempt < attempts && silentRounds < mostSilent; attempt++) {
      if (this.#clock.now() >= giveUp) break;
      await this.#clearLine();
      await this.#send(this.#identify);
      const heard = await this.#identityRound(giveUp);
      quietRounds = heard === 'then-quiet' ? quietRounds + 1 : 0;
      if (heard === 'nothing') silentRounds += 1;
      if (heard !== 'all' && quietRounds < 2) continue;
      this.#line.caughtUp();
      if ((await this.#clearLine()).isWhole) {
        this.#notice({ kind: 'in-step-again' });
        return;
      }
    }
    throw this.#outOfStep(`it does not answer "${visible(this.#identify)}" as it should`);
  }

  /** Reads up to the last identity that is due, or until nothing comes any more. */
  async #identityRound(giveUp: number): Promise<'all' | 'then-quiet' | 'nothing'> {
    let heard: string | undefined;
    for (let count = 0; count < mostLateReplies; count++) {
      const reply = await this.#nextLine(giveUp);
      if (reply === undefined) {
        if (heard === undefined || this.#clock.now() >= giveUp) return 'nothing';
        this.#identity ??= heard;
        return 'then-quiet';
      }
      if (reply.kind === 'endless' || !this.#mayBeIdentity(reply.text)) {
        this.#notice({ kind: 'late-reply', shown: visible(reply.text) });
        continue;
      }
      heard = reply.text.trim();
      if (this.#identitiesDue > 0) this.#identitiesDue--;
      if (this.#identity !== undefined && this.#identitiesDue === 0) return 'all';
    }
    throw this.#outOfStep('it does not stop talking');
  }

  #mayBeIdentity(reply: string): boolean {
    const text = reply.trim();
    return this.#identity === undefined ? this.#isIdentity(text) : text === this.#identity;
  }

  /** The next line, whole or not, or undefined once the line has been quiet for a whole timeout. */
  async #nextLine(
    giveUp: number,
  ): Promise<{ readonly kind: 'whole' | 'endless'; readonly text: string } | undefined> {
    const since = this.#clock.now();
    const patience = { since, silence: this.#wire.timeout, atMost: giveUp - since };
    try {
      const text = await this.#line.reply((reader) => reader.line(), patience);
      return text === undefined ? undefined : { kind: 'whole', text };
    } catch (error) {
      if (!(error instanceof ReplyTooLongError)) throw error;
      this.#line.begun();
      return { kind: 'endless', text: error.begins };
    }
  }

  #notice(notice: Notice): void {
    this.#onNotice?.(noticeText(this.address, notice), notice);
  }

  #outOfStep(reason: string): OutOfStepError {
    return new OutOfStepError({ address: this.address, identify: this.#identify, reason });
  }
}
