import { describe, expect, it } from 'vitest';
import { EventClock } from '../../src/clock/event-clock.js';
import { realClock } from '../../src/clock/real-clock.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';

describe('a clock of events', () => {
  it('stands still while something is computed, and has caught up when something happens', async () => {
    const base = new VirtualClock(new Date(0));
    await base.sleep(100);
    const clock = new EventClock(base);
    await base.sleep(0.25);
    expect(clock.now()).toBe(0);
    expect(clock.happens()).toBe(0.25);
    expect(clock.now()).toBe(0.25);
    expect(clock.wall()).toEqual(base.wall());
  });

  it('has moved by exactly what was waited, however late the machine woke us', async () => {
    const clock = new EventClock(realClock);
    await clock.sleep(0.01);
    await clock.sleep(0.02);
    expect(clock.now()).toBe(0.01 + 0.02);
    await clock.sleep(-1);
    expect(clock.now()).toBe(0.01 + 0.02);
    expect(clock.happens()).toBeGreaterThan(0.01 + 0.02);
  });

  it('is never ahead of the real one, so that what takes time there takes time here', async () => {
    const clock = new EventClock(realClock);
    for (let time = 0; time < 20; time++) {
      await clock.sleep(0.0097);
      const sent = clock.happens();
      await new Promise((resolve) => setImmediate(resolve));
      expect(clock.happens()).toBeGreaterThan(sent);
    }
  });

  it('never goes back, and no further than the end of what was waited for', async () => {
    const base = new VirtualClock(new Date(0));
    const clock = new EventClock(base);
    clock.reach(7);
    expect(clock.happens()).toBe(7);
    await base.sleep(60);
    expect(clock.happens(8)).toBe(8);
    clock.reach(5);
    expect(clock.now()).toBe(8);
  });

  it('has not moved by a wait that was broken off', async () => {
    const clock = new EventClock(realClock);
    const stop = new AbortController();
    const wait = clock.sleep(60, stop.signal);
    stop.abort(new Error('Ctrl-C'));
    await expect(wait).rejects.toThrow('Ctrl-C');
    expect(clock.now()).toBe(0);
  });
});
