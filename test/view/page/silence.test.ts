import { describe, expect, it } from 'vitest';
import { lineOf, patience } from '../../../src/view/page/silence.js';

const listening = { since: 10, heard: 20, why: 'silent', ended: false } as const;

describe('the line to the runner', () => {
  it('is live while a word came within the last three seconds', () => {
    expect(lineOf(listening, 20)).toEqual({ kind: 'live' });
    expect(lineOf(listening, 20 + patience)).toEqual({ kind: 'live' });
  });

  it('is lost after more, and says for how long', () => {
    expect(lineOf(listening, 24)).toEqual({ kind: 'lost', seconds: 4, why: 'silent' });
    expect(lineOf({ ...listening, why: 'unreachable' }, 31)).toEqual({
      kind: 'lost',
      seconds: 11,
      why: 'unreachable',
    });
  });

  it('is being opened at first, and lost where nothing ever comes', () => {
    const never = { ...listening, heard: undefined };
    expect(lineOf(never, 11)).toEqual({ kind: 'connecting' });
    expect(lineOf(never, 14)).toEqual({ kind: 'lost', seconds: 4, why: 'silent' });
  });

  it('is lost at once where the page is refused from the first', () => {
    expect(lineOf({ ...listening, heard: undefined, why: 'refused' }, 10.2)).toMatchObject({
      kind: 'lost',
      why: 'refused',
    });
  });

  it('is over, and no alarm, once the run has ended', () => {
    expect(lineOf({ ...listening, ended: true }, 1e6)).toEqual({ kind: 'over' });
  });
});
