import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { constants, existsSync } from 'node:fs';
import { type FileHandle, open } from 'node:fs/promises';
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

/**
 * Puts a loopback TCP port on a pseudo terminal at `link`, so that it can be opened as a serial port.
 * @throws CannotServeError with advice when socat is missing or fails.
 */
export async function serveOnPty(facts: { port: number; link: string; clock: Clock }): Promise<ServedPty> {
  const { port, link, clock } = facts;
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
    close: async () => {
      await held.close();
      await ended(socat);
    },
  };
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
  if (child.pid === undefined || child.exitCode !== null || child.signalCode !== null) return;
  const exit = once(child, 'exit');
  child.kill();
  await exit;
}
