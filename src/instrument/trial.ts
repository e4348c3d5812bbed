import type { Clock } from '../clock/clock.js';
import { EventClock } from '../clock/event-clock.js';
import type { Driver } from '../files/driver.js';
import { driverOfChannel } from '../files/driver-channel.js';
import type { Connection } from './connection.js';
import type { Trace } from './dialogue-record.js';
import { cautiousGap, TrialLine } from './trial-line.js';
import { meet, type Meeting, toldFirst } from './trial-meeting.js';
import { isUnheard } from './gap.js';
import { type OperationNeed, TrialPace } from './trial-pace.js';
import { type Pace, type Proposal, proposalFor } from './trial-proposal.js';
import { isProven, type TrialResult } from './trial-result.js';
import { type Switching, switchingOf } from './trial-switching.js';
import { TrialWalk } from './trial-walk.js';

export type { TrialResult };

export interface TrialParts {
  readonly driver: Driver;
  /** Of a driver with several; the lowest when left out. */
  readonly channel?: number | undefined;
  readonly connection: Connection;
  readonly clock: Clock;
  /** Aborted when the person wants the walk to end; it still ends as it should. */
  readonly signal?: AbortSignal;
  /** Whether what switches on may be tried once, with nothing set; never, where there is nobody to ask. */
  readonly agree?: (switching: Switching) => Promise<boolean>;
  readonly onMeeting?: (meeting: Meeting) => void;
  readonly onResult?: (result: TrialResult) => void;
  /** Before what takes a while. */
  readonly onPace?: () => void;
  /** Told of every byte; a replay of what was noted is the same trial over again. */
  readonly trace?: Trace;
}

/** What a trial has come to. */
export interface Trial {
  readonly meeting: Meeting;
  readonly results: readonly TrialResult[];
  /** Where it came so far. */
  readonly pace?: Pace;
  readonly proposal?: Proposal;
}

/**
 * Walks through a driver message by message and tells what the instrument makes of each, with the input kept
 * off; then finds out how fast it may be spoken to.
 *
 * It is put in remote and made safe first, over a line of which nothing is known. Until it has said that it is
 * off nothing else is told, and it must say so again after each message: the driver on trial may be wrong in
 * any word. What switches on is sent only where somebody agrees, once, with nothing set, and last. Nothing is
 * set that draws current or shorts. At the end, and when it is broken off, a load is put into constant current
 * at 0 A, made safe and asked whether it is off: that proof is the last one. A meter has nothing to prove. When
 * the identity is not answered the walk ends, since nothing that came later could be told apart. The connection
 * is left open.
 * @throws ConnectionLostError; what `agree` throws
 */
export async function tryDriver(parts: TrialParts): Promise<Trial> {
  const { channels } = parts.driver;
  const channel = channels && (parts.channel ?? channels.first);
  const driver = channel === undefined ? parts.driver : driverOfChannel(parts.driver, channel);
  const line = new TrialLine({ ...parts, driver, clock: new EventClock(parts.clock) });
  const meeting = await meet(line, toldFirst(line));
  parts.onMeeting?.(meeting);
  const walk = new TrialWalk(line, cautious(meeting), channel);
  return new TrialCourse(parts, line, walk, meeting).go();
}

/** Nobody knows yet how fast it takes what it is told, nor how long its slowest answer takes. */
function cautious({ wire }: Meeting): Meeting['wire'] {
  return { ...wire, gap: Math.max(wire.gap, cautiousGap), timeout: 3 * wire.timeout };
}

/** The course of one trial. */
class TrialCourse {
  readonly #parts: TrialParts;
  readonly #line: TrialLine;
  readonly #walk: TrialWalk;
  readonly #meeting: Meeting;
  readonly #results: TrialResult[] = [];
  #left: 'unknown' | 'changed' | 'at-rest' = 'unknown';

  constructor(parts: TrialParts, line: TrialLine, walk: TrialWalk, meeting: Meeting) {
    this.#parts = parts;
    this.#line = line;
    this.#walk = walk;
    this.#meeting = meeting;
  }

  async go(): Promise<Trial> {
    try {
      const identity = this.#heard(await this.#walk.identity());
      if (identity.verdict === 'silent' || !(await this.#isOff('told'))) return this.#come();
      this.#left = 'changed';
      const pace = (await this.#messages()) ? await this.#pace() : undefined;
      if (pace !== undefined) {
        await this.#walk.keepTo(proposalFor(this.#line.driver, pace));
        await this.#switchOn(pace);
      }
      await this.#end();
      return this.#come(pace);
    } finally {
      if (this.#left === 'unknown') await this.#walk.makeSafe().catch(() => undefined);
      if (this.#left === 'changed') await this.#walk.endUnheard();
    }
  }

  /** Whether all of them have been told, and it has stayed off. */
  async #messages(): Promise<boolean> {
    for await (const result of this.#walk.messages()) {
      this.#heard(result);
      if (this.#isOver()) return false;
      if (result.verdict === 'not-sent' || (await this.#isOff())) continue;
      await this.#walk.makeSafe();
      return false;
    }
    return true;
  }

  async #pace(): Promise<Pace | undefined> {
    this.#parts.onPace?.();
    const pace = new TrialPace(this.#line, this.#meeting.wire);
    try {
      const roundTrips = await pace.roundTrips(this.#understood('reading'));
      const afterAnswer = await pace.afterAnswer();
      const afterOperations: OperationNeed[] = [];
      for (const operation of this.#understood('operation')) {
        if (this.#isOver()) break;
        const need = await pace.afterOperation(operation);
        if (need) afterOperations.push(need);
      }
      return { roundTrips, afterAnswer, afterOperations };
    } catch (error) {
      // It has stopped answering: then there is nothing to measure, and the end is told all the same.
      if (!isUnheard(error)) throw error;
      return undefined;
    }
  }

  async #switchOn(pace: Pace): Promise<void> {
    const switching = switchingOf(this.#line.driver, this.#results, pace);
    if (switching === undefined || this.#isOver()) return;
    if (!((await this.#parts.agree?.(switching)) ?? false)) return;
    if (this.#isOver() || !(await this.#isOff())) return;
    for await (const result of this.#walk.switchOn(switching)) {
      this.#heard(result);
      if (result.verdict === 'silent' || this.#isOver()) break;
    }
    await this.#walk.makeSafe();
  }

  async #end(): Promise<void> {
    for await (const result of this.#walk.ending()) this.#heard(result);
    this.#left = 'at-rest';
  }

  /** Whether it says that it is off; told in any case, or where it does not. */
  async #isOff(told: 'told' | 'if-not' = 'if-not'): Promise<boolean> {
    const proof = await this.#walk.proofThatItIsOff();
    if (proof && (told === 'told' || !isProven(proof))) this.#heard(proof);
    return isProven(proof);
  }

  /** The names of those of which every message was taken, none twice. */
  #understood(part: TrialResult['part']): string[] {
    const told = this.#results.filter((result) => result.part === part && result.verdict !== 'not-sent');
    const names = [...new Set(told.map(({ name }) => name))];
    return names.filter((name) =>
      told.every((each) => each.name !== name || !['refused', 'silent'].includes(each.verdict)),
    );
  }

  #heard(result: TrialResult): TrialResult {
    this.#results.push(result);
    this.#parts.onResult?.(result);
    return result;
  }

  #isOver(): boolean {
    return this.#parts.signal?.aborted === true;
  }

  #come(pace?: Pace): Trial {
    return {
      meeting: this.#meeting,
      results: this.#results,
      ...(pace === undefined ? {} : { pace, proposal: proposalFor(this.#line.driver, pace) }),
    };
  }
}
