import { describe, expect, it } from 'vitest';
import { endedHow } from '../../src/report/result.js';
import { eventsOf } from '../analysis/evidence-of.js';
import { resultOf } from './fixed-record.js';

describe('how a run ended', () => {
  it('is what its journal says', () => {
    expect(endedHow(resultOf(eventsOf([])))).toEqual({ how: 'completed', reason: null });
    const stopped = { t: 1, event: 'ended', how: 'stopped', reason: 'over-voltage', status: 3 } as const;
    expect(endedHow(resultOf([...eventsOf([], false), stopped]))).toEqual({
      how: 'stopped',
      reason: 'over-voltage',
    });
  });

  it('is cut off where it does not say', () => {
    expect(endedHow(resultOf(eventsOf([], false)))).toEqual({ how: 'cut-off', reason: null });
  });
});
