import { closeSync, openSync } from 'node:fs';
import { isatty } from 'node:tty';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** What a command reads from and writes to; handed in, so that a test can look. */
export interface Streams {
  readonly stdin: NodeJS.ReadStream;
  readonly stdout: NodeJS.WriteStream;
  readonly stderr: NodeJS.WriteStream;
  readonly environment: NodeJS.ProcessEnv;
}

/** What was to be printed went nowhere: the disk behind stdout is full, say. */
export class OutputLostError extends RailproofError {
  readonly code = 'OUTPUT_LOST';
  readonly exitCode = exitCodes.inputOutput;

  constructor(cause: NodeJS.ErrnoException) {
    super(`the result could not be printed: ${cause.message}`, {
      advice: 'the record, where one was made, is whole: `railproof analyse` prints it again',
      cause,
    });
  }
}

/** A reader that goes away of its own will (`| head`, a closed terminal) has seen enough. */
const readerLeft: ReadonlySet<string | undefined> = new Set(['EPIPE', 'EIO', 'ERR_STREAM_DESTROYED']);

/**
 * The streams of this process, each opened when it is asked for, and what became of the output. A reader that goes
 * away must not end a run that is not yet safe.
 */
export function processStreams(): Streams & { readonly lost: () => Promise<OutputLostError | undefined> } {
  let lost: OutputLostError | undefined;
  const stdin = quietly(() => process.stdin);
  const stderr = quietly(() => process.stderr);
  const terminals = [0, 1, 2].filter((fd) => isatty(fd));
  process.once('exit', () => {
    letGoOfLost(terminals);
  });
  process.stdout.on('error', (error: NodeJS.ErrnoException) => {
    if (!readerLeft.has(error.code)) lost ??= new OutputLostError(error);
  });
  return {
    get stdin() {
      return stdin();
    },
    stdout: process.stdout,
    get stderr() {
      return stderr();
    },
    environment: process.env,
    lost: async () => {
      // Errors of a stream come a turn after the write.
      await new Promise((resolve) => setImmediate(resolve));
      return lost;
    },
  };
}

/** A stream whose errors are let pass from when it is first asked for: Node opens it then. */
function quietly<Stream extends NodeJS.EventEmitter>(open: () => Stream): () => Stream {
  let opened: Stream | undefined;
  return () => (opened ??= open().on('error', () => undefined));
}

/**
 * As it leaves, Node gives a terminal its settings back, and aborts where that terminal is gone: the exit status
 * would be lost. So whatever still points there is pointed nowhere first.
 */
function letGoOfLost(terminals: readonly number[]): void {
  for (const fd of terminals) {
    if (isatty(fd)) continue;
    closeSync(fd);
    // The lowest number that is free is the one that was just closed.
    openSync('/dev/null', 'r+');
  }
}
