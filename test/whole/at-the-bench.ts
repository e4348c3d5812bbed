import { once } from 'node:events';
import { readdirSync, readFileSync } from 'node:fs';
import { connect } from 'node:net';
import { join } from 'node:path';
import { parse } from 'yaml';

/** Asks the load itself, on a line of its own, as somebody at its front panel would look. */
export function askLoad(bench: string): Promise<string> {
  return ask(bench, 'load', 'INP?');
}

/** The same, of the source and its output. */
export function askSource(bench: string): Promise<string> {
  return ask(bench, 'source', 'OUTP?');
}

async function ask(bench: string, post: string, question: string): Promise<string> {
  const { instruments } = parse(readFileSync(bench, 'utf8')) as {
    readonly instruments: Readonly<Record<string, { readonly connection: string }>>;
  };
  const port = Number(instruments[post]?.connection.split(':').at(-1));
  const socket = connect(port, '127.0.0.1');
  socket.write(`${question}\n`);
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
