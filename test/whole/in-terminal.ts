import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { until } from './at-the-bench.js';
import { program, root } from './railproof.js';

export interface InTerminal {
  /** Of the program itself, not of its terminal. */
  readonly pid: number;
  /** Keys are pressed: `\x03` is Ctrl-C. */
  type(keys: string): void;
  /** All that came on the screen. */
  shown(): string;
  /** The window is drawn larger or smaller. */
  resize(columns: number, rows: number): Promise<void>;
  /** Settled when the terminal is closed, which it is when nobody has it any more. */
  readonly closed: Promise<unknown>;
}

interface Terminal {
  readonly columns?: number;
  /** A terminal that does not say how high it is has no room for what is redrawn. */
  readonly rows?: number;
  readonly environment?: NodeJS.ProcessEnv;
  /** Where the program is started; the root of the repository when left out. */
  readonly folder?: string;
  /** What starts it: words of a shell that go before its command. */
  readonly startedBy?: string;
}

/** A `railproof` on a terminal of its own, of 200 columns when nothing else is said: a pty of which socat holds the other end. */
export async function startInTerminal(
  args: readonly string[],
  file: string,
  { columns = 200, rows = 0, environment = {}, folder = root, startedBy = '' }: Terminal = {},
): Promise<InTerminal> {
  const command = [process.execPath, program, ...args].map((word) => `'${word}'`).join(' ');
  writeFileSync(
    file,
    `stty cols ${columns} rows ${rows}\ntty > '${file}.tty'\necho $$ > '${file}.pid'\nexec ${startedBy} ${command}\n`,
  );
  const terminal = spawn('socat', ['-', `EXEC:sh ${file},pty,setsid,ctty,stderr`], {
    cwd: folder,
    stdio: ['pipe', 'pipe', 'ignore'],
    // Where these tests are run by a machine the program is not.
    env: { ...process.env, CI: '', TERM: 'xterm', LC_ALL: 'C.UTF-8', NO_COLOR: '1', ...environment },
  });
  const closed = once(terminal, 'close');
  let seen = '';
  terminal.stdout.setEncoding('utf8').on('data', (more: string) => {
    seen += more;
  });
  const pidIn = (): string => (existsSync(`${file}.pid`) ? readFileSync(`${file}.pid`, 'utf8') : '');
  await until(() => pidIn().endsWith('\n'));
  return {
    pid: Number(pidIn()),
    type: (keys) => terminal.stdin.write(keys),
    shown: () => seen,
    resize: async (wide, high) => {
      const tty = readFileSync(`${file}.tty`, 'utf8').trim();
      await once(spawn('stty', ['-F', tty, 'cols', `${wide}`, 'rows', `${high}`]), 'exit');
    },
    closed,
  };
}
