import { earthRelations } from '../circuit/earth-relation.js';
import { ofNameOrFamily } from '../quantity/name-family.js';
import type { Dimension } from '../quantity/quantity.js';

/** Every finding there can be, and what it measures. A name that ends in `*` stands for one per module. */
export const findingNames = {
  'open-circuit-voltage': 'voltage',
  'droop-resistance': 'resistance',
  'load-regulation': 'ratio',
  'lead-resistance': 'resistance',
  'limit-onset-current': 'current',
  'dropout-current': 'current',
  'limit-style': 'word',
  'short-circuit-current': 'current',
  'unsteady-above-current': 'current',
  'recovery-time': 'time',
  'usable-current': 'current',
  'recommended-current': 'current',
  'capacitor-life-ratio': 'ratio',
  'temperature-rise': 'temperature-difference',
  'thermal-time-constant': 'time',
  'thermal-drift': 'voltage-rate',
  'earth-resistance': 'resistance',
  'earth-relation': 'word',
  'earth-resistance-of-*': 'resistance',
  'earth-relation-of-*': 'word',
  imbalance: 'ratio',
  'hogging-module': 'word',
  'share-of-*': 'ratio',
  'ballast-of-*': 'resistance',
  'recommended-ballast': 'resistance',
  'group-current': 'current',
  'stack-voltage': 'voltage',
  'weakest-module': 'word',
  'float-voltage-of-*': 'voltage',
  /** Whatever the operator was asked for; one that is a quantity carries its own unit. */
  'answer-of-*': 'word',
} as const satisfies Record<string, Dimension | 'word'>;

/** What a finding that is a word can be, where that does not depend on how modules are called. */
export const findingWords: Readonly<Record<string, readonly string[]>> = {
  'limit-style': ['constant-current', 'foldback', 'constant-power', 'hiccup', 'latch-off'],
  'earth-relation': earthRelations,
  'earth-relation-of-*': earthRelations,
};

/** What a finding of that name measures; undefined for a name that is none of ours. */
export function dimensionOfFinding(name: string): Dimension | 'word' | undefined {
  return ofNameOrFamily<Dimension | 'word'>(name, findingNames);
}
