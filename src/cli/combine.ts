import { buildParallel } from '../arrangement/build-parallel.js';
import { buildSeries } from '../arrangement/build-series.js';
import { profilesOf, requireAll } from '../arrangement/profiles.js';
import { realClock } from '../clock/real-clock.js';
import type { ExitCode } from '../errors/railproof-error.js';
import type { AnyBuild } from '../report/build/any-build.js';
import { type BallastOptions, ballastWish, BuildUsageError, loadOf } from './build-options.js';
import { checkShown, showBuild, type ShownAs } from './build-shown.js';
import { readRecords } from './read-records.js';
import type { Streams } from './streams.js';

export interface CombineOptions extends BallastOptions, ShownAs {
  readonly parallel?: boolean;
  readonly series?: boolean;
  readonly load?: string;
}

/** `railproof combine`: what modules come to side by side, or one upon the other, from their records. */
export async function combine(
  runs: readonly string[],
  options: CombineOptions,
  streams: Streams,
): Promise<ExitCode> {
  const build = wished(options);
  await checkShown(options);
  const profiles = requireAll(profilesOf(readRecords(runs), realClock.wall()));
  return showBuild(build(profiles), options, streams);
}

/** What is to be done with the modules, once they are known. @throws BuildUsageError */
function wished(options: CombineOptions): (profiles: ReturnType<typeof requireAll>) => AnyBuild {
  const { parallel = false, series = false } = options;
  if (parallel && series) {
    throw new BuildUsageError(
      '--parallel and --series are two things to build',
      'give one of them; a stack of groups is for `railproof select` and `railproof stages`',
    );
  }
  if (!parallel && !series) {
    throw new BuildUsageError(
      'nothing says how the modules are to be joined',
      'give --parallel (side by side) or --series (one upon the other, the lowest first)',
    );
  }
  const load = loadOf(options.load);
  if (parallel) {
    const wish = { ...ballastWish(options), load };
    return (profiles) => buildParallel(profiles, wish);
  }
  refuseBallast(options);
  return (profiles) => buildSeries(profiles, { load });
}

/** One upon the other they carry the same current whatever stands between them. */
function refuseBallast(options: CombineOptions): void {
  const { ballast, imbalance, resistorTolerance } = options;
  if ((ballast ?? imbalance ?? resistorTolerance) === undefined) return;
  throw new BuildUsageError(
    '--ballast, --imbalance and --resistor-tolerance go with --parallel: modules in series share nothing',
    'leave them out',
  );
}
