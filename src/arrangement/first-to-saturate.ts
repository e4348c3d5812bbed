import { amps } from '../analysis/in-words.js';
import { listed } from '../quantity/listed.js';
import type { Extent, wayUp } from './group-draws.js';
import { doesAtLimit } from './limit-in-group.js';
import type { ModuleProfile } from './module-profile.js';
import type { ParallelBuild } from './parallel-build.js';
import { around } from './share-band.js';

/** Which module comes to its limit first, by how often it does in the draws, and what the group makes of it. */
export function firstToSaturate(
  profiles: readonly ModuleProfile[],
  extent: Extent,
  { end }: ReturnType<typeof wayUp>,
): ParallelBuild['firstToSaturate'] {
  const probability = Math.max(...extent.first);
  const index = probability > 0 ? extent.first.indexOf(probability) : 0;
  const first = profiles[index];
  const { median, low, high } = extent.firstLoad;
  const load = Math.max(low, Math.min(median, end.firstLoad));
  if (first === undefined || probability === 0) {
    return {
      module: profiles[0]?.name ?? '',
      load: around(load, extent.firstLoad),
      probability: 0,
      then: 'None of them comes to its limit: the ballasts take the voltage of the bus before that.',
    };
  }
  const others = listed(profiles.filter((profile) => profile !== first).map(({ name }) => name));
  const goesOn = end.end > end.firstLoad * (1 + noticeable);
  const then = goesOn
    ? `The group goes on to about ${amps(end.end)}`
    : `The group fails there: ${others} can't carry it`;
  const isSeen = end.first === index;
  return {
    module: first.name,
    load: { value: load, low, high },
    probability,
    then: `There ${first.name} ${doesAtLimit(first)}.${isSeen ? ` ${then}.` : ''}`,
  };
}

/** Less than that further is no further. */
const noticeable = 0.01;
