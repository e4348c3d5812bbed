import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import type { Wire } from '../../src/files/driver.js';
import { RailproofError } from '../../src/errors/railproof-error.js';
import { Dialogue } from '../../src/instrument/dialogue.js';
import type { Notice } from '../../src/instrument/notice.js';
import fc from '../property.js';
import { type Arrival, VirtualLine } from './fixtures/virtual-line.js';

const timeout = 1;
const identity = 'NURSERY,LOAD,K1';

/** What the instrument sends after a message, all of it, and where that is cut into pieces. */
type Says = (message: string, count: number) => string;
type Cuts = (length: number) => readonly number[];

const inOnePiece: Cuts = () => [];

function talkTo(says: Says, wire: Partial<Wire>, { cuts = inOnePiece, greeting = '' } = {}) {
  const clock = new VirtualClock(new Date(0));
  const notices: Notice[] = [];
  let count = 0;
  /** When all of what was said before has come. */
  let free = 0;
  const early: string[] = [];
  const pieces = (text: string, from: number): Arrival[] => {
    const bytes = Buffer.from(text, 'latin1');
    const marks = [...new Set([0, ...cuts(bytes.length), bytes.length])];
    return marks.slice(1).map((mark, index) => {
      free = from + 0.001 * (index + 1);
      return { at: free, bytes: bytes.subarray(marks[index], mark) };
    });
  };
  const line = new VirtualLine(clock, (message, at) => {
    if (at < free - 1e-9) early.push(message);
    const first = count === 0 ? pieces(greeting, at) : [];
    return [...first, ...pieces(says(message, count++), Math.max(at, free))].filter(
      ({ bytes }) => bytes.length > 0,
    );
  });
  const dialogue = new Dialogue({
    connection: line,
    wire: { sendEnd: '\n', replyEnd: '\n', gap: 0, timeout, ...wire },
    clock,
    identify: '*IDN?',
    onNotice: (_, notice) => notices.push(notice),
  });
  return { clock, line, dialogue, notices, early };
}

/** Answers questions, repeats messages and sends its prompt as its manners are. */
const mannerly =
  (answers: Readonly<Record<string, string>>, { echo = '', prompt = '', replyEnd = '\n' }): Says =>
  (message) => {
    const answer = message === '*IDN?' ? identity : answers[message];
    return (echo && message + echo) + (answer === undefined ? '' : answer + replyEnd) + prompt;
  };

const prompts = [undefined, '> ', '>', ':', '\r\n> ', 'OK\n> '];
/** After a bare carriage return nobody can tell an empty reply from a line feed that belongs to the return. */
const said = (reply: string, text: string, echo: string | undefined): string =>
  reply === 'same' ? text : reply === '' && echo === '\r' ? '15.1' : reply;

const exchange = fc.record({
  text: fc.constantFrom(':MEAS:VOLT?', '>?', '> ?', 'CURR?', 'O', 'INP OFF', '*RST'),
  isAsked: fc.boolean(),
  reply: fc.constantFrom('15.1', '> 5', '>', '> ', ':', 'OK', '', 'same', '*IDN?', identity, '15.1 > '),
});

describe('an instrument that repeats messages, or sends a prompt,', () => {
  it('is read right however its bytes are split, and whatever its replies look like', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.record({
          echo: fc.constantFrom(undefined, '\r\n', '\n', '\r'),
          prompt: fc.constantFrom(...prompts),
          greets: fc.boolean(),
          ends: fc.constantFrom(['\n', '\n'], ['\n', '\r\n'], ['\r', '\r'], ['\r', '\r\n'], ['\r\n', '\r\n']),
        }),
        fc.array(fc.constantFrom('INP OFF', '*CLS'), { maxLength: 2 }),
        fc.array(exchange, { maxLength: 8 }),
        fc.array(fc.nat(), { maxLength: 60 }),
        async ({ echo, prompt, greets, ends: [replyEnd, sentEnd] }, first, exchanges, marks) => {
          const script = [...first, '*IDN?', ...exchanges.map(({ text }) => text)];
          const replies = [
            ...first.map(() => undefined),
            identity,
            ...exchanges.map(({ text, isAsked, reply }) => (isAsked ? said(reply, text, echo) : undefined)),
          ];
          const says: Says = (message, count) => {
            expect(message).toBe(script[count]);
            const reply = replies[count];
            return (
              (echo === undefined ? '' : message + echo) +
              (reply === undefined ? '' : reply + sentEnd) +
              (prompt ?? '')
            );
          };
          const cuts: Cuts = (length) =>
            [...new Set(marks.map((mark) => 1 + (mark % length)))].sort((a, b) => a - b);
          const wire = {
            replyEnd,
            echo: echo !== undefined,
            ...(prompt !== undefined && { prompt }),
          };
          const greeting = greets ? (prompt ?? '') : '';
          const { clock, dialogue, notices, early } = talkTo(says, wire, { cuts, greeting });
          for (const [count, message] of script.entries()) {
            const reply = replies[count];
            if (reply === undefined) await dialogue.tell(message);
            else expect(await dialogue.ask(message)).toBe(reply);
          }
          expect(notices).toEqual([]);
          // Only where a greeting may be taken for the prompt after the first message is anything sent early.
          if (prompt !== undefined && (first.length === 0 || !greets)) expect(early).toEqual([]);
          expect(clock.now()).toBeLessThan(timeout);
        },
      ),
      { numRuns: 500 },
    );
  });
});

describe('an instrument that repeats each message', () => {
  const echoing = mannerly({ 'VOLT?': '15.1', 'CURR?': '4.0' }, { echo: '\r\n' });

  it('and answers with the same words is understood', async () => {
    const { dialogue } = talkTo(mannerly({ 'STAT?': 'STAT?' }, { echo: '\n' }), { echo: true });
    expect(await dialogue.ask('STAT?')).toBe('STAT?');
  });

  it('but not this one is asked who it is before the next question', async () => {
    const says: Says = (message, count) => (count === 1 ? 'INP OF\r\n' : echoing(message, count));
    const { line, dialogue, notices } = talkTo(says, { echo: true });
    await dialogue.ask('*IDN?');
    await dialogue.tell('INP OFF');
    expect(await dialogue.ask('VOLT?')).toBe('15.1');
    expect(line.sent).toEqual(['*IDN?', 'INP OFF', '*IDN?', 'VOLT?']);
    expect(notices).toEqual([
      { kind: 'unasked-bytes', shown: 'INP OF\\r\\n', size: 8 },
      { kind: 'missing', what: 'echo' },
      { kind: 'in-step-again' },
    ]);
  });

  it('is not believed where it answers before it has repeated the question', async () => {
    const late: Says = (message, count) => (count === 1 ? '99.9\r\n' : '') + echoing(message, count);
    const { dialogue, notices } = talkTo(late, { echo: true });
    await dialogue.ask('*IDN?');
    expect(await dialogue.ask('VOLT?')).toBe('15.1');
    expect(await dialogue.ask('CURR?')).toBe('4.0');
    expect(notices).toEqual([{ kind: 'unasked-bytes', shown: '99.9\\r\\n', size: 6 }]);
  });

  it('in words only, and has no echo, is told so with what it sent', async () => {
    const { dialogue } = talkTo(mannerly({ 'VOLT?': '15.1' }, {}), { echo: true });
    await expect(dialogue.ask('VOLT?')).rejects.toMatchObject({
      code: 'INSTRUMENT_SILENT',
      message: 'virtual: did not repeat "VOLT?" within 1000 ms: "15.1\\n"',
    });
  });

  it('is read to the byte where it answers with a block', async () => {
    const block = '#210\r\n> CURV?\n';
    const says = mannerly({ 'CURV?': block, 'VOLT?': '15.1' }, { echo: '\r\n', prompt: '> ' });
    const { dialogue, notices } = talkTo(says, { echo: true, prompt: '> ' });
    expect(Buffer.from(await dialogue.askBlock('CURV?')).toString('latin1')).toBe(block.slice(4));
    expect(await dialogue.ask('VOLT?')).toBe('15.1');
    expect(notices).toEqual([]);
  });
});

it('an instrument that never stops talking is told to be safe all the same', async () => {
  const clock = new VirtualClock(new Date(0));
  const sent: string[] = [];
  const noise = Buffer.alloc(4096, '#');
  let received = 0;
  const dialogue = new Dialogue({
    connection: {
      address: 'virtual:',
      write: (bytes) => {
        sent.push(Buffer.from(bytes).toString().trimEnd());
        return Promise.resolve(0);
      },
      receive: async (within) => {
        received += noise.length;
        // A test that does not end tells nobody why.
        if (received > 2 ** 26) throw new Error('what it says is waited out for ever');
        await clock.sleep(Math.min(within, 0.001));
        return noise;
      },
      close: () => Promise.resolve(),
    },
    wire: { sendEnd: '\n', replyEnd: '\n', gap: 0, timeout, echo: true },
    clock,
    identify: '*IDN?',
  });
  await dialogue.tell('CURR 0');
  await dialogue.tell('INP OFF');
  expect(sent).toEqual(['CURR 0', 'INP OFF']);
  expect(clock.now()).toBeLessThan(1.1 * timeout);
});

describe('an instrument that sends a prompt', () => {
  const prompting = mannerly({ 'VOLT?': '15.1' }, { prompt: '> ' });
  const silently =
    (...counts: readonly number[]): Says =>
    (message, count) => {
      const said = prompting(message, count);
      return counts.includes(count) ? said.replace('> ', '') : said;
    };

  it('is told nothing before it has sent it, however long that takes within the timeout', async () => {
    const { clock, line, dialogue } = talkTo(() => '', { prompt: '> ' });
    const at: number[] = [];
    const write = line.write.bind(line);
    line.write = (bytes) => {
      at.push(clock.now());
      return write(bytes);
    };
    const slow = talkTo(prompting, { prompt: '> ' }, { cuts: () => [1] });
    await slow.dialogue.tell('INP OFF');
    await slow.dialogue.tell('INP OFF');
    expect(slow.early).toEqual([]);
    await dialogue.tell('INP OFF');
    await dialogue.tell('INP OFF');
    expect(at).toEqual([0, timeout]);
  });

  it('and is dead costs one timeout, however much it is told', async () => {
    const { clock, line, dialogue } = talkTo(() => '', { echo: true, prompt: '> ' });
    for (let count = 0; count < 40; count++) await dialogue.tell('INP OFF');
    expect(line.sent).toHaveLength(40);
    expect(clock.now()).toBe(timeout);
  });

  it('but not this time is asked who it is before the next question', async () => {
    const { clock, line, dialogue, notices } = talkTo(silently(1), { prompt: '> ' });
    await dialogue.ask('*IDN?');
    await dialogue.tell('INP OFF');
    expect(await dialogue.ask('VOLT?')).toBe('15.1');
    expect(line.sent).toEqual(['*IDN?', 'INP OFF', '*IDN?', 'VOLT?']);
    expect(notices).toEqual([{ kind: 'missing', what: 'prompt' }, { kind: 'in-step-again' }]);
    expect(clock.now()).toBeLessThan(1.1 * timeout);
  });

  it('too late is still read right', async () => {
    const says: Says = (message, count) => (count === 2 ? '> ' : '') + silently(1)(message, count);
    const { dialogue } = talkTo(says, { prompt: '> ' });
    await dialogue.ask('*IDN?');
    await dialogue.tell('INP OFF');
    expect(await dialogue.ask('VOLT?')).toBe('15.1');
  });

  it('in place of an answer has not begun one', async () => {
    const { dialogue } = talkTo(prompting, { prompt: '> ' });
    await dialogue.ask('*IDN?');
    await expect(dialogue.ask('POW?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT', begun: '' });
    expect(await dialogue.ask('VOLT?')).toBe('15.1');
  });

  it('one time more often than is due has still said nothing that nobody asked for', async () => {
    const says: Says = (message, count) => prompting(message, count) + (count === 1 ? '> ' : '');
    const { dialogue, notices } = talkTo(says, { prompt: '> ' });
    await dialogue.ask('*IDN?');
    await dialogue.ask('VOLT?');
    expect(await dialogue.ask('VOLT?')).toBe('15.1');
    expect(notices).toEqual([]);
  });

  it('never, though its driver says so, is slow and understood', async () => {
    const { dialogue, notices } = talkTo(mannerly({ 'VOLT?': '15.1' }, {}), { prompt: '> ' });
    await dialogue.ask('*IDN?');
    expect(await dialogue.ask('VOLT?')).toBe('15.1');
    expect(await dialogue.ask('VOLT?')).toBe('15.1');
    expect(notices.map(({ kind }) => kind)).toEqual(['missing', 'in-step-again', 'missing', 'in-step-again']);
  });
});

describe('an empty message', () => {
  it.each([
    { does: 'passes it over', empty: '' },
    { does: 'repeats it', empty: '\r\n' },
    { does: 'sends its prompt', empty: '> ' },
    { does: 'repeats it and sends its prompt', empty: '\r\n> ' },
    { does: 'ends with it what somebody else began', empty: 'VO\r\n> ' },
  ])('is no reason to be out of step to an instrument that $does', async ({ empty }) => {
    const says: Says = (message, count) =>
      message === '' ? empty : mannerly({}, { echo: '\r\n', prompt: '> ' })(message, count);
    const { clock, line, dialogue, notices } = talkTo(says, { echo: true, prompt: '> ' });
    await dialogue.tell('');
    await dialogue.tell('INP OFF');
    expect(await dialogue.ask('*IDN?')).toBe(identity);
    expect(line.sent).toEqual(['', 'INP OFF', '*IDN?']);
    expect(notices.filter(({ kind }) => kind !== 'unasked-bytes')).toEqual([]);
    expect(clock.now()).toBeLessThan(1.1 * timeout);
  });
});

const waits = fc.array(
  fc.record({
    delay: fc.oneof(
      { weight: 6, arbitrary: fc.double({ min: 0, max: 0.4, noNaN: true }) },
      { weight: 1, arbitrary: fc.double({ min: 1.01, max: 9, noNaN: true }) },
    ),
    isLost: fc.boolean(),
  }),
  { maxLength: 30 },
);

it('a reply is never taken for that to another question, whatever is late or lost of it', async () => {
  const manners = fc.constantFrom(
    { echo: '\r\n', prompt: '> ' },
    { echo: '\r\n', prompt: '' },
    { echo: '', prompt: '> ' },
  );
  await fc.assert(
    fc.asyncProperty(manners, waits, async ({ echo, prompt }, timing) => {
      const clock = new VirtualClock(new Date(0));
      let free = 0;
      let count = 0;
      const answerTo = (message: string): string => (message === '*IDN?' ? identity : `answer to ${message}`);
      const line = new VirtualLine(clock, (message, at) => {
        const { delay, isLost } = timing[count++] ?? { delay: 0, isLost: false };
        free = Math.max(free, at) + delay;
        const first = { at: free, bytes: Buffer.from(echo && message + echo) };
        free += delay;
        const isAsked = message.endsWith('?');
        const rest = { at: free, bytes: Buffer.from((isAsked ? `${answerTo(message)}\n` : '') + prompt) };
        return isLost ? [] : [first, rest].filter(({ bytes }) => bytes.length > 0);
      });
      const wire = { sendEnd: '\n', replyEnd: '\n', gap: 0, timeout, echo: echo !== '', prompt };
      const dialogue = new Dialogue({ connection: line, wire, clock, identify: '*IDN?' });
      const answers = async (first: number, end: number): Promise<boolean[]> => {
        const outcomes: boolean[] = [];
        for (let question = first; question < end; question++) {
          if (question % 3 === 1) await dialogue.tell('INP OFF');
          const message = question % 7 === 0 ? '*IDN?' : `Q${question}?`;
          const reply = await dialogue.ask(message).catch((error: unknown) => {
            expect(error).toBeInstanceOf(RailproofError);
            return undefined;
          });
          outcomes.push(reply !== undefined);
          if (reply !== undefined) expect(reply).toBe(answerTo(message));
        }
        return outcomes;
      };
      await answers(0, 40);
      // Once nothing is late or lost any more, the dialogue finds its way back.
      clock.reach(free);
      expect((await answers(40, 60)).slice(-10)).not.toContain(false);
    }),
    { numRuns: 500 },
  );
});
