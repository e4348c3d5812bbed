import type { Clock } from './clock.js';

/**
 * A clock that only moves when someone waits on it: a wait is over at once, and the time has passed.
 * It starts at 0 s; `began` is the wall-clock date given to that moment.
 */
export class VirtualClock implements Clock {
  #now = 0;
  readonly #began: Date;

  constructor(began: Date) {
    this.#began = began;
  }

  now(): number {
    return this.#now;
  }

  wall(): Date {
    return new Date(this.#began.getTime() + this.#now * 1000);
  }

  sleep(seconds: number, signal?: AbortSignal): Promise<void> {
    if (signal?.aborted) return Promise.reject(signal.reason as Error);
    this.#now += Math.max(0, seconds);
    return Promise.resolve();
  }
}
