import { describe, expect, it } from 'vitest';
import type { ParallelBuild } from '../../src/arrangement/parallel-build.js';
import { parallelCautions } from '../../src/arrangement/parallel-cautions.js';
import { madeProfile } from './made-profile.js';

const resistor = (rating: number): ParallelBuild['ballast'] => ({
  kind: 'resistor',
  resistance: 0.22,
  tolerance: 0.01,
  dissipation: 3.5,
  dissipationAtLimit: 6.5,
  rating,
  voltageCost: 0.8,
});
const three = ['K1', 'K2', 'K3'].map((name) => madeProfile(name, { shortCircuit: 5.3 }));
const [K1, K2] = three;

describe('a ballast whose module fails with its output shorted', () => {
  it('is told to burn where the others push more through it than its rating', () => {
    // Two at 5.3 A: 10.6² · 0.22 · 1.01 = 25 W.
    const said = parallelCautions(three, resistor(7)).join(' ');
    expect(said).toMatch(/does not cover its module failing.*10\.6 A through it, 25 W in a resistor of 7 W/);
    expect(said).toMatch(/fuse into each plus lead/);
  });

  it('is not where one that is left alone can do no more than its rating', () => {
    if (K1 === undefined || K2 === undefined) throw new Error('there are three');
    expect(parallelCautions([K1, K2], resistor(7)).join(' ')).not.toMatch(/does not cover/);
  });
});
