import { readdirSync, readFileSync } from 'node:fs';

/** The processes that watch over the run of that process. */
export function watchmenOf(pid: number | undefined): readonly number[] {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name) && watches(Number(name), pid))
    .map(Number);
}

/** Whether that process is there and watches over the run of the other. */
export function watches(process: number, pid: number | undefined): boolean {
  return commandOf(process).includes(`watchman-main.js\0${pid ?? 0}\0`);
}

/** Empty for one that has ended meanwhile. */
function commandOf(process: number): string {
  try {
    return readFileSync(`/proc/${process}/cmdline`, 'latin1');
  } catch {
    return '';
  }
}
