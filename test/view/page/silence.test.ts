import { describe, expect, it } from 'vitest';
import { lineOf, patience, patienceWhileBusy } from '../../../src/view/page/silence.js';

const listening = { since: 10, heard: 20, why: 'silent', stage: 'under-way' } as const;

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

  it('may be silent for long while the record keeps the runner busy, but not for ever, nor broken', () => {
    const busy = { ...listening, stage: 'working-out' } as const;
    for (const now of [20, 20 + patience + 1, 20 + patienceWhileBusy])
      expect(lineOf(busy, now)).toEqual({ kind: 'working-out' });
    expect(lineOf(busy, 81)).toEqual({ kind: 'lost', seconds: 61, why: 'silent' });
    expect(lineOf({ ...busy, why: 'unreachable' }, 24)).toMatchObject({ kind: 'lost', seconds: 4 });
  });

  it('is over, and no alarm, once the run has ended', () => {
    expect(lineOf({ ...listening, stage: 'over' }, 1e6)).toEqual({ kind: 'over' });
  });
});
