import type { Runner } from '../bench/watchman.js';
import { type Word, words } from '../bench/watchman-vigil.js';

/** The line from the runner: its order, then a word a line. It ends when the runner does. */
export interface RunnerLine extends Runner {
  /** Undefined where it ended, or was done with us, without one: then nothing was ever switched on. */
  readonly order: Promise<string | undefined>;
}

/** `pid` is the runner's: it has started us, so it is our parent for as long as it lives. */
export function listenToRunner(stream: NodeJS.ReadableStream, pid: number): RunnerLine {
  const gone = new AbortController();
  let said: Word[] = [];
  let begun = '';
  const order = new Promise<string | undefined>((resolve) => {
    let ordered = false;
    stream.setEncoding('utf8').on('data', (text: string) => {
      const lines = (begun + text).split('\n');
      begun = lines.pop() ?? '';
      for (const line of lines) {
        if (ordered) said.push(...words.filter((word) => word === line));
        else resolve(line === 'done' ? undefined : line);
        ordered = true;
      }
    });
    for (const event of ['end', 'close', 'error']) {
      stream.on(event, () => {
        resolve(undefined);
        gone.abort();
      });
    }
  });
  return {
    order,
    gone: gone.signal,
    heard: () => {
      const heard = said;
      said = [];
      return heard;
    },
    end: () => {
      // A number is given to another process only once its own is gone, and then it is no parent of ours.
      if (process.ppid === pid) process.kill(pid, 'SIGKILL');
    },
  };
}
