import { describe, expect, it } from 'vitest';
import { parseCarried } from '../../src/run/taken-over.js';

const carried = {
  known: { 'rated-voltage': 15, 'rated-current': 4, 'open-circuit-voltage': 15.2 },
  tried: { held: 4 },
  earths: { K1: 'isolated', K2: 'leaky' },
};

describe('what a record carries for the steps to come', () => {
  it('is taken in the words that steps understand', () => {
    expect(parseCarried(carried)).toEqual({
      known: carried.known,
      tried: { held: 4 },
      earths: new Map([
        ['K1', 'isolated'],
        ['K2', 'leaky'],
      ]),
    });
  });

  it('keeps nothing of what is not asked for', () => {
    const tried = { held: 4, dropped: 5, more: 6 };
    expect(parseCarried({ ...carried, tried }).tried).toEqual({ held: 4, dropped: 5 });
  });

  it.each([
    [{ known: { 'usable-current': 5 } }, 'nothing that is measured is called "usable-current"'],
    [
      { known: JSON.parse('{"__proto__": 1}') as Record<string, number> },
      'nothing that is measured is called "__proto__"',
    ],
    [{ earths: { K1: 'floating' } }, 'no output stands to earth as "floating"'],
  ])('is refused with a word that means nothing to them: %j', (change, problem) => {
    expect(() => parseCarried({ ...carried, ...change })).toThrow(new RangeError(problem));
  });
});
