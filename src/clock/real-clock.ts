import { performance } from 'node:perf_hooks';
import type { Clock } from './clock.js';

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
        clearTimeout(timer);
        reject(signal?.reason as Error);
      };
      const timer = setTimeout(() => {
        signal?.removeEventListener('abort', stop);
        resolve();
      }, seconds * 1000);
      signal?.addEventListener('abort', stop, { once: true });
    }),
};
