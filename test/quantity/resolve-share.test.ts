import { expect, it } from 'vitest';
import { resolve } from '../../src/quantity/resolve-share.js';

it('a share is worked out from what is known by then', () => {
  expect(resolve({ kind: 'share', ratio: 1.5, of: 'rated-current' }, { 'rated-current': 4 })).toBe(6);
  expect(resolve({ kind: 'absolute', value: 3 }, {})).toBe(3);
});

it('a share of what is known to be zero is zero', () => {
  expect(resolve({ kind: 'share', ratio: 0.5, of: 'dropout-current' }, { 'dropout-current': 0 })).toBe(0);
});

it('a share of what has not been measured says which, and what to do', () => {
  const tooEarly = { kind: 'share', ratio: 0.9, of: 'dropout-current' } as const;
  try {
    resolve(tooEarly, { 'rated-current': 4 });
    expect.unreachable();
  } catch (error) {
    expect(error).toMatchObject({
      name: 'NotYetMeasuredError',
      code: 'NOT_YET_MEASURED',
      exitCode: 65,
      reference: 'dropout-current',
      message: 'dropout-current has not been measured by then',
      advice: 'Put a dropout-search step before the one that needs it.',
    });
  }
});
