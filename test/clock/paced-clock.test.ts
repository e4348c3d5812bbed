import { describe, expect, it } from 'vitest';
import { PacedClock, paceFor } from '../../src/clock/paced-clock.js';
import { realClock } from '../../src/clock/real-clock.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import fc from '../property.js';

/** A machine whose own time is ours to see. */
const machine = (): VirtualClock => new VirtualClock(new Date(0));

describe('a paced clock', () => {
  it('lets an hour pass in a minute of the machine', async () => {
    const real = machine();
    const clock = new PacedClock(new Date(0), paceFor(3600), real);
    for (let wait = 0; wait < 36_000; wait += 1) await clock.sleep(0.1);
    expect(clock.now()).toBeCloseTo(3600, 6);
    expect(real.now()).toBeGreaterThan(59.9);
    expect(real.now()).toBeLessThan(60.01);
  });

  it('is never slower than a real bench', async () => {
    const real = machine();
    const clock = new PacedClock(new Date(0), paceFor(20), real);
    await clock.sleep(20);
    expect(real.now()).toBe(20);
  });

  it('shows the same moments as a virtual clock, to the last digit', async () => {
    const waits = fc.array(fc.double({ min: 0, max: 1e4, noNaN: true }), { maxLength: 50 });
    await fc.assert(
      fc.asyncProperty(waits, fc.double({ min: 1, max: 1e4, noNaN: true }), async (each, pace) => {
        const paced = new PacedClock(new Date(0), pace, machine());
        const virtual = new VirtualClock(new Date(0));
        for (const wait of each) {
          await paced.sleep(wait);
          await virtual.sleep(wait);
          expect(paced.now()).toBe(virtual.now());
        }
      }),
    );
  });

  it('does not rush to make up for a time in which the machine was held', async () => {
    const real = machine();
    const clock = new PacedClock(new Date(0), 1, real);
    await clock.sleep(1);
    await real.sleep(100);
    await clock.sleep(10);
    expect(real.now()).toBeGreaterThan(110.8);
  });

  it('gives a moment that it is set to its time as well', async () => {
    const real = machine();
    const clock = new PacedClock(new Date(0), 2, real);
    clock.reach(8);
    await clock.sleep(2);
    expect(clock.now()).toBe(10);
    expect(real.now()).toBe(5);
  });

  it('does not wait for one who is told to stop meanwhile', async () => {
    const clock = new PacedClock(new Date(0), 1, realClock);
    const stop = new AbortController();
    setTimeout(() => {
      stop.abort(new Error('stop'));
    }, 5);
    await expect(clock.sleep(3600, stop.signal)).rejects.toThrow('stop');
  });
});
