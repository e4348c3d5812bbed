import { buildStages } from '../arrangement/build-stages.js';
import { profilesOf, requireAll } from '../arrangement/profiles.js';
import { realClock } from '../clock/real-clock.js';
import type { ExitCode } from '../errors/railproof-error.js';
import { readStages } from '../files/read-stages.js';
import { checkShown, showBuild, type ShownAs } from './build-shown.js';
import { recordsOf } from './stage-records.js';
import type { Streams } from './streams.js';

/** `railproof stages`: a supply whose modules are joined otherwise as its output rises. */
export async function stages(path: string, options: ShownAs, streams: Streams): Promise<ExitCode> {
  await checkShown(options);
  const { modules, wish } = (await readStages(path)).value;
  const profiles = requireAll(profilesOf(recordsOf(modules), realClock.wall()));
  return showBuild(buildStages(profiles, wish), options, streams);
}
