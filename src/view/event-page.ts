import type { ServerResponse } from 'node:http';
import type { Clock } from '../clock/clock.js';
import type { Seconds } from '../quantity/quantity.js';

/** More than all of a view's state, several times over, in bytes. */
const mostUnread = 2 ** 20;
/** A page that reads nothing for so long is asleep, or does not mean well. */
const patience: Seconds = 10;

/**
 * One page that follows the stream of events. It never keeps anybody waiting: what it does not read is held for it up
 * to a bound, of figures only the newest; then it is dropped, and may come again.
 */
export class EventPage {
  readonly #response: ServerResponse;
  readonly #clock: Clock;
  #blockedSince: Seconds | undefined;
  #isBehind = false;

  /** @param readsAgain told when a page that was behind reads again. */
  constructor(response: ServerResponse, clock: Clock, readsAgain: () => void) {
    this.#response = response;
    this.#clock = clock;
    response.on('drain', () => {
      this.#blockedSince = undefined;
      if (!this.#isBehind) return;
      this.#isBehind = false;
      readsAgain();
    });
    response.writeHead(200, { 'content-type': 'text/event-stream; charset=utf-8' });
    response.write('retry: 1000\n\n');
  }

  /** What must not be missed. */
  tell(event: string): void {
    const response = this.#response;
    if (response.destroyed || response.writableEnded) return;
    if (response.writableLength + event.length > mostUnread) {
      response.destroy();
      return;
    }
    if (!response.write(event)) this.#blockedSince ??= this.#clock.now();
  }

  /** What a newer one will replace: nothing of it is heaped up. */
  tellLatest(event: string): void {
    if (this.#blockedSince === undefined) this.tell(event);
    else this.#isBehind = true;
  }

  beat(event: string): void {
    if (this.#blockedSince === undefined) this.tell(event);
    else if (this.#clock.now() - this.#blockedSince > patience) this.#response.destroy();
  }

  /** Settled once what it was told has left this process, or nobody is there to read it. */
  async flushed(): Promise<void> {
    const response = this.#response;
    if (response.destroyed || response.writableEnded) return;
    await new Promise<void>((resolve) => {
      response.once('close', resolve);
      // A comment, which a page passes over: it goes out after all that stands before it.
      response.write(':\n\n', () => {
        response.off('close', resolve);
        resolve();
      });
    });
  }

  /** Settled once all of it is on its way, or nobody is there to read it. */
  async end(): Promise<void> {
    const response = this.#response;
    if (response.destroyed || response.writableFinished) return;
    await new Promise<void>((resolve) => {
      response.once('close', resolve);
      response.end(resolve);
    });
  }
}
