import { describe, expect, it } from 'vitest';
import { ReplyReader } from '../../src/instrument/reply-reader.js';
import fc from '../property.js';
import reference from '../../fixtures/reference/scpi-488.json' with { type: 'json' };

const bytesOf = (text: string): Uint8Array => Buffer.from(text, 'latin1');
const textOf = (bytes: Uint8Array | undefined): string | undefined =>
  bytes && Buffer.from(bytes).toString('latin1');

function readerOf(text: string, replyEnd = '\n', limits?: { line: number; block: number }): ReplyReader {
  const reader = new ReplyReader('test:', replyEnd, limits);
  reader.push(bytesOf(text));
  return reader;
}

type Reply =
  { readonly kind: 'line'; readonly text: string } | { readonly kind: 'block'; readonly bytes: Uint8Array };

const lineText = fc
  .array(fc.integer({ min: 0, max: 255 }).filter((code) => code !== 0x0a && code !== 0x0d))
  .map((codes) => String.fromCharCode(...codes));
const reply: fc.Arbitrary<Reply> = fc.oneof(
  lineText.map((text) => ({ kind: 'line' as const, text })),
  fc.uint8Array({ maxLength: 40 }).map((bytes) => ({ kind: 'block' as const, bytes })),
);

function written(replies: readonly Reply[], end: string): Buffer {
  return Buffer.concat(
    replies.flatMap((each) => {
      if (each.kind === 'line') return [bytesOf(each.text + end)];
      const length = String(each.bytes.length);
      return [bytesOf(`#${length.length}${length}`), each.bytes, bytesOf(end)];
    }),
  );
}

describe('replies', () => {
  it.each([
    { replyEnd: '\n', sent: '\n' },
    { replyEnd: '\n', sent: '\r\n' },
    { replyEnd: '\r\n', sent: '\r\n' },
    { replyEnd: '\r', sent: '\r' },
    { replyEnd: '\r', sent: '\r\n' },
  ])(
    'come out the same however they are cut up, ended $sent where $replyEnd is due',
    ({ replyEnd, sent }) => {
      fc.assert(
        fc.property(
          fc.array(reply, { maxLength: 12 }),
          fc.array(fc.integer({ min: 1, max: 9 })),
          (replies, cuts) => {
            const bytes = written(replies, sent);
            const reader = new ReplyReader('test:', replyEnd);
            const read: Reply[] = [];
            let at = 0;
            let cut = 0;
            const next = (): boolean => {
              const wanted = replies[read.length];
              if (wanted === undefined) return false;
              if (wanted.kind === 'line') {
                const text = reader.line();
                if (text !== undefined) read.push({ kind: 'line', text });
                return text !== undefined;
              }
              const block = reader.block();
              if (block !== undefined) read.push({ kind: 'block', bytes: Uint8Array.from(block) });
              return block !== undefined;
            };
            while (at < bytes.length) {
              const size = cuts[cut++] ?? 5;
              reader.push(bytes.subarray(at, at + size));
              at += size;
              while (next());
            }
            expect(read).toEqual(
              replies.map((each) =>
                each.kind === 'line' ? each : { ...each, bytes: Uint8Array.from(each.bytes) },
              ),
            );
            expect(reader.held).toBe(0);
          },
        ),
      );
    },
  );

  it('may be empty', () => {
    const reader = readerOf('\n\r\n15.1\n');
    expect([reader.line(), reader.line(), reader.line(), reader.line()]).toEqual(['', '', '15.1', undefined]);
  });

  it('that are not whole can be looked at and thrown away', () => {
    const reader = readerOf('15.1\n4.');
    reader.line();
    expect(reader.held).toBe(2);
    expect(textOf(reader.discard())).toBe('4.');
    expect(reader.held).toBe(0);
  });

  it('need an end', () => {
    expect(() => new ReplyReader('test:', '')).toThrow(RangeError);
  });
});

describe('a line', () => {
  it('may hold 64 KiB and no byte more, whole or not', () => {
    const most = 'x'.repeat(65536);
    expect(readerOf(`${most}\n`).line()).toHaveLength(65536);
    expect(readerOf(most).line()).toBeUndefined();
    expect(readerOf(`${most}\r`, '\r\n').line()).toBeUndefined();
    expect(() => readerOf(`${most}x\n`).line()).toThrow(/more than 65536 bytes/);
    expect(() => readerOf(`${most}x`).line()).toThrow(/more than 65536 bytes/);
  });

  it('costs the same for each byte, also when megabytes come one by one', () => {
    const reader = new ReplyReader('test:', '\n', { line: 2 ** 21, block: 0 });
    const one = bytesOf('x');
    const began = performance.now();
    for (let count = 0; count < 2 ** 20; count++) {
      reader.push(one);
      reader.line();
    }
    reader.push(bytesOf('\n'));
    expect(reader.line()).toHaveLength(2 ** 20);
    // A quadratic cost would be minutes.
    expect(performance.now() - began).toBeLessThan(3000);
  });
});

describe('a block', () => {
  // Source: IEEE Std 488.2-1992 as public programming manuals state it; see fixtures/reference/scpi-488.json.
  it.each(reference.blocks.definite.examples)(
    'that begins $header holds $data_bytes bytes',
    ({ header, data_bytes }) => {
      const reader = readerOf(`${header}${'\n'.repeat(data_bytes)}\n`);
      expect(reader.block()).toHaveLength(data_bytes);
      expect(reader.held).toBe(0);
    },
  );

  it('of unknown length runs to the end of the line', () => {
    const reader = readerOf('#0abc');
    expect(reader.block()).toBeUndefined();
    reader.push(bytesOf('def\n15.1\n'));
    expect(textOf(reader.block())).toBe('abcdef');
    expect(reader.line()).toBe('15.1');
  });

  it('that would be too long is refused as soon as its length is read', () => {
    expect(() => readerOf('#9999999999').block()).toThrow(/more than 16777216 bytes/);
  });

  it.each(['15.1', '#H1F', '#Q17', '#B101', '#2x5abcde', '#'])('is not what "%s" is', (text) => {
    const reader = readerOf(`${text}\n4.0\n`);
    expect(() => reader.block()).toThrow(/a block/);
    expect(reader.line()).toBe('4.0');
  });

  it('is read whatever the bytes, or refused, without a crash', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 200 }), (bytes) => {
        const reader = new ReplyReader('test:', '\n');
        reader.push(bytes);
        try {
          reader.block();
        } catch (error) {
          expect(error).toMatchObject({ exitCode: 69 });
        }
        expect(reader.held).toBeLessThanOrEqual(bytes.length);
      }),
    );
  });
});
