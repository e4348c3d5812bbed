import type { z } from 'zod';
import type { Dimension } from '../quantity/quantity.js';

/** What procedures may speak of. It is handed in, since the step kinds and findings live in other rooms. */
export interface Vocabulary {
  readonly stepKinds: readonly StepKindWord[];
  /** What each finding measures, or that it is a word. A name such as `share-of-*` stands for all that begin so. */
  readonly findings: Readonly<Record<string, Dimension | 'word'>>;
}

export interface StepKindWord {
  readonly kind: string;
  readonly parameters: z.ZodType;
}

/** What the finding measures, or undefined when there is none of that name; a whole family is none. */
export function findingDimension(name: string, vocabulary: Vocabulary): Dimension | 'word' | undefined {
  const { findings } = vocabulary;
  if (name.endsWith('*')) return undefined;
  if (Object.hasOwn(findings, name)) return findings[name];
  const family = Object.keys(findings).find(
    (each) => each.endsWith('*') && name.length >= each.length && name.startsWith(each.slice(0, -1)),
  );
  return family === undefined ? undefined : findings[family];
}

/** The same, where a family such as `share-of-*` may be meant as a whole. */
export function familyOrFindingDimension(
  name: string,
  vocabulary: Vocabulary,
): Dimension | 'word' | undefined {
  const { findings } = vocabulary;
  return Object.hasOwn(findings, name) ? findings[name] : findingDimension(name, vocabulary);
}
