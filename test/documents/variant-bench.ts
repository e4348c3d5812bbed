import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { railproof } from '../cli/in-process.js';

/** What is otherwise on a bench than on the nursery's; each text is there, and is replaced. */
export type Otherwise = Readonly<Record<string, string>>;

const printed = new Map<string, Promise<string>>();

/** Performs a procedure on the nursery bench with something otherwise, and gives all that is printed of it; once each. */
export function runOn(...wanted: Parameters<typeof perform>): Promise<string> {
  const key = JSON.stringify(wanted);
  const already = printed.get(key) ?? perform(...wanted);
  printed.set(key, already);
  return already;
}

async function perform(
  folder: string,
  procedure: string,
  otherwise: Otherwise,
  { bench = 'nursery', more = [] }: { readonly bench?: string; readonly more?: readonly string[] } = {},
): Promise<string> {
  const file = join(folder, `bench-${Math.random().toString(36).slice(2)}.yaml`);
  writeFileSync(file, changed(readFileSync(`fixtures/benches/${bench}.yaml`, 'utf8'), otherwise));
  const { stdout, stderr } = await railproof(
    ...['run', procedure, '--bench', file, '--module', 'fixtures/modules/K1.yaml'],
    ...['--runs', join(folder, 'runs'), ...more],
  );
  return stdout + stderr;
}

/** A text with some of it replaced. What is not there was meant to be. */
export function changed(text: string, otherwise: Otherwise): string {
  return Object.entries(otherwise).reduce((sofar, [from, to]) => {
    if (!sofar.includes(from)) throw new Error(`there is no "${from}" to be replaced`);
    return sofar.replace(from, to);
  }, text);
}

/** What goes wrong on a simulated bench, and when. */
export function fault(what: string, at: string): Otherwise {
  return { '  seed: 7\n': `  seed: 7\n  faults: [{ at: ${at}, what: ${what} }]\n` };
}
