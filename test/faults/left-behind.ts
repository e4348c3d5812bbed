import { readdirSync, readFileSync } from 'node:fs';
import { realClock } from '../../src/clock/real-clock.js';

/** How long those who end with a run may take to end after it, in seconds. */
const patience = 5;
const lookEvery = 0.05;

/** The command lines of those that have `RAILPROOF_CELL=<mark>` in their environment and do not end. */
export async function leftBehind(mark: string): Promise<readonly string[]> {
  const deadline = realClock.now() + patience;
  for (;;) {
    const found = marked(mark);
    if (found.length === 0 || realClock.now() > deadline) return found;
    await realClock.sleep(lookEvery);
  }
}

function marked(mark: string): string[] {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name) && fileOf(name, 'environ').includes(`RAILPROOF_CELL=${mark}\0`))
    .map((name) => `${name}: ${fileOf(name, 'cmdline').replaceAll('\0', ' ')}`);
}

/** Empty for one that has ended meanwhile. */
function fileOf(process: string, name: string): string {
  try {
    return readFileSync(`/proc/${process}/${name}`, 'latin1');
  } catch {
    return '';
  }
}
