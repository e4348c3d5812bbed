import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { fileReason } from '../../src/errors/file-reason.js';

function thrownBy(act: () => unknown): unknown {
  try {
    return act();
  } catch (error) {
    return error;
  }
}

describe('what the file system complains of', () => {
  it('is said in words, without its code and without what it was called with', () => {
    expect(fileReason(thrownBy(() => readFileSync('/there/is/none')))).toBe(
      'there is no such file or folder',
    );
    expect(fileReason(thrownBy(() => readFileSync('/')))).toBe('it is a folder');
  });

  it('is its code where there are no words for it, and its text where it has no code', () => {
    expect(fileReason(Object.assign(new Error('EMFILE: too many'), { code: 'EMFILE' }))).toBe('EMFILE');
    expect(fileReason(new Error('gone'))).toBe('gone');
  });
});
