import { describe, expect, it } from 'vitest';
import { holds } from '../../src/steps/holding.js';

describe('a module holds', () => {
  const judge = holds(15, 0.05, 4);

  it.each([
    ['within the sag, with the set current flowing', 14.9, 4, 'held'],
    ['right at the sag', 14.25, 4, 'held'],
    ['with a current that is short by what a load may be wrong', 14.9, 3.85, 'held'],
    ['not below the sag', 14.24, 4, 'dropped'],
    ['not when the current does not flow', 14.9, 3.8, 'dropped'],
    ['not when nothing flows', 15, 0, 'dropped'],
    ['not when the voltage could not be read', Number.NaN, 4, 'dropped'],
    ['not when the current could not be read', 15, Number.NaN, 'dropped'],
  ])('%s', (_, voltage, current, outcome) => {
    expect(judge({ voltage, current })).toBe(outcome);
  });

  it('at no load whatever the offset of the load', () => {
    expect(holds(15, 0.05, 0)({ voltage: 15, current: -0.02 })).toBe('held');
  });
});
