import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';

describe('a virtual clock', () => {
  it('has moved on by what was waited, at once', async () => {
    const clock = new VirtualClock(new Date('2026-12-01T09:00:00Z'));
    await clock.sleep(3600);
    expect(clock.now()).toBe(3600);
    expect(clock.wall()).toEqual(new Date('2026-12-01T10:00:00Z'));
  });

  it('never goes back', async () => {
    const clock = new VirtualClock(new Date(0));
    await clock.sleep(-5);
    expect(clock.now()).toBe(0);
  });

  it('does not wait for one who was told to stop', async () => {
    const clock = new VirtualClock(new Date(0));
    await expect(clock.sleep(1, AbortSignal.abort(new Error('stop')))).rejects.toThrow('stop');
    expect(clock.now()).toBe(0);
  });

  it("lets the machine's own events in, however much time passes on it", async () => {
    const clock = new VirtualClock(new Date(0));
    const stop = new AbortController();
    setTimeout(() => {
      stop.abort(new Error('Ctrl-C'));
    }, 20);
    const forever = async (): Promise<void> => {
      for (;;) await clock.sleep(1, stop.signal);
    };
    await expect(forever()).rejects.toThrow('Ctrl-C');
  });
});
