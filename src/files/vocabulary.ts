import type * as z from '../libraries/zod.js';
import { ofNameOrFamily } from '../quantity/name-family.js';
import { didYouMean } from '../quantity/nearest.js';
import type { Dimension } from '../quantity/quantity.js';
import { shown } from '../quantity/shown-text.js';
import { namePattern } from './name-pattern.js';
import { found } from './plain-words.js';

/** What procedures may speak of. It is handed in, since the step kinds and findings live in other rooms. */
export interface Vocabulary extends FindingWords {
  readonly stepKinds: readonly StepKindWord[];
}

/** What tolerances may speak of. */
export interface FindingWords {
  /** What each finding measures, or that it is a word. A name such as `share-of-*` stands for all that begin so. */
  readonly findings: Readonly<Record<string, Dimension | 'word'>>;
  /** What a finding that is a word can be, where that is known beforehand; by its name, or its family's. */
  readonly words: Readonly<Record<string, readonly string[]>>;
}

export interface StepKindWord {
  readonly kind: string;
  /** What it does, in a few words. */
  readonly summary: string;
  readonly parameters: z.ZodType;
}

/** What the finding measures, or undefined when there is none of that name; a whole family is none. */
export function findingDimension(name: string, vocabulary: FindingWords): Dimension | 'word' | undefined {
  return name.endsWith('*') ? undefined : ofNameOrFamily(name, vocabulary.findings);
}

/** The same, where a family such as `share-of-*` may be meant as a whole. */
export function familyOrFindingDimension(
  name: string,
  vocabulary: FindingWords,
): Dimension | 'word' | undefined {
  const { findings } = vocabulary;
  return Object.hasOwn(findings, name) ? findings[name] : findingDimension(name, vocabulary);
}

/**
 * The word a finding is required to be, or what is wrong with it: it is none, or one that this finding can
 * never be.
 */
export function readWord(
  value: unknown,
  finding: string,
  { words }: FindingWords,
): { readonly word: string } | { readonly problem: string } {
  if (typeof value !== 'string' || !namePattern.test(value))
    return { problem: `${found(value)}; a word is needed` };
  const known = ofNameOrFamily(finding, words);
  if (known === undefined || known.includes(value)) return { word: value };
  const hint = didYouMean(value, known) || `; it can be ${known.join(', ')}`;
  return { problem: `${finding} is never ${shown(value)}${hint}` };
}
