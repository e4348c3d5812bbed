/** What a command reads from and writes to; handed in, so that a test can look. */
export interface Streams {
  readonly stdin: NodeJS.ReadStream;
  readonly stdout: NodeJS.WriteStream;
  readonly stderr: NodeJS.WriteStream;
  readonly environment: NodeJS.ProcessEnv;
}

export function processStreams(): Streams {
  return { stdin: process.stdin, stdout: process.stdout, stderr: process.stderr, environment: process.env };
}
