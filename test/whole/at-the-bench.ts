import { once } from 'node:events';
import { readdirSync, readFileSync } from 'node:fs';
import { connect } from 'node:net';
import { join } from 'node:path';

/** Asks the load itself, on a line of its own, as somebody at its front panel would look. */
export async function askLoad(bench: string): Promise<string> {
  const port = Number(/load:.*tcp:\/\/127\.0\.0\.1:(\d+)/.exec(readFileSync(bench, 'utf8'))?.[1]);
  const socket = connect(port, '127.0.0.1');
  socket.write('INP?\n');
  const [reply] = (await once(socket, 'data')) as [Buffer];
  socket.destroy();
  return reply.toString().trim();
}

/** What the one run in a folder has written so far. */
export function journalOf(runs: string): string {
  try {
    return readFileSync(join(runs, readdirSync(runs)[0] ?? '', 'journal.jsonl'), 'utf8');
  } catch {
    return '';
  }
}

/** Looks again and again, and waits as long as a test may take. */
export async function until(so: () => boolean | Promise<boolean>, every = 20): Promise<void> {
  while (!(await so())) await new Promise((resolve) => setTimeout(resolve, every));
}
