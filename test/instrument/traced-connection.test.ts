import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { createServer, type Socket } from 'node:net';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, it, onTestFinished } from 'vitest';
import { EventClock } from '../../src/clock/event-clock.js';
import { realClock } from '../../src/clock/real-clock.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import type { Clock } from '../../src/clock/clock.js';
import type { ReplayAddress } from '../../src/files/bench.js';
import { parseAddress } from '../../src/files/connection-address.js';
import { readDriver } from '../../src/files/read-driver.js';
import { connectorFor } from '../../src/instrument/connect.js';
import type { Connection } from '../../src/instrument/connection.js';
import { dialogueHeader, dialogueLine, type TraceEntry } from '../../src/instrument/dialogue-record.js';
import { replays } from '../../src/instrument/replay-connection.js';
import { openTcp } from '../../src/instrument/tcp-connection.js';
import { tracedConnect } from '../../src/instrument/traced-connection.js';

const bytes = (text: string): Uint8Array => Buffer.from(text, 'latin1');

/** What comes of each of these acts, and when it was over, in words. */
async function played(
  open: () => Promise<Connection>,
  clock: Clock,
  letAnswer: () => void = () => undefined,
): Promise<readonly string[]> {
  const seen: string[] = [];
  const note = async (act: () => Promise<unknown>): Promise<void> => {
    const came = await act().then(
      (value) => (value instanceof Uint8Array ? Buffer.from(value).toString('latin1') : 'nothing'),
      (error: unknown) => String(error).replace(/(tcp|replay):\S*/, 'there'),
    );
    seen.push(`${came} at ${clock.now()}`);
  };
  let line: Connection | undefined;
  const opened = async (): Promise<void> => {
    line = await open();
  };
  await note(opened);
  await note(async () => line?.receive(0));
  await note(async () => line?.write(bytes('late?\n')));
  await note(async () => line?.receive(0.05));
  // Too late for that, and before the next look.
  letAnswer();
  await clock.sleep(0.3);
  await note(async () => line?.receive(0));
  await note(async () => line?.receive(0));
  await note(async () => line?.write(bytes('hang up\n')));
  await note(async () => line?.receive(5));
  await note(async () => line?.receive(5));
  await note(async () => line?.write(bytes('again\n')));
  await line?.close();
  await note(async () => line?.receive(0));
  await note(opened);
  await note(async () => line?.write(bytes('late?\n')));
  await note(async () => line?.receive(5));
  await line?.close();
  await note(async () => line?.receive(5));
  await note(opened);
  return seen;
}

it('what is lost, late, silent, refused or found again comes again as it came, to the last digit', async () => {
  const server = createServer((socket) => {
    socket.on('error', () => undefined);
    socket.on('data', (heard) => {
      answer(socket, heard.toString());
    });
  });
  let answerLate: (() => void) | undefined;
  let answered = 0;
  const answer = (socket: Socket, heard: string): void => {
    if (heard === 'hang up\n') socket.end('bye\n');
    else if (answered++ === 0) answerLate = () => socket.write('now\n');
    else socket.write('now\n');
  };
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const address = parseAddress(`tcp://127.0.0.1:${(server.address() as AddressInfo).port}`);
  const { value: driver } = await readDriver('load-input-scpi', { relativeTo: '.', shipped: 'drivers' });
  const entries: TraceEntry[] = [];
  const time = new EventClock(realClock);
  const connect = tracedConnect(
    connectorFor({ tcp: (where) => openTcp(where) }),
    time,
    () => (entry) => void entries.push(entry),
  );
  let times = 0;
  const open = async (): Promise<Connection> => {
    // The third time nobody listens any more.
    if (times++ === 2) await new Promise((resolve) => server.close(resolve));
    return connect(address, driver, 'load');
  };
  const then = await played(open, time, () => answerLate?.());

  const folder = mkdtempSync(join(tmpdir(), 'railproof-traced-'));
  onTestFinished(() => {
    rmSync(folder, { recursive: true });
  });
  const recording: ReplayAddress = { kind: 'replay', file: join(folder, 'load.jsonl') };
  writeFileSync(recording.file, dialogueHeader('there') + entries.map(dialogueLine).join(''));
  const clock = new VirtualClock(new Date(0));
  const replay = replays(clock);
  const now = await played(() => replay(recording), clock);
  expect(now).toEqual(then);

  const words = then.map((line) => line.replace(/ at .*/, ''));
  const lost = 'ConnectionLostError: there connection lost: the other side hung up';
  expect(words).toEqual([
    ...['nothing', 'nothing', 'nothing', 'nothing', 'now\n', 'nothing', 'nothing', 'bye\n', lost, lost, lost],
    ...['nothing', 'nothing', 'now\n', 'ConnectionLostError: there connection lost: it was closed here'],
    'InstrumentUnreachableError: there the connection is refused: nothing listens on this port',
  ]);
  await expect(replay(recording)).rejects.toThrow('the recording holds no further connection here');
});
