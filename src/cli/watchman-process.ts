import { type ChildProcess, spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import type { Word } from '../bench/watchman-vigil.js';

/** As it is installed, whether this is the built program or its source. */
export const watchmanEntry = fileURLToPath(new URL('../../dist/cli/watchman-main.js', import.meta.url));

/** How long it may take, in milliseconds, to start on a busy machine; and to end once it is told to. */
const starting = 15_000;
const leaving = 5_000;

/** One process that watches. */
export interface WatchmanProcess {
  /** Gives it its order, a line. Settled when it is ready; rejects with why it never will be. */
  order(text: string): Promise<void>;
  say(word: Word): void;
  /** Settled, with how it ended, once it is gone. */
  readonly ended: Promise<string>;
  /** Tells it to go and waits until it is gone. Never rejects. */
  dismiss(): Promise<void>;
}

/**
 * Starts one in a session of its own, so that no Ctrl-C and no closing terminal reaches it; what it says goes
 * where our own words go, and outlives us. Options that we were given for Node are not handed on: some of them
 * may be what ends us.
 */
export function startWatchmanProcess(entry: string = watchmanEntry): WatchmanProcess {
  // Where a machine has no room for it, it comes without streams.
  const child: ChildProcess = spawn(process.execPath, [entry, String(process.pid)], {
    detached: true,
    stdio: ['pipe', 'pipe', 'inherit'],
    windowsHide: true,
    env: { ...process.env, NODE_OPTIONS: undefined },
  });
  child.stdin?.on('error', () => undefined);
  const ended = endOf(child);
  const write = (line: string): void => void child.stdin?.write(`${line}\n`);
  return {
    ended,
    async order(text) {
      write(text);
      await readiness(child, ended);
    },
    say: write,
    async dismiss() {
      child.stdin?.end('done\n');
      if (await within(leaving, ended)) return;
      child.kill('SIGKILL');
      await within(leaving, ended);
    },
  };
}

function endOf(child: ChildProcess): Promise<string> {
  return new Promise((resolve) => {
    child.once('error', (error) => {
      resolve(error.message);
    });
    child.once('exit', (status, signal) => {
      resolve(signal === null ? `it ended with status ${status ?? 'unknown'}` : `it was ended by ${signal}`);
    });
  });
}

async function readiness(child: ChildProcess, ended: Promise<string>): Promise<void> {
  const ready = new Promise<undefined>((resolve) => {
    child.stdout?.once('data', () => {
      resolve(undefined);
    });
  });
  const early = Promise.race([ready, ended]);
  if (!(await within(starting, early))) throw new Error(`it was not ready within ${starting / 1000} s`);
  const how = await early;
  if (how !== undefined) throw new Error(how);
}

/** Whether it came about in that time; the wait keeps this process alive. */
async function within(milliseconds: number, what: Promise<unknown>): Promise<boolean> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<boolean>((resolve) => {
    timer = setTimeout(resolve, milliseconds, false);
  });
  try {
    return await Promise.race([what.then(() => true), late]);
  } finally {
    clearTimeout(timer);
  }
}
