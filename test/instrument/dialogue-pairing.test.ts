import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { RailproofError } from '../../src/errors/railproof-error.js';
import { Dialogue } from '../../src/instrument/dialogue.js';
import fc from '../property.js';
import { type Arrival, VirtualLine } from './fixtures/virtual-line.js';

const timeout = 1;

function inVirtualTime(react: (message: string, at: number) => readonly Arrival[], gap = 0) {
  const clock = new VirtualClock(new Date(0));
  const line = new VirtualLine(clock, react);
  const wire = { sendEnd: '\n', replyEnd: '\n', gap, timeout };
  return { clock, line, dialogue: new Dialogue({ connection: line, wire, clock, identify: '*IDN?' }) };
}

const answerTo = (message: string): string => (message === '*IDN?' ? 'NURSERY,LOAD' : `answer to ${message}`);

/**
 * An instrument that answers in order. Before an answer it may stall for long, and it may lose what it is
 * asked while it stalls; between stalls it answers each question within less than a timeout.
 */
function stalling(delays: readonly { readonly delay: number; readonly lost: boolean }[]) {
  let free = 0;
  let index = 0;
  return (message: string, at: number): readonly Arrival[] => {
    const { delay, lost } = delays[index++] ?? { delay: 0, lost: false };
    free = Math.max(free, at) + delay;
    return lost ? [] : [{ at: free, bytes: Buffer.from(`${answerTo(message)}\n`) }];
  };
}

const delay = fc.oneof(
  { weight: 6, arbitrary: fc.double({ min: 0, max: 0.9, noNaN: true }) },
  { weight: 1, arbitrary: fc.double({ min: 1.01, max: 9, noNaN: true }) },
);
const delays = fc.array(fc.record({ delay, lost: fc.boolean() }), { maxLength: 30 });

describe('questions and answers', () => {
  it('are paired rightly whatever the delays and losses; else the question fails', async () => {
    await fc.assert(
      fc.asyncProperty(delays, async (timing) => {
        const { dialogue } = inVirtualTime(stalling(timing));
        await dialogue.ask('*IDN?').catch(() => undefined);
        for (let count = 0; count < 25; count++) {
          const question = count % 7 === 6 ? '*IDN?' : `Q${count}?`;
          const reply = await dialogue.ask(question).catch((error: unknown) => {
            expect(error).toBeInstanceOf(RailproofError);
            return answerTo(question);
          });
          expect(reply).toBe(answerTo(question));
        }
      }),
      { numRuns: 500 },
    );
  });

  it('are in step again soon after the instrument answers promptly again', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.record({ delay, lost: fc.boolean() }), { maxLength: 6 }),
        async (timing) => {
          const { dialogue } = inVirtualTime(stalling(timing));
          const outcomes: boolean[] = [];
          for (let count = 0; count < 40; count++) {
            outcomes.push(
              await dialogue.ask(count === 0 ? '*IDN?' : `Q${count}?`).then(
                () => true,
                () => false,
              ),
            );
          }
          expect(outcomes.slice(-25)).not.toContain(false);
        },
      ),
      { numRuns: 300 },
    );
  });

  it('survive any bytes, at any moment, in any pieces', async () => {
    const pieces = fc.array(
      fc.record({ after: fc.double({ min: 0, max: 2, noNaN: true }), bytes: fc.uint8Array() }),
      {
        maxLength: 6,
      },
    );
    await fc.assert(
      fc.asyncProperty(fc.array(pieces, { maxLength: 12 }), async (replies) => {
        let index = 0;
        const { dialogue } = inVirtualTime((_, at) =>
          (replies[index++] ?? []).map(({ after, bytes }) => ({ at: at + after, bytes })),
        );
        for (let count = 0; count < 8; count++) {
          const ask = count % 3 === 2 ? dialogue.askBlock('CURV?') : dialogue.ask(`Q${count}?`);
          const outcome = await ask.catch((error: unknown) => error);
          expect(
            typeof outcome === 'string' || outcome instanceof Uint8Array || outcome instanceof RailproofError,
          ).toBe(true);
        }
      }),
      { numRuns: 300 },
    );
  });
});

describe('the dialogue', () => {
  it('keeps the gap between a message or a reply and the next message', async () => {
    const { clock, line, dialogue } = inVirtualTime(stalling([{ delay: 0.2, lost: false }]), 0.05);
    const written: number[] = [];
    const write = line.write.bind(line);
    line.write = (bytes) => {
      written.push(clock.now());
      return write(bytes);
    };
    await dialogue.ask('Q1?');
    await dialogue.tell('INP OFF');
    await dialogue.tell('INP OFF');
    expect(written.map((at) => Number(at.toFixed(9)))).toEqual([0, 0.25, 0.3]);
  });

  it('sends nothing while the instrument hears nothing, and waits for no longer than that', async () => {
    const answering = (message: string, at: number): readonly Arrival[] =>
      message.endsWith('?') ? [{ at, bytes: Buffer.from(`${answerTo(message)}\n`) }] : [];
    const { clock, line, dialogue } = inVirtualTime(answering, 0.05);
    const written: number[] = [];
    const write = line.write.bind(line);
    line.write = (bytes) => {
      written.push(Number(clock.now().toFixed(9)));
      return write(bytes);
    };
    await dialogue.tell('FUNC CURR', 0.3);
    expect(clock.now()).toBe(0);
    await dialogue.tell('CURR 1');
    await dialogue.ask('Q1?', { rest: 0.02 });
    await dialogue.ask('Q2?', { rest: 0.4 });
    await dialogue.ask('Q3?');
    expect(written).toEqual([0, 0.3, 0.35, 0.4, 0.8]);
  });

  it('throws away what an instrument says while it hears nothing, before the next question', async () => {
    const { dialogue } = inVirtualTime((message, at) =>
      message === 'FUNC CURR'
        ? [{ at: at + 0.2, bytes: Buffer.from('99.9\n') }]
        : [{ at: at + 0.01, bytes: Buffer.from(`${answerTo(message)}\n`) }],
    );
    await dialogue.tell('FUNC CURR', 0.3);
    expect(await dialogue.ask('Q1?')).toBe('answer to Q1?');
  });

  it('waits for one answer as long as is said, and for the next as long as ever', async () => {
    const { clock, dialogue } = inVirtualTime(stalling([0, 7, 0].map((delay) => ({ delay, lost: false }))));
    await dialogue.ask('*IDN?');
    expect(await dialogue.ask('*OPC?', { within: 10 })).toBe('answer to *OPC?');
    expect(clock.now()).toBeCloseTo(7, 9);
    await expect(dialogue.ask('*OPC?', { within: 0 })).rejects.toMatchObject({
      code: 'INSTRUMENT_SILENT',
      timeout: 0,
    });
    expect(await dialogue.ask('Q3?')).toBe('answer to Q3?');
  });

  it('gets back in step by the identity, without more waiting than that takes', async () => {
    const { clock, line, dialogue } = inVirtualTime(
      stalling([0, 1.5].map((delay) => ({ delay, lost: false }))),
    );
    await dialogue.ask('*IDN?');
    await expect(dialogue.ask('Q1?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    expect(await dialogue.ask('Q2?')).toBe('answer to Q2?');
    expect(line.sent).toEqual(['*IDN?', 'Q1?', '*IDN?', 'Q2?']);
    expect(clock.now()).toBeCloseTo(1.5, 9);
  });

  it('also waits for quiet when one of two identities may still come', async () => {
    const timing = [
      { delay: 0, lost: false },
      { delay: 0, lost: true },
    ];
    const { clock, dialogue } = inVirtualTime(stalling(timing));
    await dialogue.ask('*IDN?');
    await expect(dialogue.ask('*IDN?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    const silentUntil = clock.now();
    expect(await dialogue.ask('Q2?')).toBe('answer to Q2?');
    expect(clock.now() - silentUntil).toBeGreaterThanOrEqual(timeout);
  });

  it('passes over an identity that was still due when another question is asked', async () => {
    let asked = 0;
    const { dialogue } = inVirtualTime((message, at) => {
      const lost = message === '*IDN?' && ++asked === 2;
      const late = message === 'Q2?' ? 'NURSERY,LOAD\n' : '';
      return lost ? [] : [{ at, bytes: Buffer.from(`${late}${answerTo(message)}\n`) }];
    });
    await dialogue.ask('*IDN?');
    await expect(dialogue.ask('*IDN?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    expect(await dialogue.ask('Q2?')).toBe('answer to Q2?');
  });

  it('reads a block of bytes, whatever is in it, and the line after it', async () => {
    const bytes = Buffer.from('#19\n\r\n#\x00\xff234\n', 'latin1');
    const { dialogue } = inVirtualTime((message, at) => [
      { at, bytes: message === 'CURV?' ? bytes : Buffer.from('4.0\n') },
    ]);
    expect(Buffer.from(await dialogue.askBlock('CURV?')).toString('latin1')).toBe('\n\r\n#\x00\xff234');
    expect(await dialogue.ask('CURR?')).toBe('4.0');
  });

  it('takes a block for as long as it keeps coming, beyond the timeout of a line', async () => {
    const bytes = Buffer.from('#15hello\n');
    const { dialogue } = inVirtualTime((_, at) =>
      [...bytes].map((byte, index) => ({ at: at + index * 0.8, bytes: Uint8Array.of(byte) })),
    );
    expect(Buffer.from(await dialogue.askBlock('CURV?')).toString()).toBe('hello');
  });

  it('does not let a trickle of bytes go on for longer than the timeout', async () => {
    const { clock, dialogue } = inVirtualTime((_, at) =>
      Array.from({ length: 100 }, (_, index) => ({ at: at + index * 0.3, bytes: Buffer.from('7') })),
    );
    await expect(dialogue.ask('VOLT?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT', begun: '7777' });
    expect(clock.now()).toBeCloseTo(timeout, 9);
  });

  it('says that it is out of step when the instrument does not stop talking, within a bounded time', async () => {
    const { clock, dialogue } = inVirtualTime((_, at) =>
      Array.from({ length: 1000 }, (_, index) => ({
        at: at + 1.5 + index * 0.3,
        bytes: Buffer.from('noise\n'),
      })),
    );
    await expect(dialogue.ask('*IDN?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    dialogue.doubt();
    await expect(dialogue.ask('VOLT?')).rejects.toMatchObject({ code: 'OUT_OF_STEP' });
    expect(clock.now()).toBeLessThan(20 * timeout);
  });
});
