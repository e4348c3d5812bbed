import { performance } from 'node:perf_hooks';
import type { SettableClock } from './clock.js';

/** Milliseconds of the machine's time after which its own events get a turn: a Ctrl-C, above all. */
const breathEvery = 50;

/**
 * A clock that only moves when someone waits on it: a wait is over at once, and the time has passed.
 * It starts at 0 s; `began` is the wall-clock date given to that moment.
 */
export class VirtualClock implements SettableClock {
  #now = 0;
  readonly #began: Date;
  #breathed = performance.now();

  constructor(began: Date) {
    this.#began = began;
  }

  now(): number {
    return this.#now;
  }

  wall(): Date {
    return new Date(this.#began.getTime() + this.#now * 1000);
  }

  /** A wait until then would be a sum, and rounded. */
  reach(moment: number): void {
    this.#now = Math.max(this.#now, moment);
  }

  async sleep(seconds: number, signal?: AbortSignal): Promise<void> {
    signal?.throwIfAborted();
    this.#now += Math.max(0, seconds);
    if (performance.now() - this.#breathed < breathEvery) return;
    await new Promise((resolve) => setImmediate(resolve));
    this.#breathed = performance.now();
    signal?.throwIfAborted();
  }
}
