import type { Clock, SettableClock } from './clock.js';

/**
 * A clock on which only what happens takes time: a wait, bytes on a line, an answer at a prompt. What is
 * computed in between takes none, so whoever is given the same happenings at the same times does the same, to
 * the last digit. It begins at 0 s and follows another clock, from which it is behind by no more than what was
 * computed since the last happening.
 */
export class EventClock implements SettableClock {
  readonly #base: Clock;
  readonly #began: number;
  #now = 0;

  constructor(base: Clock) {
    this.#base = base;
    this.#began = base.now();
  }

  now(): number {
    return this.#now;
  }

  wall(): Date {
    return this.#base.wall();
  }

  /** When it is over, exactly that much has passed, however late the machine woke us. */
  async sleep(seconds: number, signal?: AbortSignal): Promise<void> {
    const wait = Math.max(0, seconds);
    const end = this.#now + wait;
    await this.#base.sleep(wait, signal);
    this.reach(end);
  }

  /** Something happens now; `latest` is the end of the time that it was waited for. Hands over its moment. */
  happens(latest = Number.POSITIVE_INFINITY): number {
    this.reach(Math.min(this.#base.now() - this.#began, latest));
    return this.#now;
  }

  reach(moment: number): void {
    this.#now = Math.max(this.#now, moment);
  }
}
