import { describe, expect, it } from 'vitest';
import { believedStep, isComplete, placeLooks } from '../../src/analysis/place-looks.js';
import { circuitEvidence, circuitHeader, type CircuitPoint } from './circuit-evidence.js';

const header = circuitHeader({ circuit: 'parallel', ballasts: { K1: [0.05, 0], K2: [0.05, 0] } });

function looksOf(points: readonly CircuitPoint[]) {
  const evidence = circuitEvidence(header, points);
  const [step] = evidence.steps;
  if (step === undefined) throw new Error('no step');
  return placeLooks(header, step);
}

const both = { K1: 0.1, K2: 0.05 };

describe('the looks at the places of a circuit', () => {
  it('are told apart where all places are read at once: the proof, without a module, the climb, and after', () => {
    const looks = looksOf([
      { phase: 'proof', set: 1, output: 15, places: both },
      { phase: 'proof', set: 1, of: 'K1', output: 15, places: both },
      { phase: 'proof', set: 1, of: 'K2', output: 15, places: both },
      { set: 2, output: 15, places: both },
      { set: 4, outcome: 'dropped', output: 1, places: both },
      { phase: 'proof', set: 2, output: 15, places: both },
    ]);
    expect(looks.map(({ kind, without, set }) => [kind, without, set])).toEqual([
      ['together', undefined, 1],
      ['without', 'K1', 1],
      ['without', 'K2', 1],
      ['climb', undefined, 2],
      ['climb', undefined, 4],
      ['after', undefined, 2],
    ]);
    expect(looks.every((look) => isComplete(look, header))).toBe(true);
  });

  it('are joined by set-point where the operator moves the meter from place to place', () => {
    const pass = (of: 'K1' | 'K2', volts: number): readonly CircuitPoint[] => [
      { phase: 'proof', set: 1, of, output: 15, by: 'load', places: { [of]: volts } },
      { phase: 'proof', set: 1, of, output: 15, by: 'load', places: { [of]: 0 } },
      { set: 2, of, output: 15, by: 'load', places: { [of]: 2 * volts } },
      { set: 4, of, output: 15, by: 'load', places: { [of]: 4 * volts } },
    ];
    const looks = looksOf([...pass('K1', 0.03), ...pass('K2', 0.02)]);
    expect(looks.map(({ kind, without, set, points }) => [kind, without, set, points.length])).toEqual([
      ['together', undefined, 1, 2],
      ['without', 'K1', 1, 1],
      ['climb', undefined, 2, 2],
      ['climb', undefined, 4, 2],
      ['without', 'K2', 1, 1],
    ]);
    const highest = looks[3];
    expect([highest?.places.get('K1')?.volts.mean, highest?.places.get('K2')?.volts.mean]).toEqual([
      0.12, 0.08,
    ]);
  });

  it('keep a point that was held and looked at again apart from the one that reached it', () => {
    const point = { set: 4, output: 15, places: both };
    expect(looksOf([point, point, point]).map(({ time }) => time)).toEqual([0, 1, 2]);
  });

  it('are dropped as soon as one pass saw it dropped', () => {
    const looks = looksOf([
      { set: 4, of: 'K1', output: 15, places: { K1: 0.1 } },
      { set: 4, of: 'K2', outcome: 'dropped', output: 1, places: { K2: 0.1 } },
    ]);
    expect(looks.map(({ outcome }) => outcome)).toEqual(['dropped']);
  });
});

describe('a run that was ended against its plan', () => {
  it('is believed but for the last point that it finished', () => {
    const points = [1, 2, 3].map((set) => ({ set, output: 15, places: both }));
    const evidence = circuitEvidence(header, points);
    const [step] = evidence.steps;
    if (step === undefined || evidence.ended === undefined) throw new Error('no step, or no end');
    expect(believedStep(evidence, step)).toBe(step);
    const stopped = { ...evidence, ended: { ...evidence.ended, how: 'stopped' } } as const;
    expect(believedStep(stopped, step).points.map(({ set }) => set.current)).toEqual([1, 2]);
  });
});
