import { expect, it } from 'vitest';
import type { SimulatedModule } from '../../src/files/simulation-section.js';
import { earthResistanceOf, shortedPlaces, shortedSpans } from '../../src/simulation/earth-bonds.js';
import { brick } from './circuit-play.js';

const stackOf = (...earths: SimulatedModule['earth'][]): SimulatedModule[] =>
  earths.map((earth, place) => brick(`K${place + 1}`, 12.3, { earth }));

it('a bond is some milliohms, an isolated output is open, a leak is what it is', () => {
  const found = stackOf('bonded', 'isolated', 20_000, 0).map(earthResistanceOf);
  expect(found).toEqual([0.005, Number.POSITIVE_INFINITY, 20_000, 0.005]);
});

it('what lies between two bonds is shorted, the upper bonded module is not', () => {
  expect(shortedSpans(stackOf('bonded', 'isolated', 'bonded', 'isolated'))).toEqual([[0, 2]]);
  expect([...shortedPlaces(stackOf('bonded', 'isolated', 'bonded', 'isolated'))]).toEqual([0, 1]);
});

it('of three bonds each pair of neighbours shorts what lies between it', () => {
  expect(shortedSpans(stackOf('isolated', 'bonded', 'bonded', 0.5))).toEqual([
    [1, 2],
    [2, 3],
  ]);
});

it('one bond, or one and a leak, short nothing', () => {
  expect(shortedSpans(stackOf('isolated', 'bonded', 'isolated'))).toEqual([]);
  expect(shortedSpans(stackOf('bonded', 20_000, 'isolated'))).toEqual([]);
});
