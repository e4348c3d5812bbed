import { amps } from '../analysis/in-words.js';
import { pastLimitOf } from './drawn-group.js';
import type { ModuleProfile } from './module-profile.js';

/** Whether a group must do without it once it was pushed past its limit. */
export function leavesGroup({ limitStyle }: Pick<ModuleProfile, 'limitStyle'>): boolean {
  return pastLimitOf(limitStyle?.word) === 'leaves';
}

/** What a module of a group does at its limit, after its name: `stays at …`. */
export function doesAtLimit({
  limitStyle,
  dropout,
  usable,
}: Pick<ModuleProfile, 'limitStyle' | 'dropout' | 'usable'>): string {
  const limit = amps((dropout ?? usable).value);
  switch (limitStyle?.word) {
    case 'constant-current':
      return `stays at its ${limit}, and what is more comes from the others`;
    case 'constant-power':
      return `gives little more than its ${limit} as the bus falls, and the rest of what is more comes from the others`;
    case 'foldback':
      return `folds back: the lower the bus, the less it gives, and the others take that over as well as what is more`;
    case 'hiccup':
      return `switches off and tries again and again: it leaves the group, and the others have to carry everything`;
    case 'latch-off':
      return `switches off until its input is cycled: it leaves the group for good, and the others have to carry everything`;
    case undefined:
      return `does what nobody has measured: reckon with it leaving, so that the others have to carry everything`;
  }
}
