import { spawn, spawnSync } from 'node:child_process';
import { mkdtempSync } from 'node:fs';
import { join } from 'node:path';
import { type Ended, ended, program, root } from './railproof.js';

/** What may mount a file system of its own: root, and whoever may be root in a name space. */
const ways = [['-m'], ['-U', '-r', '-m']];
const mayMount = (way: readonly string[]): boolean =>
  spawnSync('unshare', [...way, 'mount', '-t', 'tmpfs', 'none', '/mnt']).status === 0;
const way = ways.find(mayMount);

/** Where nobody may mount anything this says so, and the tests are left out; a gate must not leave them out. */
export const noSmallDisks = way === undefined && process.env['CI'] === undefined;
if (way === undefined)
  process.stderr.write('no small disks: neither root nor a user name space may mount a tmpfs here\n');

/** Mounts, does it, keeps what is on the disk then, and ends with the status of what was done. */
const script = [
  'disk=$1 options=$2 kept=$3; shift 3',
  'mount -t tmpfs -o "$options" none "$disk" || exit 99',
  '"$@"; status=$?',
  'cp -R "$disk/." "$kept"; exit $status',
].join('\n');

/** The words of a shell that go before a command to whom the disk at `disk` may only be read; nobody else sees that disk. */
export function onLockedDisk(disk: string): string {
  return `unshare ${(way ?? []).join(' ')} sh -c 'mount -t tmpfs -o ro none "$0" && exec "$@"' '${disk}'`;
}

export interface OnSmallDisk extends Ended {
  /** A copy of all that was on the disk at the end. */
  readonly kept: string;
}

/**
 * A `railproof` whose disk at `disk` is a tmpfs with these options: so many bytes (`size`), so many files and
 * folders (`nr_inodes`, one of which is the disk itself). It is seen by that process alone and is gone with it.
 */
export async function onSmallDisk(
  folder: string,
  options: string,
  argsOn: (disk: string) => readonly string[],
): Promise<OnSmallDisk> {
  const disk = mkdtempSync(join(folder, 'disk-'));
  const kept = mkdtempSync(join(folder, 'kept-'));
  const command = [process.execPath, program, ...argsOn(disk)];
  const child = spawn(
    'unshare',
    [...(way ?? []), 'sh', '-c', script, 'sh', disk, options, kept, ...command],
    {
      cwd: root,
      stdio: ['ignore', 'pipe', 'pipe'],
      env: { ...process.env, NO_COLOR: '1' },
    },
  );
  return { ...(await ended(child)), kept };
}
