import { alikeOnly, profilesOf } from '../arrangement/profiles.js';
import { selectModules } from '../arrangement/select-modules.js';
import { realClock } from '../clock/real-clock.js';
import type { ExitCode } from '../errors/railproof-error.js';
import { type BallastOptions, ballastWish, BuildUsageError, countOf } from './build-options.js';
import { checkShown, showBuild, type ShownAs } from './build-shown.js';
import { readDrawer } from './read-records.js';
import type { Streams } from './streams.js';

export interface SelectOptions extends BallastOptions, ShownAs {
  readonly group?: string;
  readonly stack?: string;
  readonly supplies?: string;
}

/** `railproof select`: which modules of a drawer of records go together best. */
export async function select(
  folders: readonly string[],
  options: SelectOptions,
  streams: Streams,
): Promise<ExitCode> {
  if (options.group === undefined && options.stack === undefined) {
    throw new BuildUsageError(
      'nothing says what is to be put together',
      'give --group 2 for pairs side by side, --stack 3 for stacks of three, or both for a stack of groups',
    );
  }
  const wish = {
    group: countOf('--group', options.group ?? '1'),
    stack: countOf('--stack', options.stack ?? '1'),
    supplies: countOf('--supplies', options.supplies ?? '1'),
    ...ballastWish(options),
  };
  await checkShown(options);
  const { records, unreadable } = readDrawer(folders);
  const { profiles, unfit } = alikeOnly(profilesOf(records, realClock.wall()));
  const unread = unreadable.map(({ run, why }) => ({
    module: run,
    why,
    advice: '`railproof analyse <run>` shows what a record holds',
  }));
  return showBuild(selectModules({ profiles, unfit: [...unfit, ...unread] }, wish), options, streams);
}
