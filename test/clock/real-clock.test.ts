import { describe, expect, it } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';

describe('the real clock', () => {
  // Timers of the machine count whole milliseconds and may be one early.
  it('waits at least as long as it was told, to the fraction of a millisecond', async () => {
    for (let time = 0; time < 20; time++) {
      const began = realClock.now();
      await realClock.sleep(0.0097);
      expect(realClock.now() - began).toBeGreaterThanOrEqual(0.0097);
    }
  });

  it('ends a wait when it is told to stop, with the reason', async () => {
    const stop = new AbortController();
    const wait = realClock.sleep(60, stop.signal);
    stop.abort(new Error('Ctrl-C'));
    await expect(wait).rejects.toThrow('Ctrl-C');
    await expect(realClock.sleep(60, stop.signal)).rejects.toThrow('Ctrl-C');
  });
});
