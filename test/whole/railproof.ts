import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

export const root = fileURLToPath(new URL('../..', import.meta.url));
export const program = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url));

export interface Ended {
  readonly status: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

interface Options {
  readonly cwd?: string;
  /** Options of Node itself. */
  readonly node?: readonly string[];
  /** What starts Node, with its options, where that is another program. */
  readonly under?: readonly string[];
  /** Beside our own environment. */
  readonly env?: Readonly<Record<string, string>>;
}

/** A `railproof` in a process of its own, as a user has it; standard input is at its end. */
export function start(args: readonly string[], options: Options = {}): ChildProcess {
  const [command = '', ...rest] = [
    ...(options.under ?? []),
    ...[process.execPath, ...(options.node ?? []), program, ...args],
  ];
  return spawn(command, rest, {
    cwd: options.cwd ?? root,
    stdio: ['ignore', 'pipe', 'pipe'],
    env: { ...process.env, NO_COLOR: '1', ...options.env },
  });
}

export async function railproof(args: readonly string[], options: Options = {}): Promise<Ended> {
  return ended(start(args, options));
}

export async function ended(child: ChildProcess): Promise<Ended> {
  const stdout = collect(child.stdout);
  const stderr = collect(child.stderr);
  const [status] = (await once(child, 'close')) as [number | null];
  return { status, stdout: stdout(), stderr: stderr() };
}

function collect(stream: NodeJS.ReadableStream | null): () => string {
  let text = '';
  stream?.setEncoding('utf8').on('data', (more: string) => {
    text += more;
  });
  return () => text;
}
