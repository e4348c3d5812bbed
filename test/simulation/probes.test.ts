import { describe, expect, it } from 'vitest';
import type { Group } from '../../src/files/bench.js';
import { Probes } from '../../src/simulation/probes.js';
import { module } from '../bench/group-bench.js';

const group: Group = {
  measuredBy: 'scanner',
  outputChannel: 110,
  places: [{ channel: 101 }, { channel: 102 }],
};
const modules = [module('K1', 12.3), module('K2', 12.3)];
const probes = (circuit: 'single' | 'parallel' | 'series', scanned: boolean): Probes =>
  new Probes({ simulation: { circuit, modules, faults: [] }, group, scanned });

describe('the probes of the meter', () => {
  it('are at the output of the whole where nothing else puts them elsewhere', () => {
    expect(probes('parallel', false).placeOf('meter', 0)).toEqual({ kind: 'output' });
  });

  it.each([
    ['parallel', 'ballast-of'],
    ['series', 'output-of'],
  ] as const)('are where the scanner of a %s circuit has them: %s', (circuit, kind) => {
    const scanned = probes(circuit, true);
    expect(scanned.placeOf('meter', 0)).toEqual({ kind: 'apart' });
    scanned.close([102], 0);
    expect(scanned.placeOf('meter', 0)).toEqual({ kind, module: 'K2' });
    scanned.close([110], 0);
    expect(scanned.placeOf('meter', 0)).toEqual({ kind: 'output' });
    scanned.close([7], 0);
    expect(scanned.placeOf('meter', 0)).toEqual({ kind: 'apart' });
    scanned.close([101, 102], 0);
    expect(scanned.placeOf('meter', 0)).toEqual({ kind: 'tied' });
  });

  it('are where a hand holds them, scanner or not, until it puts them back', () => {
    const held = probes('parallel', true);
    held.close([101], 0);
    held.move({ kind: 'together' });
    expect(held.placeOf('meter', 0)).toEqual({ kind: 'together' });
    held.move(undefined);
    expect(held.placeOf('meter', 0)).toEqual({ kind: 'ballast-of', module: 'K1' });
  });

  it('of the own meters stay at their places, whatever hand or scanner do', () => {
    const own = probes('series', true);
    own.close([110], 0);
    own.move({ kind: 'apart' });
    expect(own.placeOf('meter-2', 0)).toEqual({ kind: 'output-of', module: 'K2' });
    expect(own.placeOf('meter-3', 0)).toEqual({ kind: 'apart' });
  });
});
