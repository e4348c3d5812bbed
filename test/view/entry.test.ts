import { randomBytes } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { Entry, type Shown } from '../../src/view/entry.js';
import fc from '../property.js';

const entry = (): Entry => new Entry(randomBytes);

/** The address that stands at the terminal after this one was shown where it was opened already. */
function freshOf(shown: Shown): string {
  if (shown.kind !== 'spent' || shown.fresh === undefined) throw new Error(`no fresh one: ${shown.kind}`);
  return shown.fresh;
}

describe('the address of a view', () => {
  it('opens one page, which is then known by another secret', () => {
    const door = entry();
    const { token } = door;
    const shown = door.show(token);
    if (shown.kind !== 'opened') throw new Error(shown.kind);
    expect(door.knows(shown.session)).toBe(true);
    expect(door.knows(token)).toBe(false);
    expect(door.show(shown.session)).toEqual({ kind: 'unknown' });
    expect(door.show(token)).not.toMatchObject({ kind: 'opened' });
  });

  it('holds 192 bits that stand in an address as they are', () => {
    const tokens = Array.from({ length: 100 }, () => entry().token);
    for (const token of tokens) expect(token).toMatch(/^[\w-]{32}$/);
    expect(new Set(tokens).size).toBe(100);
  });

  it('is made afresh when it is shown again, once until that one is opened', () => {
    const door = entry();
    const first = door.token;
    door.show(first);
    const fresh = freshOf(door.show(first));
    expect(fresh).toBe(door.token);
    expect(fresh).not.toBe(first);
    expect(door.show(first)).toEqual({ kind: 'spent', fresh: undefined });
    expect(door.show(fresh)).toMatchObject({ kind: 'opened' });
  });

  it('is made afresh three times, so that nobody fills the terminal with addresses', () => {
    const door = entry();
    const first = door.token;
    expect(door.show(first)).toMatchObject({ kind: 'opened' });
    for (let again = 0; again < 3; again += 1) {
      expect(door.show(freshOf(door.show(first)))).toMatchObject({ kind: 'opened' });
    }
    expect(door.show(first)).toEqual({ kind: 'used-up' });
    expect(door.show(door.token)).toEqual({ kind: 'used-up' });
  });

  it('lets nobody in by anything else, and by no part of it', () => {
    const door = entry();
    const { token } = door;
    const part = fc.nat({ max: token.length - 1 }).map((length) => token.slice(0, length));
    const longer = fc.string({ minLength: 1 }).map((more) => token + more);
    fc.assert(
      fc.property(fc.oneof(fc.string(), part, longer), (shown) => {
        expect(door.show(shown)).toEqual({ kind: 'unknown' });
        expect(door.knows(shown)).toBe(false);
      }),
    );
    expect(door.show(token)).toMatchObject({ kind: 'opened' });
  });
});
