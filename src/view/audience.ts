import type { ServerResponse } from 'node:http';
import type { Clock } from '../clock/clock.js';
import type { Seconds } from '../quantity/quantity.js';
import { EventPage } from './event-page.js';
import { applied, leftBy, type ViewMessage, type ViewState } from './view-state.js';

/** What a run tells of itself; a page is also told everything, first of all. */
export type Told = Exclude<ViewMessage, { kind: 'everything' | 'beat' }>;

export interface Times {
  readonly elapsed: Seconds;
  readonly remaining: Seconds;
}

/** Eight a second: more than an eye reads, and a small cost. */
const figuresEvery: Seconds = 0.125;
/**
 * A browser keeps six lines to one address and no more, and each page holds one of them: with six pages in it no wish
 * to stop would leave it. One is kept for the wish, one for a page that tries again.
 */
const mostPages = 4;

/** Those who follow the run, and the state that each of them has by the same rule. */
export class Audience {
  readonly #clock: Clock;
  readonly #pages = new Set<EventPage>();
  #state: ViewState;
  #waiting: Extract<Told, { kind: 'figures' }> | undefined;
  #figuresAt: Seconds = -Infinity;
  #timer: NodeJS.Timeout | undefined;

  constructor(state: ViewState, clock: Clock) {
    this.#state = state;
    this.#clock = clock;
  }

  get state(): ViewState {
    return this.#state;
  }

  get isFull(): boolean {
    return this.#pages.size >= mostPages;
  }

  /** Another page, which is told everything and then every change. */
  join(response: ServerResponse): void {
    const page = new EventPage(response, this.#clock, () => {
      page.tellLatest(eventOf(this.#figures()));
    });
    response.once('close', () => this.#pages.delete(page));
    page.tell(eventOf({ kind: 'everything', state: this.#state }));
    this.#pages.add(page);
  }

  /** After the end nothing changes any more. */
  show(message: Told): void {
    if (this.#state.ended !== undefined) return;
    if (message.kind === 'figures') {
      this.#waiting = message;
      this.#tellFigures();
      return;
    }
    if (message.kind === 'step') this.#waiting = undefined;
    // What comes after it must not be set back by it.
    if (message.kind === 'working-out' || message.kind === 'ended') this.#tellWaiting();
    this.#tell(message);
  }

  /** So that silence means that the runner is lost. */
  beat(times: Times | undefined): void {
    const beat = { kind: 'beat', ...(leftBy(this.#state) === undefined && times) } as const;
    // What comes after it must not be set back by it.
    this.#tellWaiting();
    this.#state = applied(this.#state, beat);
    const event = eventOf(beat);
    for (const page of this.#pages) page.beat(event);
  }

  /** Settled once all that was told is on its way to every page that reads. */
  async flushed(): Promise<void> {
    await Promise.all(Array.from(this.#pages, (page) => page.flushed()));
  }

  /** Settled once every page that reads has all of it. */
  async end(): Promise<void> {
    clearTimeout(this.#timer);
    await Promise.all(Array.from(this.#pages, (page) => page.end()));
  }

  /** The first at once, and then the newest when it is time. */
  #tellFigures(): void {
    const wait = figuresEvery - (this.#clock.now() - this.#figuresAt);
    if (wait <= 0) {
      this.#tellWaiting();
      return;
    }
    this.#timer ??= setTimeout(() => {
      this.#timer = undefined;
      this.#tellWaiting();
    }, wait * 1000).unref();
  }

  #tellWaiting(): void {
    if (this.#waiting === undefined) return;
    const message = this.#waiting;
    this.#waiting = undefined;
    this.#figuresAt = this.#clock.now();
    this.#tell(message);
  }

  #tell(message: Told): void {
    this.#state = applied(this.#state, message);
    if (this.#pages.size === 0) return;
    const event = eventOf(message);
    for (const page of this.#pages) {
      if (message.kind === 'figures') page.tellLatest(event);
      else page.tell(event);
    }
  }

  #figures(): Told {
    const { figures, elapsed, remaining } = this.#state;
    return { kind: 'figures', figures, elapsed, remaining };
  }
}

function eventOf(message: ViewMessage): string {
  return `data: ${JSON.stringify(message)}\n\n`;
}
