import type { Guaranteed } from '../../arrangement/staged-build.js';

type SetBy = Guaranteed['setBy'];

/** What sets the current of a staged supply, as a sentence says it. */
export const setBy: Readonly<Record<SetBy, string>> = {
  module: 'the modules',
  ballast: 'the ballast',
  dissipation: 'the heat of the linear stage',
  'drop-out': 'the drop-out of the linear stage',
  'linear-stage': 'the current limit of the linear stage',
};

/** The same where there is little room, and where there is next to none. */
export const setByInShort: Readonly<Record<SetBy, { readonly word: string; readonly sign: string }>> = {
  module: { word: 'modules', sign: 'M' },
  ballast: { word: 'ballast', sign: 'B' },
  dissipation: { word: 'heat', sign: 'H' },
  'drop-out': { word: 'drop-out', sign: 'D' },
  'linear-stage': { word: 'current limit', sign: 'C' },
};
