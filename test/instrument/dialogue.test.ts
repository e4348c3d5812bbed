import { describe, expect, it, onTestFinished } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import type { Connection } from '../../src/instrument/connection.js';
import { Dialogue } from '../../src/instrument/dialogue.js';
import type { Notice } from '../../src/instrument/notice.js';
import { openSerial } from '../../src/instrument/serial-connection.js';
import { openTcp } from '../../src/instrument/tcp-connection.js';
import { servePty, withoutSocat } from './fixtures/serve-pty.js';
import { serveTcp } from './fixtures/serve-tcp.js';
import * as talkers from './fixtures/talkers.js';

const tcp = async (talker: talkers.Talker): Promise<Connection> => openTcp(await serveTcp(talker));
const serial = async (talker: talkers.Talker): Promise<Connection> => openSerial(await servePty(talker));

/** A busy machine must answer within it; `dialogue-pairing.test.ts` looks at times more closely, on virtual time. */
const timeout = 0.3;

describe.each([
  { line: 'TCP', connect: tcp, missing: false },
  { line: 'a serial port', connect: serial, missing: withoutSocat },
])('a dialogue over $line', ({ connect, missing }) => {
  async function talkTo(talker: talkers.Talker, replyEnd = '\n') {
    const connection = await connect(talker);
    onTestFinished(() => connection.close());
    const notices: Notice[] = [];
    const dialogue = new Dialogue({
      connection,
      wire: { sendEnd: '\n', replyEnd, gap: 0, timeout },
      clock: realClock,
      identify: '*IDN?',
      onNotice: (_, notice) => notices.push(notice),
    });
    const kinds = (): readonly string[] => notices.map(({ kind }) => kind);
    return { dialogue, notices, kinds };
  }

  it.skipIf(missing)(
    'answers each question with its own reply, also when they are asked all at once',
    async () => {
      const { dialogue, notices } = await talkTo(talkers.prompt());
      const replies = await Promise.all(
        ['*IDN?', 'MEAS:VOLT?', 'MEAS:CURR?', 'MEAS:VOLT?'].map((q) => dialogue.ask(q)),
      );
      expect(replies).toEqual([talkers.identity, '15.1', '4.0', '15.1']);
      expect(notices).toEqual([]);
    },
  );

  it.skipIf(missing)('takes CR LF where LF is due', async () => {
    const { dialogue } = await talkTo(talkers.prompt('\r\n'));
    expect(await dialogue.ask('MEAS:VOLT?')).toBe('15.1');
    expect(await dialogue.ask('MEAS:CURR?')).toBe('4.0');
  });

  it.skipIf(missing)('puts a reply together that comes a byte at a time', async () => {
    const { dialogue } = await talkTo(talkers.bitByBit);
    expect(await dialogue.ask('*IDN?')).toBe(talkers.identity);
    expect(await dialogue.ask('MEAS:CURR?')).toBe('4.0');
  });

  it.skipIf(missing)('throws away a reply that nobody asked for, and says so', async () => {
    const { dialogue, notices } = await talkTo(talkers.joined);
    expect(await dialogue.ask('MEAS:VOLT?')).toBe('15.1');
    expect(await dialogue.ask('MEAS:CURR?')).toBe('4.0');
    expect(notices).toEqual([{ kind: 'unasked-bytes', shown: '99.9\\n', size: 5 }]);
  });

  it.skipIf(missing)('says which question was not answered, and in what time', async () => {
    const { dialogue } = await talkTo(talkers.mute);
    const began = realClock.now();
    await expect(dialogue.ask('MEAS:VOLT?')).rejects.toMatchObject({
      code: 'INSTRUMENT_SILENT',
      question: 'MEAS:VOLT?',
      timeout,
      exitCode: 69,
    });
    expect(realClock.now() - began).toBeGreaterThan(timeout * 0.9);
    expect(realClock.now() - began).toBeLessThan(timeout * 30);
  });

  it.skipIf(missing)('gives up on getting in step with an instrument that stays silent', async () => {
    const { dialogue } = await talkTo(talkers.mute);
    await expect(dialogue.ask('MEAS:VOLT?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    await expect(dialogue.ask('MEAS:VOLT?')).rejects.toMatchObject({ code: 'OUT_OF_STEP', exitCode: 69 });
  });

  it.skipIf(missing)('never takes a late reply for the next answer', async () => {
    const { dialogue, kinds } = await talkTo(talkers.lateOnce('MEAS:VOLT?', timeout * 1500));
    await dialogue.ask('*IDN?');
    await expect(dialogue.ask('MEAS:VOLT?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    expect(await dialogue.ask('MEAS:CURR?')).toBe('4.0');
    expect(kinds()).toEqual(['out-of-step', 'late-reply', 'in-step-again']);
  });

  it.skipIf(missing)('never takes a late identity for the next answer', async () => {
    const { dialogue } = await talkTo(talkers.lateOnce('*IDN?', timeout * 1500));
    await expect(dialogue.ask('*IDN?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    expect(await dialogue.ask('MEAS:CURR?')).toBe('4.0');
    expect(await dialogue.ask('*IDN?')).toBe(talkers.identity);
    expect(await dialogue.ask('MEAS:VOLT?')).toBe('15.1');
  });

  it.skipIf(missing)('ends promptly with a megabyte that has no end, and recovers', async () => {
    const { dialogue } = await talkTo(talkers.endless);
    await dialogue.ask('*IDN?');
    await expect(dialogue.ask('MEAS:VOLT?')).rejects.toMatchObject({ code: 'REPLY_TOO_LONG', limit: 65536 });
    expect(await dialogue.ask('MEAS:CURR?')).toBe('4.0');
  });

  it.skipIf(missing)('says that the line is lost, also to the one who is waiting', async () => {
    const { dialogue } = await talkTo(talkers.dropping);
    expect(await dialogue.ask('MEAS:VOLT?')).toBe('15.1');
    await expect(dialogue.ask('MEAS:CURR?')).rejects.toMatchObject({ exitCode: 69 });
    await expect(dialogue.ask('MEAS:VOLT?')).rejects.toMatchObject({ code: 'CONNECTION_LOST', exitCode: 69 });
    await expect(dialogue.tell('INP OFF')).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
  });

  it.skipIf(missing)('hands garbage over as it came, one character a byte', async () => {
    const { dialogue } = await talkTo(talkers.garbage);
    expect(await dialogue.ask('MEAS:VOLT?')).toBe('\x00\xff\x1b[2J\x07');
  });

  it.skipIf(missing)('shows the reply that was begun and never ended', async () => {
    const { dialogue } = await talkTo(talkers.prompt(''));
    await expect(dialogue.ask('MEAS:VOLT?')).rejects.toMatchObject({
      code: 'INSTRUMENT_SILENT',
      begun: '15.1',
    });
  });

  it.skipIf(missing)('tells an instrument to be safe also while it is out of step', async () => {
    const heard: string[] = [];
    const { dialogue } = await talkTo((message) => heard.push(message));
    await expect(dialogue.ask('MEAS:VOLT?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    await dialogue.tell('INP OFF');
    await expect.poll(() => heard).toEqual(['MEAS:VOLT?', 'INP OFF']);
  });
});
