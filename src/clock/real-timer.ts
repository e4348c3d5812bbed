import { performance } from 'node:perf_hooks';

/**
 * Does something once so long has passed, and never before; what it hands over calls that off. A timer of the
 * machine counts whole milliseconds and fires up to one early, so it is set again for what is left.
 */
export function afterRealTime(seconds: number, act: () => void): () => void {
  const due = performance.now() + seconds * 1000;
  let timer: NodeJS.Timeout;
  const set = (milliseconds: number): void => {
    timer = setTimeout(() => {
      const left = due - performance.now();
      if (left > 0) set(left);
      else act();
    }, milliseconds);
  };
  set(seconds * 1000);
  return () => {
    clearTimeout(timer);
  };
}
