import { describe, expect, it } from 'vitest';
import { buildStages } from '../../src/arrangement/build-stages.js';
import type { GuaranteedPoint, StagedBuild } from '../../src/arrangement/staged-build.js';
import { bricks, stack, valveBench, w1, w2, w3 } from '../arrangement/staged.js';

// Common practice, no published source: what a linear stage that may turn 25 W into heat, with a drop-out of 2 V,
// can do behind three 12 V bricks, straight and switched.

/** Bricks that are no limit themselves. */
const strong = { recommended: 5, usable: 6, dropout: 6.5, label: { voltage: 12, current: 5 } };
const profiles = bricks({ W1: strong, W2: strong, W3: strong });

function guaranteedAt({ guaranteed }: StagedBuild, output: number): GuaranteedPoint {
  return guaranteed.reduce((near, each) =>
    Math.abs(each.output - output) < Math.abs(near.output - output) ? each : near,
  );
}

describe('three 12 V bricks ahead of a linear stage of 25 W', () => {
  it('in one stack allow less than 1 A at 5 V out, though they could feed 5 A', () => {
    const straight = buildStages(
      profiles,
      valveBench({
        contacts: [],
        wires: [
          ['W1-', 'in-'],
          ['W1+', 'W2-'],
          ['W2+', 'W3-'],
          ['W3+', 'in+'],
        ],
        arrangements: [{ name: 'three', form: stack(w1, w2, w3), driven: [] }],
        output: { from: 0, to: 30 },
      }),
    );
    const { rising } = guaranteedAt(straight, 5);
    expect(straight.arrangements[0]?.current).toBe(5);
    expect(rising.setBy).toBe('dissipation');
    expect(rising.current).toBeLessThan(1);
    // 25 W over some 31 V.
    expect(rising.current).toBeGreaterThan(0.75);
  });

  describe('switched', () => {
    const staged = buildStages(profiles, valveBench());

    it('allow several amperes at 5 V out from two of them side by side', () => {
      const { rising } = guaranteedAt(staged, 5);
      expect(rising.arrangement).toBe('pair');
      expect(rising.current).toBeGreaterThan(3);
      expect(rising.current).toBeLessThan(4);
    });

    it('go from 12 V to 24 V near 10 V out, and from 24 V to 36 V near 20 V to 22 V', () => {
      const [first, second] = staged.switchOvers;
      expect(first?.up).toBeGreaterThan(9.5);
      expect(first?.up).toBeLessThan(10.2);
      expect(second?.up).toBeGreaterThan(20);
      expect(second?.up).toBeLessThan(22.2);
    });
  });
});
