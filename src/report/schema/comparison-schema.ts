import * as z from '../../libraries/zod.js';
import { comparisonFormat } from '../comparison-json.js';
import type { AsWritten } from './as-written.js';
import { endedKeys, integritySchema, outcomeOrNone, outcomeSchema, probability } from './ended-schemas.js';
import { bound, ends, unit } from './number-schemas.js';

const side = z.strictObject({
  run: z.string().describe("The name of the record's folder."),
  modules: z.array(z.string()).describe('The names of its modules, the lowest of a stack first.'),
  procedure: z.string().describe('The name of the procedure.'),
  began: z.string().describe('When the run began; ISO 8601, UTC.'),
  ...endedKeys,
  integrity: integritySchema,
});

const found = z
  .strictObject({
    value: z.union([z.number(), z.string()]).describe('A number in the unit beside it, or a word.'),
    unit: unit.nullable().describe('The unit, by its UCUM code; null where the finding is a word.'),
    standardUncertainty: z
      .number()
      .nullable()
      .describe('In the unit of the value; null where none is known.'),
    interval: ends
      .nullable()
      .describe('Lower and upper end with 95 %, in the unit of the value; null where there is none.'),
    bound,
    note: z.string().describe('What a reader must know besides; empty where there is nothing.'),
  })
  .meta({ id: 'found', description: 'A finding as one record has it.' });

const difference = z.strictObject({
  value: z.number().describe('Later less earlier.'),
  unit: unit.describe('The unit, by its UCUM code; that of a difference of temperatures is K.'),
  standardUncertainty: z.number().nullable().describe('Null where neither side has one.'),
  expandedUncertainty: z
    .number()
    .nullable()
    .describe('With 95 %: the root of the sum of both squared; null where neither side has one.'),
  coverage: z.literal(0.95).nullable().describe('Of the expanded uncertainty; null where there is none.'),
  share: z
    .number()
    .nullable()
    .describe('Of the earlier value, in %; null where that is not clearly other than nothing.'),
});

const expected = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('within').describe('No further than the tolerance beside it.') }),
  z.strictObject({ kind: z.literal('same').describe('The word must be what it was.') }),
  z.strictObject({
    kind: z.literal('becomes').describe('It must have become a word.'),
    word: z.string().describe('That word.'),
  }),
]);

const compared = z
  .strictObject({
    name: z.string().meta({ description: 'What was found.', examples: ['droop-resistance'] }),
    before: found.nullable().describe('As the earlier record has it; null where it has not.'),
    after: found.nullable().describe('As the later record has it; null where it has not.'),
    difference: difference.nullable().describe('Null where they are not both quantities of one kind.'),
    normalizedError: z
      .number()
      .nullable()
      .describe('E_n, the difference over its expanded uncertainty; null where there is none.'),
    expected: expected.nullable().describe('What was asked for; null where it may be anything.'),
    tolerance: z
      .strictObject({ value: z.number().describe('In the unit beside it.'), unit })
      .nullable()
      .describe('How far it may be from what it was; null where that was not asked for.'),
    verdict: z
      .enum([
        'unchanged-within-tolerance',
        'unchanged',
        'changed',
        'cannot-tell',
        'only-before',
        'only-after',
        'not-compared',
      ])
      .describe('What became of it.'),
    outcome: outcomeOrNone.describe('Whether it is as it should be.'),
    probability: probability.describe(
      'That the true difference is within the tolerance; null where there is nothing to compute it from.',
    ),
    note: z.string().describe('What a reader must know besides; empty where there is nothing.'),
  })
  .meta({ id: 'compared', description: 'A finding of either record, side by side.' });

/** `compare --json`. */
export const comparisonSchema = z
  .strictObject({
    format: z.literal(comparisonFormat).describe('The name of the format and its version.'),
    before: side.describe('The earlier record.'),
    after: side.describe('The later record.'),
    sameModules: z.boolean().describe('Whether both are of modules of the same names.'),
    tolerance: z
      .strictObject({
        name: z.string().describe('What it is called.'),
        title: z.string().describe('After what the module is compared.'),
      })
      .describe('By what they were compared.'),
    outcome: outcomeSchema.describe('Whether all is as it should be.'),
    findings: z.array(compared).describe('The findings of both records, side by side.'),
    inNeither: z.array(z.string()).describe('What was asked about and neither record has.'),
  })
  .meta({
    title: 'railproof compare',
    description: 'Two records side by side: what changed, what did not, and what can not be told.',
  });

export type ComparisonJson = AsWritten<typeof comparisonSchema>;
