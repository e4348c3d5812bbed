import { describe, expect, it } from 'vitest';
import { EventClock } from '../../src/clock/event-clock.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { dialogueLine, readDialogueLine, type TraceEntry } from '../../src/instrument/dialogue-record.js';
import { dialogueLineSchema } from '../../src/instrument/dialogue-schema.js';
import { Dialogue } from '../../src/instrument/dialogue.js';
import { tracedConnection } from '../../src/instrument/traced-connection.js';
import { type Arrival, VirtualLine } from './fixtures/virtual-line.js';

const timeout = 1;
/** Ten bits at 600 baud. */
const perByte = 1 / 60;

interface Manner {
  /** How long after it was written a question is answered. */
  readonly answersIn: number;
  readonly gap?: number;
}

/** A dialogue over a port that takes a message at once and sends it byte by byte, and when it was given each. */
function overSlowPort({ answersIn, gap = 0 }: Manner) {
  const clock = new VirtualClock(new Date(0));
  const taken: [message: string, at: number][] = [];
  const line = new VirtualLine(
    clock,
    (message, at): readonly Arrival[] => {
      taken.push([message, Number(at.toFixed(9))]);
      return message.endsWith('?') ? [{ at: at + answersIn, bytes: Buffer.from('15.1\n') }] : [];
    },
    perByte,
  );
  const time = new EventClock(clock);
  const trace: TraceEntry[] = [];
  const connection = tracedConnection(line, time, (entry) => trace.push(entry));
  const wire = { sendEnd: '\n', replyEnd: '\n', gap, timeout };
  const dialogue = new Dialogue({ connection, wire, clock: time, identify: '*IDN?' });
  return { dialogue, taken, trace };
}

describe('over a port that takes bytes faster than it sends them', () => {
  it('the gap between messages counts from when a message is out', async () => {
    const { dialogue, taken } = overSlowPort({ answersIn: 0, gap: 0.05 });
    await dialogue.tell('INP OFF');
    await dialogue.tell('CURR 0');
    expect(taken).toEqual([
      ['INP OFF', 0],
      ['CURR 0', Number((8 * perByte + 0.05).toFixed(9))],
    ]);
  });

  it('the instrument is given its rest from when it has heard', async () => {
    const { dialogue, taken } = overSlowPort({ answersIn: 0 });
    await dialogue.tell('INP OFF', 0.3);
    await dialogue.tell('CURR 0');
    expect(taken[1]?.[1]).toBeCloseTo(8 * perByte + 0.3, 9);
  });

  it('an answer may take the whole timeout once its question is out', async () => {
    const inTime = overSlowPort({ answersIn: 6 * perByte + timeout - 0.01 });
    expect(await inTime.dialogue.ask('VOLT?')).toBe('15.1');
    const late = overSlowPort({ answersIn: 6 * perByte + timeout + 0.01 });
    await expect(late.dialogue.ask('VOLT?')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
  });

  it('a question that is answered sooner than its bytes can be out is not waited for', async () => {
    const { dialogue, taken } = overSlowPort({ answersIn: 0.001 });
    await dialogue.ask('VOLT?');
    await dialogue.ask('CURR?', { rest: 0.02 });
    await dialogue.ask('VOLT?');
    expect(taken.map(([, at]) => at)).toEqual([0, 0.001, 0.022]);
  });

  it('a recording tells how long each message was on its way', async () => {
    const { dialogue, trace } = overSlowPort({ answersIn: 0.2 });
    await dialogue.ask('VOLT?');
    expect(trace.map(({ kind }) => kind)).toEqual(['opened', 'sent', 'out-in', 'received']);
    expect(trace[2]).toEqual({ t: 0, kind: 'out-in', seconds: 6 * perByte });
    const lines = trace.map((entry) => dialogueLine(entry).trimEnd());
    expect(lines.map(readDialogueLine)).toEqual(trace);
    for (const line of lines) expect(dialogueLineSchema.safeParse(JSON.parse(line)).success).toBe(true);
  });
});
