import { z } from 'zod';
import { type Dimension, dimensions } from '../quantity/quantity.js';

const words = Object.keys(dimensions) as [Dimension, ...Dimension[]];

/** A finding as it was made then; numbers in the unit of the dimension. */
const finding = z.object({
  name: z.string(),
  value: z.union([z.number(), z.string()]),
  dimension: z.enum(words).nullable(),
  standardUncertainty: z.number().nullable(),
  interval: z.tuple([z.number(), z.number()]).nullable(),
  bound: z.literal('least').optional(),
  note: z.string(),
});

const expected = z.union([
  z.object({
    kind: z.literal('within'),
    limit: z.union([
      z.object({ kind: z.literal('share'), ratio: z.number().nonnegative() }),
      z.object({ kind: z.literal('absolute'), value: z.number().nonnegative() }),
    ]),
  }),
  z.object({ kind: z.literal('same') }),
  z.object({ kind: z.literal('becomes'), word: z.string() }),
]);

const toleranceEntry = z.object({ finding: z.string(), expected });

/**
 * What an earlier run found, and how far the findings of this one may be from it: all that is needed to
 * judge what changed, so that a record says so without the other at hand.
 */
export const baselineSchema = z.object({
  /** The name of the earlier record's folder. */
  run: z.string(),
  /** ISO 8601, UTC. */
  began: z.string(),
  procedure: z.string(),
  modules: z.array(z.string()),
  findings: z.array(finding),
  tolerance: z.object({ name: z.string(), title: z.string(), findings: z.array(toleranceEntry) }),
});

export type Baseline = Readonly<z.infer<typeof baselineSchema>>;

/** How one finding may change; its name may end in `*` and then stands for all that begin so. */
export type ToleranceEntry = Readonly<z.infer<typeof toleranceEntry>>;

export type Expected = Readonly<z.infer<typeof expected>>;
