import { execFileSync } from 'node:child_process';
import { mkdtemp, rm, truncate, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import type { Clock } from '../../src/clock/clock.js';
import { EventClock } from '../../src/clock/event-clock.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { dialogueHeader, dialogueLine } from '../../src/instrument/dialogue-record.js';
import { Dialogue } from '../../src/instrument/dialogue.js';
import type { Connection } from '../../src/instrument/connection.js';
import { tracedConnection } from '../../src/instrument/traced-connection.js';
import { replays } from '../../src/instrument/replay-connection.js';
import fc from '../property.js';
import { VirtualLine } from './fixtures/virtual-line.js';

async function fileOf(text: string): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'railproof-replay-'));
  onTestFinished(() => rm(folder, { recursive: true, force: true }));
  const file = join(folder, 'dialogue.jsonl');
  await writeFile(file, text);
  return file;
}

const replay = (file: string, clock = new VirtualClock(new Date(0))) =>
  replays(clock)({ kind: 'replay', file });
const header = dialogueHeader('tcp://127.0.0.1:5025');
const bytes = (text: string): Uint8Array => Buffer.from(text, 'latin1');

const recorded = `${header}{"t":0.1,"sent":"MEAS:VOLT?\\n"}
{"t":0.2,"received":"15"}
{"t":0.35,"received":".1\\n"}
{"t":2,"sent":"INP OFF\\n"}
`;

describe('a replayed dialogue', () => {
  it('answers as the instrument did, and takes as long on a clock of its own', async () => {
    const clock = new VirtualClock(new Date(0));
    const file = await fileOf(recorded);
    const connection = await replay(file, clock);
    expect(connection.address).toBe(`replay:${file}`);
    await connection.write(bytes('MEAS:VOLT?\n'));
    expect(await connection.receive(1)).toEqual(bytes('15'));
    expect(clock.now()).toBeCloseTo(0.1, 9);
    expect(await connection.receive(0.1)).toBeUndefined();
    expect(await connection.receive(0.1)).toEqual(bytes('.1\n'));
    expect(clock.now()).toBeCloseTo(0.25, 9);
    expect(await connection.receive(0)).toBeUndefined();
    await connection.write(bytes('INP OFF\n'));
    expect(await connection.receive(1)).toBeUndefined();
    await connection.close();
    await connection.close();
  });

  it('has each message as long on its way as it was then', async () => {
    const connection = await replay(
      await fileOf(
        `${header}{"t":0.1,"sent":"VOLT?\\n"}\n{"t":0.1,"out-in":0.0125}\n{"t":1,"sent":"INP?\\n"}\n`,
      ),
    );
    expect(await connection.write(bytes('VOLT?\n'))).toBe(0.0125);
    expect(await connection.write(bytes('INP?\n'))).toBe(0);
    await connection.close();
  });

  it.each([
    ['another message', ['MEAS:CURR?\n'], 2, '"MEAS:VOLT?\\n" sent'],
    ['a byte more', ['MEAS:VOLT?\r\n'], 2, '"MEAS:VOLT?\\n" sent'],
    ['a question too early', ['MEAS:VOLT?\n', 'INP OFF\n'], 3, '"15" received'],
  ])('refuses %s, and says where', async (_, messages, line, expected) => {
    const file = await fileOf(recorded);
    const connection = await replay(file);
    const said = async (): Promise<void> => {
      for (const message of messages) await connection.write(bytes(message));
    };
    await expect(said()).rejects.toMatchObject({
      code: 'REPLAY_MISMATCH',
      exitCode: 69,
      file,
      line,
      expected,
    });
    await connection.close();
  });

  it('goes on after a blank line, and counts it', async () => {
    const file = await fileOf(`${header}\n{"t":0,"sent":"*IDN?\\n"}\n \n\n{"t":0,"sent":"INP?\\n"}\n`);
    const connection = await replay(file);
    await connection.write(bytes('*IDN?\n'));
    await expect(connection.write(bytes('INP OFF\n'))).rejects.toMatchObject({
      message: `${file}:6: the recording has "INP?\\n" sent, and now "INP OFF\\n" was sent`,
    });
    await connection.close();
  });

  it('refuses to go on after its end', async () => {
    const file = await fileOf(header);
    const connection = await replay(file);
    await expect(connection.write(bytes('*IDN?\n'))).rejects.toMatchObject({
      message: `${file}:2: the recording has come to its end, and now "*IDN?\\n" was sent`,
    });
    await connection.close();
  });

  it.each([
    ['', 1],
    ['not JSON\n', 1],
    ['{"format":"railproof/dialogue 2","address":"x"}\n', 1],
    ['null\n', 1],
    [`${header}{"t":0,"sent":"*IDN?\\n"\n`, 2],
    [`${header}{"t":"0","sent":"*IDN?\\n"}\n`, 2],
    [`${header}{"t":0,"said":"*IDN?\\n"}\n`, 2],
    [`${header}{"t":0,"sent":"€"}\n`, 2],
    [`${header}{"t":0,"sent":"a","received":"b"}\n`, 2],
    [`${header}{"t":1e309,"sent":"*IDN?\\n"}\n`, 2],
  ])('that is not in the format is refused with its line: %j', async (text, line) => {
    const file = await fileOf(text);
    const opened = async (): Promise<void> => {
      const connection = await replay(file);
      await connection.write(bytes('*IDN?\n')).finally(() => connection.close());
    };
    await expect(opened()).rejects.toMatchObject({ code: 'DIALOGUE_FILE', exitCode: 65, file, line });
  });

  it.each(['/dev/zero', '/dev/null', '.'])('%s is refused: it is no file', async (path) => {
    await expect(replay(path)).rejects.toMatchObject({ code: 'DIALOGUE_FILE', exitCode: 65 });
  });

  it('a pipe that nobody writes to is refused, and a file of a size beyond reason', async () => {
    const pipe = `${await fileOf('')}.pipe`;
    execFileSync('mkfifo', [pipe]);
    await expect(replay(pipe)).rejects.toThrow(`${pipe}: it is no file`);
    const huge = await fileOf(header);
    await truncate(huge, 2 ** 30);
    await expect(replay(huge)).rejects.toMatchObject({ code: 'DIALOGUE_FILE', exitCode: 65 });
  });

  it('that is not there is a missing file', async () => {
    await expect(replay('no/such/dialogue.jsonl')).rejects.toMatchObject({
      code: 'DIALOGUE_FILE',
      exitCode: 66,
    });
  });

  it('brings every byte back as it was', async () => {
    const all = Uint8Array.from({ length: 256 }, (_, code) => code);
    const file = await fileOf(
      header +
        dialogueLine({ t: 0, kind: 'sent', bytes: all }) +
        dialogueLine({ t: 0, kind: 'received', bytes: all }),
    );
    const connection = await replay(file);
    await connection.write(all);
    expect(Buffer.from((await connection.receive(1)) ?? [])).toEqual(Buffer.from(all));
    await connection.close();
  });

  it('goes just as it went when it was recorded, with its silences, late replies and all', async () => {
    const delay = fc.oneof(
      fc.double({ min: 0, max: 0.9, noNaN: true }),
      fc.double({ min: 1.01, max: 4, noNaN: true }),
    );
    const questions = fc.array(fc.record({ delay, pause: fc.double({ min: 0, max: 2, noNaN: true }) }), {
      maxLength: 8,
    });
    await fc.assert(
      fc.asyncProperty(questions, async (timing) => {
        let free = 0;
        let index = 0;
        const clock = new VirtualClock(new Date(0));
        const line = new VirtualLine(clock, (message, at) => {
          free = Math.max(free, at) + (timing[index++]?.delay ?? 0);
          return [{ at: free, bytes: bytes(message === '*IDN?' ? 'NURSERY,LOAD\n' : `${message}\n`) }];
        });
        let text = header;
        const wire = { sendEnd: '\n', replyEnd: '\n', gap: 0.01, timeout: 1 };
        const outcomes = async (connection: Connection, clock: Clock): Promise<readonly unknown[]> => {
          const dialogue = new Dialogue({ connection, wire, clock, identify: '*IDN?' });
          const all: unknown[] = [];
          for (const [count, { pause }] of timing.entries()) {
            await clock.sleep(pause);
            const outcome = await dialogue
              .ask(count === 0 ? '*IDN?' : `Q${count}?`)
              .catch((error: unknown) => String(error));
            all.push([outcome.replace(/(virtual|replay):\S*/, 'there'), clock.now()]);
          }
          return all;
        };
        const time = new EventClock(clock);
        const traced = tracedConnection(line, time, (entry) => {
          text += dialogueLine(entry);
        });
        const then = await outcomes(traced, time);

        const folder = await mkdtemp(join(tmpdir(), 'railproof-replay-'));
        const file = join(folder, 'dialogue.jsonl');
        await writeFile(file, text);
        const again = new VirtualClock(new Date(0));
        const connection = await replay(file, again);
        const now = await outcomes(connection, again);
        await connection.close();
        await rm(folder, { recursive: true });
        expect(now).toEqual(then);
      }),
      { numRuns: 60 },
    );
  });
});
