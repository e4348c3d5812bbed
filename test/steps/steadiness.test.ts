import { describe, expect, it } from 'vitest';
import { firstUnsteady, type Probe } from '../../src/steps/steadiness.js';
import fc from '../property.js';

const resolution = 0.001;

function probe(current: number, spread: number, outcome: Probe['outcome'] = 'held'): Probe {
  return { current, outcome, spread };
}

describe('the first unsteady current', () => {
  it('is between the last steady probe and the first that swings', () => {
    const probes = [probe(4, 0.002), probe(4.4, 0.002), probe(4.8, 0.002), probe(5.2, 0.2), probe(5.6, 0.3)];
    expect(firstUnsteady(probes, resolution)).toEqual({ steady: 4.8, unsteady: 5.2 });
  });

  it('is found in whatever order the probes were taken', () => {
    const probes = [probe(5.2, 0.2), probe(4, 0.002), probe(5.1, 0.2), probe(4.4, 0.002), probe(4.7, 0.002)];
    expect(firstUnsteady(probes, resolution)).toEqual({ steady: 4.7, unsteady: 5.1 });
  });

  it('takes no notice of probes that dropped', () => {
    const probes = [probe(4, 0.002), probe(4.4, 0.002), probe(4.8, 4, 'dropped')];
    expect(firstUnsteady(probes, resolution)).toBeUndefined();
  });

  it('is not taken from one disturbed probe among steady ones', () => {
    const probes = [
      probe(4, 0.002),
      probe(4.4, 0.1),
      probe(4.8, 0.002),
      probe(5.2, 0.002),
      probe(5.3, 0.002),
    ];
    expect(firstUnsteady(probes, resolution)).toBeUndefined();
  });

  it('is not taken from the flicker of the last digit', () => {
    const probes = [probe(4, 0), probe(4.4, 0), probe(4.8, 0.002), probe(5.2, 0.002)];
    expect(firstUnsteady(probes, resolution)).toBeUndefined();
  });

  it('is unknown where the module swings from the first probe on, or where there is none', () => {
    expect(firstUnsteady([probe(4, 0.2), probe(4.4, 0.2)], resolution)).toBeUndefined();
    expect(firstUnsteady([], resolution)).toBeUndefined();
  });

  it('is always an edge between two probes that were held', () => {
    const anyProbe = fc
      .tuple(
        fc.double({ min: 0, max: 10, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.boolean(),
      )
      .map(([current, spread, held]) => probe(current, spread, held ? 'held' : 'dropped'));
    fc.assert(
      fc.property(fc.array(anyProbe, { maxLength: 20 }), (probes) => {
        const edge = firstUnsteady(probes, resolution);
        if (edge === undefined) return;
        const held = probes.filter(({ outcome }) => outcome === 'held').map(({ current }) => current);
        expect(held).toContain(edge.steady);
        expect(held).toContain(edge.unsteady);
        expect(edge.steady).toBeLessThanOrEqual(edge.unsteady);
      }),
    );
  });
});
