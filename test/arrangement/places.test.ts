import { describe, expect, it } from 'vitest';
import { inStacks, type PlacedGroup } from '../../src/arrangement/places.js';
import { type MadeOf, madeProfile } from './made-profile.js';

const group = (name: string, limit: number, made: MadeOf = {}): PlacedGroup => ({
  modules: [madeProfile(name, made)],
  limit,
});
const names = (stacks: ReturnType<typeof inStacks>) =>
  stacks?.map((stack) => stack.map(({ modules }) => modules.map(({ name }) => name).join()));

describe('groups spread over stacks', () => {
  it('strong ones stand with strong ones, so that only one supply is held back by the weakest', () => {
    const groups = [group('A', 2), group('B', 4), group('C', 3), group('D', 4)];
    expect(names(inStacks(groups, { stack: 2, supplies: 2 }))).toEqual([
      ['B', 'D'],
      ['C', 'A'],
    ]);
  });

  it('those with the better isolation stand higher', () => {
    const groups = [group('A', 4, { outputIsolation: 500 }), group('B', 4, { outputIsolation: 100 })];
    expect(names(inStacks(groups, { stack: 2, supplies: 1 }))).toEqual([['B', 'A']]);
  });

  it('one that bears little stands low, even where that mixes strong and weak', () => {
    const little = { outputIsolation: 20 };
    const groups = [group('A', 4, little), group('B', 4, little), group('C', 2), group('D', 2)];
    expect(names(inStacks(groups, { stack: 2, supplies: 2 }))).toEqual([
      ['A', 'C'],
      ['B', 'D'],
    ]);
  });

  it('two that bear little stand in no stack together', () => {
    const little = { outputIsolation: 20 };
    const groups = [group('A', 4, little), group('B', 4, little)];
    expect(inStacks(groups, { stack: 2, supplies: 1 })).toBeUndefined();
  });

  it('what is unknown bears 60 V: three of 15 V and no four', () => {
    const unknown = { outputIsolation: 'unknown' } as const;
    const groups = ['A', 'B', 'C', 'D'].map((name) => group(name, 4, unknown));
    expect(inStacks(groups.slice(0, 3), { stack: 3, supplies: 1 })).toBeDefined();
    expect(inStacks(groups, { stack: 4, supplies: 1 })).toBeUndefined();
    // One that is known to bear more may stand at the top.
    const [a, b, c] = groups;
    if (a === undefined || b === undefined || c === undefined) throw new Error('no groups');
    expect(names(inStacks([group('T', 4), a, b, c], { stack: 4, supplies: 1 }))?.[0]?.at(-1)).toBe('T');
  });

  it('side by side nothing has to bear anything', () => {
    const groups = [group('A', 4, { outputIsolation: 0 }), group('B', 3, { outputIsolation: 'unknown' })];
    expect(names(inStacks(groups, { stack: 1, supplies: 2 }))).toEqual([['A'], ['B']]);
  });
});
