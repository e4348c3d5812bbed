import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { isSealed, newSealer, sealHolds, sealLine, sealLength } from '../../src/record/seal.js';

describe('a seal', () => {
  const line = '{"t":1,"event":"ended","how":"completed","reason":null}';

  it('is the SHA-256 of all bytes before its line and of the line without it', () => {
    const seal = createHash('sha256').update('{"t":0}\n').update(line).digest('hex');
    expect(sealLine(newSealer().update('{"t":0}\n'), line)).toBe(`${line.slice(0, -1)},"seal":"${seal}"}`);
  });

  it('leaves the hash of what went before as it was, so that the next line can go on from it', () => {
    const before = newSealer().update('{"t":0}\n');
    sealLine(before, line);
    const sealed = Buffer.from(sealLine(before, line));
    expect(sealHolds(before, sealed)).toBe(true);
    expect(sealHolds(before, sealed)).toBe(true);
    expect(sealHolds(newSealer(), sealed)).toBe(false);
  });

  it('is not seen in a line that only speaks of one', () => {
    const text = `,"seal":"${'0'.repeat(64)}"}`;
    expect(text).toHaveLength(sealLength);
    expect(isSealed(Buffer.from(JSON.stringify({ event: 'notice', text })))).toBe(false);
    expect(isSealed(Buffer.from(text))).toBe(false);
    expect(isSealed(Buffer.from(`{"t":1${text}`))).toBe(true);
  });
});
