/** What a command reads from and writes to; handed in, so that a test can look. */
export interface Streams {
  readonly stdin: NodeJS.ReadStream;
  readonly stdout: NodeJS.WriteStream;
  readonly stderr: NodeJS.WriteStream;
  readonly environment: NodeJS.ProcessEnv;
}

/** A reader that goes away (a closed terminal, `| head`) must not end a run that is not yet safe. */
export function processStreams(): Streams {
  for (const stream of [process.stdout, process.stderr]) stream.on('error', () => undefined);
  return { stdin: process.stdin, stdout: process.stdout, stderr: process.stderr, environment: process.env };
}
