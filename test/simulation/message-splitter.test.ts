import { describe, expect, it } from 'vitest';
import { INPUT_BUFFER, MessageSplitter } from '../../src/simulation/message-splitter.js';
import fc from '../property.js';

const bytes = (text: string): Uint8Array => Buffer.from(text, 'latin1');

describe('messages on a line', () => {
  it('are whole however their bytes arrive', () => {
    fc.assert(
      fc.property(
        fc.array(fc.stringMatching(/^[A-Z:?*]{1,20}$/), { maxLength: 6 }),
        fc.integer({ min: 1, max: 9 }),
        (messages, piece) => {
          const stream = bytes(messages.map((message) => `${message}\r\n`).join(''));
          const splitter = new MessageSplitter();
          const heard: string[] = [];
          for (let at = 0; at < stream.length; at += piece) {
            for (const incoming of splitter.feed(stream.subarray(at, at + piece))) {
              heard.push(incoming.kind === 'message' ? incoming.text : 'overrun');
            }
          }
          expect(heard).toEqual(messages);
        },
      ),
    );
  });

  it('may end in LF, in CR LF or in CR; empty ones mean nothing', () => {
    expect([...new MessageSplitter().feed(bytes('A\nB\r\nC\r\n\n  \nD'))]).toEqual([
      { kind: 'message', text: 'A' },
      { kind: 'message', text: 'B' },
      { kind: 'message', text: 'C' },
    ]);
  });

  it('of a megabyte without an end are thrown away, and the next one is heard', () => {
    const splitter = new MessageSplitter();
    const flood = new Uint8Array(1 << 20).fill(0x41);
    expect([...splitter.feed(flood)]).toEqual([]);
    expect([...splitter.feed(bytes('\n*IDN?\n'))]).toEqual([
      { kind: 'overrun' },
      { kind: 'message', text: '*IDN?' },
    ]);
  });

  it('may be as long as the input buffer', () => {
    const longest = 'A'.repeat(INPUT_BUFFER);
    expect(
      [...new MessageSplitter().feed(bytes(`${longest}\n${longest}A\n`))].map(({ kind }) => kind),
    ).toEqual(['message', 'overrun']);
  });
});
