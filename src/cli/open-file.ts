import { type ChildProcess, spawn } from 'node:child_process';
import { resolve } from 'node:path';
import { messageOf } from '../errors/message-of.js';
import { printable } from '../quantity/printable.js';
import { say } from './say.js';
import type { Streams } from './streams.js';

/** What a system opens a file with, as a person's double click would; a path is an argument, never a text for a shell. */
const openers: Partial<Readonly<Record<NodeJS.Platform, readonly [program: string, ...before: string[]]>>> = {
  darwin: ['open'],
  win32: ['rundll32', 'url.dll,FileProtocolHandler'],
};
const elsewhere = ['xdg-open'] as const;

/** An opener that hands the file on ends at once; one that shows it itself goes on without us. */
const patience = 2000;

/**
 * Opens a file with whatever this system opens its kind with, and does not wait for it to be closed.
 * @returns why it could not be opened, in words; undefined where nothing is known to be wrong
 */
export async function openFile(path: string, environment: NodeJS.ProcessEnv): Promise<string | undefined> {
  const [program, ...before] = openers[process.platform] ?? elsewhere;
  let child: ChildProcess;
  try {
    child = spawn(program, [...before, resolve(path)], { detached: true, stdio: 'ignore', env: environment });
  } catch (error) {
    return `the page could not be opened: ${messageOf(error)}`;
  }
  return new Promise((done) => {
    const timer = setTimeout(() => {
      child.unref();
      done(undefined);
    }, patience);
    child.once('error', (error) => {
      clearTimeout(timer);
      done(`the page could not be opened: ${reason(error, program)}`);
    });
    child.once('exit', (status) => {
      clearTimeout(timer);
      done(status === 0 ? undefined : `the page could not be opened: ${program} gave up`);
    });
  });
}

/** Opens it, and says where it could not be. */
export async function showFile(
  path: string,
  { stderr, environment }: Pick<Streams, 'stderr' | 'environment'>,
): Promise<void> {
  const problem = await openFile(path, environment);
  if (problem !== undefined) say(stderr, `${printable(problem)}; open ${printable(path)} by hand.`);
}

function reason(error: Error, program: string): string {
  return (error as NodeJS.ErrnoException).code === 'ENOENT'
    ? `there is no ${program} here`
    : messageOf(error);
}
