import { describe, expect, it } from 'vitest';
import { didYouMean, nearest } from '../../src/quantity/nearest.js';
import fc from '../property.js';

const steps = ['open-circuit', 'load-ramp', 'dropout-search', 'wait', 'operator'];

describe('a guess is offered where a person would make the same one', () => {
  it.each<[string, readonly string[], string | undefined]>([
    ['dropout-serch', steps, 'dropout-search'],
    ['droput-saerch', steps, 'dropout-search'],
    ['LOAD-RAMP', steps, 'load-ramp'],
    ['wiat', steps, 'wait'],
    ['metre', ['load', 'meter'], 'meter'],
    ['fro', ['for', 'to'], 'for'],
    ['volage', ['voltage', 'current'], 'voltage'],
    ['III', ['I', 'II'], 'II'],
    ['soak', steps, undefined],
    ['x', steps, undefined],
    ['', steps, undefined],
    ['wait', [], undefined],
  ])('%s', (typed, spellings, guess) => {
    expect(nearest(typed, spellings)).toBe(guess);
  });
});

it('the guess follows a message', () => {
  expect(didYouMean('wiat', steps)).toBe("; did you mean 'wait'?");
  expect(didYouMean('soak', steps)).toBe('');
});

it('a right spelling is nearest to itself', () => {
  fc.assert(
    fc.property(
      fc.array(fc.stringMatching(/^[a-z-]{2,20}$/), { minLength: 1, maxLength: 8 }),
      (spellings) => {
        for (const spelling of spellings) expect(nearest(spelling, spellings)).toBe(spelling);
      },
    ),
  );
});

it('a text of any length is compared quickly', () => {
  expect(nearest('x'.repeat(1_000_000), steps)).toBeUndefined();
});
