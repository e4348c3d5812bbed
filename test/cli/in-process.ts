import { PassThrough } from 'node:stream';
import { main } from '../../src/cli/program.js';
import type { Streams } from '../../src/cli/streams.js';

/** A command in this process, with streams of its own. */
export async function railproof(
  ...args: string[]
): Promise<{ status: number; stdout: string; stderr: string }> {
  const [stdin, stdout, stderr] = [0, 1, 2].map(
    () => new PassThrough({ encoding: 'utf8', highWaterMark: 1 << 24 }),
  );
  const streams = { stdin, stdout, stderr, environment: {} } as unknown as Streams;
  const status = await main(args, streams);
  return { status, stdout: String(stdout?.read() ?? ''), stderr: String(stderr?.read() ?? '') };
}
