import { dirname } from 'node:path';
import { type Bench, type BenchDrivers, type Post, postsOf } from '../files/bench.js';
import { driversOfChannels } from '../files/bench-channels.js';
import type { Driver } from '../files/driver.js';
import type { FileRead } from '../files/read-text.js';
import { readDriverAt } from './bench-driver.js';
import { shipped } from './shipped.js';

/** The driver of each post of a bench, the load's first. */
export type DriverFiles = readonly { readonly post: Post; readonly file: FileRead<Driver> }[];

/**
 * The drivers that a bench names, shipped or beside the bench file, each for the role and the channel it is given;
 * all of them, or those of some posts.
 * @throws BadFileError, NoDriverError, WrongRoleError
 */
export async function readBenchDrivers(
  bench: FileRead<Bench>,
  posts?: readonly Post[],
): Promise<DriverFiles> {
  return driversOfChannels(bench, await readNamedDrivers(bench, posts));
}

/**
 * The same as their files have them, whichever channel the bench names.
 * @throws BadFileError, NoDriverError, WrongRoleError
 */
export async function readNamedDrivers(
  bench: FileRead<Bench>,
  posts?: readonly Post[],
): Promise<DriverFiles> {
  const where = { relativeTo: dirname(bench.path), shipped: shipped.drivers };
  const files: DriverFiles[number][] = [];
  for (const [post, place] of postsOf(bench.value)) {
    if (posts?.includes(post) === false) continue;
    files.push({ post, file: await readDriverAt(bench, post, place.driver, where) });
  }
  return files;
}

/** What was read of them, without where it stood. */
export function planDrivers(files: DriverFiles): BenchDrivers {
  const at = (post: Post): Driver | undefined => files.find((one) => one.post === post)?.file.value;
  const load = at('load');
  if (load === undefined) throw new Error('a bench has a load');
  const highest = Math.max(0, ...files.map(({ post }) => Number(/^meter-(\d+)$/.exec(post)?.[1] ?? 0)));
  const places = Array.from({ length: highest }, (_, index) => at(`meter-${index + 1}`));
  return {
    load,
    meter: at('meter'),
    scanner: at('scanner'),
    thermometer: at('thermometer'),
    source: at('source'),
    ...(places.length === 0 ? {} : { places }),
  };
}
