import { performance } from 'node:perf_hooks';
import type { Clock } from './clock.js';
import { afterRealTime } from './real-timer.js';

/** The machine's own clock. */
export const realClock: Clock = {
  now: () => performance.now() / 1000,
  wall: () => new Date(),
  sleep: (seconds, signal) =>
    new Promise((resolve, reject) => {
      if (signal?.aborted) {
        reject(signal.reason as Error);
        return;
      }
      const stop = (): void => {
        callOff();
        reject(signal?.reason as Error);
      };
      const callOff = afterRealTime(seconds, () => {
        signal?.removeEventListener('abort', stop);
        resolve();
      });
      signal?.addEventListener('abort', stop, { once: true });
    }),
};
