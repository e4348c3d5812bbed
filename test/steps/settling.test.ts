import { describe, expect, it } from 'vitest';
import { Settling } from '../../src/steps/settling.js';

/** Looks each 10 s, of a value that goes 35 K up with a time constant of 720 s. */
function warming(until: number, over = 600): Settling {
  const settling = new Settling({ within: 0.5, over });
  for (let t = 0; t <= until; t += 10) settling.add(t, 23 + 35 * (1 - Math.exp(-t / 720)));
  return settling;
}

describe('what settles', () => {
  it('has not before it was watched for a whole window, however still it is', () => {
    const still = new Settling({ within: 0.5, over: 60 });
    for (let t = 0; t < 60; t += 10) {
      still.add(t, 23);
      expect(still.settled).toBe(false);
      expect(still.change).toBeUndefined();
    }
    still.add(60, 23);
    expect(still.settled).toBe(true);
  });

  it('has when a straight line through the window changes by less than was asked', () => {
    // 35 K · e^(−t/720 s)·(e^(600/720) − 1) is what it does in the last ten minutes.
    const changeAt = (t: number) => 35 * Math.exp(-t / 720) * (Math.exp(600 / 720) - 1);
    expect(warming(2000).settled).toBe(false);
    expect(warming(2000).change).toBeCloseTo(changeAt(2000), 0);
    expect(warming(4000).settled).toBe(true);
  });

  it('is not moved by a single reading', () => {
    const settling = new Settling({ within: 0.5, over: 600 });
    for (let t = 0; t <= 900; t += 10) settling.add(t, t === 600 ? 24 : 23);
    expect(settling.settled).toBe(true);
  });

  it('forgets what lies before the window', () => {
    const settling = new Settling({ within: 0.5, over: 100 });
    for (let t = 0; t <= 1000; t += 10) settling.add(t, t < 800 ? 0 : 40);
    expect(settling.change).toBeCloseTo(0, 9);
  });
});
