import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { constants, existsSync } from 'node:fs';
import { type FileHandle, open } from 'node:fs/promises';
import { connect } from 'node:net';
import type { Clock } from '../clock/clock.js';
import type { Seconds } from '../quantity/quantity.js';
import { LOOPBACK } from './serve-tcp.js';
import { CannotServeError } from './simulation-errors.js';

/** socat makes the pty within some milliseconds; after this long something is wrong. */
const PATIENCE: Seconds = 5;
const LOOK_EVERY: Seconds = 0.02;
const MOST_COMPLAINT = 2000;

export interface ServedPty {
  close(): Promise<void>;
}

interface PtyPlace {
  readonly port: number;
  readonly link: string;
  readonly clock: Clock;
}

/**
 * Puts a loopback TCP port on a pseudo terminal at `link`, so that it can be opened as a serial port. While the
 * port is away, as that of an instrument that is lost, the pseudo terminal is away too.
 * @throws CannotServeError with advice when socat is missing or fails.
 */
export async function serveOnPty(place: PtyPlace): Promise<ServedPty> {
  const closing = new AbortController();
  let line = await openPty(place);
  const comeAndGo = async (): Promise<void> => {
    while (!closing.signal.aborted) {
      await exited(line.socat);
      await line.close();
      while (!(await listens(place.port))) await place.clock.sleep(LOOK_EVERY, closing.signal);
      closing.signal.throwIfAborted();
      line = await openPty(place);
    }
    await line.close();
  };
  // What can't be opened again stays away; being closed ends the waiting.
  const life = comeAndGo().catch(() => undefined);
  return {
    close: async () => {
      closing.abort();
      await line.close();
      await life;
    },
  };
}

interface OpenPty extends ServedPty {
  readonly socat: ChildProcess;
}

async function openPty({ port, link, clock }: PtyPlace): Promise<OpenPty> {
  const escaped = link.replace(/[\\,:!"'([{]/g, '\\$&');
  const socat = spawn('socat', ['-d', '-d', `pty,raw,echo=0,link=${escaped}`, `tcp:${LOOPBACK}:${port}`], {
    stdio: ['ignore', 'ignore', 'pipe'],
  });
  await standing(socat, link, clock);
  const held = await holdOpen(link).catch(async (cause: unknown) => {
    await ended(socat);
    throw cause;
  });
  return {
    socat,
    close: async () => {
      await held.close();
      await ended(socat);
    },
  };
}

function listens(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = connect({ host: LOOPBACK, port });
    const said = (yes: boolean) => (): void => {
      socket.destroy();
      resolve(yes);
    };
    socket.once('connect', said(true)).once('error', said(false));
  });
}

/** While somebody has it open, the pty outlives the programs that open and close it one after the other. */
function holdOpen(link: string): Promise<FileHandle> {
  return open(link, constants.O_RDWR | constants.O_NOCTTY | constants.O_NONBLOCK);
}

async function standing(socat: ChildProcess, link: string, clock: Clock): Promise<void> {
  const seen: { complaint: string; ended: boolean; failure?: NodeJS.ErrnoException } = {
    complaint: '',
    ended: false,
  };
  socat.stderr?.on('data', (text: Buffer) => {
    seen.complaint = (seen.complaint + text.toString()).slice(-MOST_COMPLAINT);
  });
  socat.once('error', (error) => {
    seen.failure = error;
    seen.ended = true;
  });
  socat.once('exit', () => {
    seen.ended = true;
  });
  const deadline = clock.now() + PATIENCE;
  while (!seen.ended && !existsSync(link) && clock.now() < deadline) await clock.sleep(LOOK_EVERY);
  if (!seen.ended && existsSync(link)) return;
  await ended(socat);
  const missing = seen.failure?.code === 'ENOENT';
  throw new CannotServeError({
    where: `serial:${link}`,
    reason: missing ? 'socat is not installed' : `socat made no pty: ${lastLine(seen.complaint)}`,
    advice: missing
      ? 'Install socat (apt install socat, or brew install socat), or serve on TCP without --pty.'
      : 'Is the folder there and writable, and is the name free?',
    cause: seen.failure,
  });
}

function lastLine(complaint: string): string {
  return complaint.trim().split('\n').at(-1) ?? '';
}

async function ended(child: ChildProcess): Promise<void> {
  const exit = exited(child);
  child.kill();
  await exit;
}

async function exited(child: ChildProcess): Promise<void> {
  if (child.pid === undefined || child.exitCode !== null || child.signalCode !== null) return;
  await once(child, 'exit');
}
