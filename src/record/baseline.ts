import * as z from '../libraries/zod.js';
import { type Dimension, dimensions } from '../quantity/quantity.js';

const words = Object.keys(dimensions) as [Dimension, ...Dimension[]];

const text = (description: string) => z.string().describe(description);

/** A finding as it was made then; numbers in the unit of the dimension. */
const finding = z.object({
  name: text('What was found.'),
  value: z
    .union([z.number(), z.string()])
    .describe('A number in V, A, Ω, W, s, °C, K or V/h, a plain ratio, or a word.'),
  dimension: z.enum(words).nullable().describe('What the number measures; null for a word.'),
  standardUncertainty: z.number().nullable().describe('In the unit of the value; null where none is known.'),
  interval: z
    .tuple([z.number().describe('The lower end.'), z.number().describe('The upper end.')])
    .nullable()
    .describe('With 95 %; null where there is none.'),
  bound: z.literal('least').optional().describe('Where nothing showed that it is not more.'),
  note: text('What a reader must know besides.'),
});

const expected = z.union([
  z.object({
    kind: z.literal('within').describe('No further from what it was than the limit.'),
    limit: z
      .union([
        z.object({
          kind: z.literal('share').describe('A share of the earlier value.'),
          ratio: z.number().nonnegative().describe('0.2 for 20 %.'),
        }),
        z.object({
          kind: z.literal('absolute').describe('A difference.'),
          value: z.number().nonnegative().describe('In the unit of the finding.'),
        }),
      ])
      .describe('How far it may be.'),
  }),
  z.object({ kind: z.literal('same').describe('The word must be what it was.') }),
  z.object({
    kind: z.literal('becomes').describe('It must have become a word.'),
    word: text('That word.'),
  }),
]);

const toleranceEntry = z.object({
  finding: text('The name of a finding, or with a star at its end of all that begin so.'),
  expected: expected.describe('How it may change.'),
});

/**
 * What an earlier run found, and how far the findings of this one may be from it: all that is needed to
 * judge what changed, so that a record says so without the other at hand.
 */
export const baselineSchema = z.object({
  run: text("The name of the earlier record's folder."),
  began: text('When the earlier run began; ISO 8601, UTC.'),
  procedure: text('The procedure by which it was made.'),
  modules: z.array(z.string()).describe('The names of its modules.'),
  findings: z.array(finding).describe('What it found.'),
  tolerance: z
    .object({
      name: text('What it is called.'),
      title: text('After what the module is compared.'),
      findings: z.array(toleranceEntry).describe('What must have changed, and what must not.'),
    })
    .describe('How far the findings may be from those of then.'),
});

export type Baseline = Readonly<z.infer<typeof baselineSchema>>;

/** How one finding may change; its name may end in `*` and then stands for all that begin so. */
export type ToleranceEntry = Readonly<z.infer<typeof toleranceEntry>>;

export type Expected = Readonly<z.infer<typeof expected>>;
