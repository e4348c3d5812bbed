import { describe, expect, it } from 'vitest';
import { statusOfBuild, statusOfOutcome } from '../../src/cli/exit-status.js';
import { exitCodeOf } from '../../src/errors/railproof-error.js';
import { GuardTrippedError } from '../../src/bench/bench-error.js';
import { RecordWriteError } from '../../src/record/record-error.js';

describe('the exit status', () => {
  it.each([
    ['conforms', 0],
    ['not-judged', 0],
    ['does-not-conform', 1],
    ['undecided', 2],
  ] as const)('of %s is %i', (outcome, status) => {
    expect(statusOfOutcome(outcome)).toBe(status);
  });

  it.each([
    ['may-be-built', 0],
    ['too-little', 1],
    ['must-not-be-built', 1],
    ['cannot-tell', 2],
  ] as const)('of a build that comes to %s is %i', (outcome, status) => {
    expect(statusOfBuild(outcome)).toBe(status);
  });

  it('of an error is its own, and of what nobody foresaw 70', () => {
    expect(exitCodeOf(new GuardTrippedError('over-voltage', 'too much', ''))).toBe(3);
    expect(exitCodeOf(new RecordWriteError('journal.jsonl', new Error('no')))).toBe(74);
    expect(exitCodeOf(new TypeError('ours'))).toBe(70);
    expect(exitCodeOf('a string')).toBe(70);
  });
});
