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
  /** Settled when the terminal is closed, which it is when nobody has it any more. */
  readonly closed: Promise<unknown>;
}

/** A `railproof` on a terminal of its own: a pty of 200 columns, of which socat holds the other end. */
export async function startInTerminal(args: readonly string[], file: string): Promise<InTerminal> {
  const command = [process.execPath, program, ...args].map((word) => `'${word}'`).join(' ');
  writeFileSync(file, `stty cols 200\necho $$ > '${file}.pid'\nexec ${command}\n`);
  const terminal = spawn('socat', ['-', `EXEC:sh ${file},pty,setsid,ctty,stderr`], {
    cwd: root,
    stdio: ['pipe', 'pipe', 'ignore'],
    env: { ...process.env, NO_COLOR: '1' },
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
    closed,
  };
}
