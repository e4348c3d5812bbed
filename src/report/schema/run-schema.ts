import * as z from '../../libraries/zod.js';
import { watchmanReportSchema } from '../../record/read-watchman-report.js';
import { resultFormat } from '../json.js';
import type { AsWritten } from './as-written.js';
import { endedKeys, integritySchema, outcomeOrNone, outcomeSchema, probability } from './ended-schemas.js';
import { bound, coverage, ends, unit } from './number-schemas.js';

const contribution = z
  .strictObject({
    name: z.string().describe('What is uncertain.'),
    type: z
      .enum(['A', 'B'])
      .describe('A: from the scatter of readings; B: from anything else (JCGM 100:2008, 4.2 and 4.3).'),
    uncertainty: z
      .number()
      .describe('Standard uncertainty, multiplied by the sensitivity: in the unit of the finding.'),
    degreesOfFreedom: z
      .number()
      .positive()
      .nullable()
      .describe('null says that the value is taken as known.'),
  })
  .meta({ id: 'contribution', description: 'A line of an uncertainty budget.' });

const factor = z
  .strictObject({
    name: z.string().describe('What reduces the current.'),
    factor: z.number().describe('By which it is multiplied; 0.8 for 80 %.'),
    reason: z.string().describe('Why.'),
  })
  .meta({ id: 'factor', description: 'A step from what is usable to what is recommended.' });

const finding = z
  .strictObject({
    name: z.string().meta({
      description: 'What was found.',
      examples: ['droop-resistance', 'share-of-K1'],
    }),
    value: z.union([z.number(), z.string()]).describe('A number in the unit beside it, or a word.'),
    unit: unit.nullable().describe('The unit, by its UCUM code; null where the finding is a word.'),
    standardUncertainty: z
      .number()
      .nullable()
      .describe('In the unit of the value; null where none is known.'),
    bound,
    interval: ends.nullable().describe('Lower and upper end, in the unit of the value.'),
    coverage,
    step: z
      .int()
      .positive()
      .nullable()
      .describe('The step whose readings it rests on, counted from 1; null where it rests on several.'),
    note: z.string().describe('What a reader must know besides; empty where there is nothing.'),
    budget: z.array(contribution).describe('What its uncertainty is made of.'),
    factors: z.array(factor).describe('How a recommendation was worked out; empty for other findings.'),
  })
  .meta({ id: 'finding', description: 'A named result with its unit and uncertainty.' });

const decision = z
  .strictObject({
    finding: z.string().describe('The name of the finding that is judged.'),
    requirement: z.string().meta({
      description: 'What is required, as a person reads it.',
      examples: ['at least 4 A (100 % of rated-current)'],
    }),
    outcome: outcomeSchema.describe('Whether it is met, guarded by the expanded uncertainty (JCGM 106).'),
    probability: probability.describe(
      'That the true value meets it; null where there is nothing to compute it from.',
    ),
    note: z.string().describe('What a reader must know besides; empty where there is nothing.'),
  })
  .meta({ id: 'decision', description: 'Whether a requirement is met.' });

const takenOver = z.strictObject({
  run: z.string().describe('The name of the earlier record.'),
  began: z.string().describe('When that run began; ISO 8601, UTC.'),
  firstStep: z.int().positive().describe('The first step that comes from it, counted from 1.'),
  lastStep: z.int().positive().describe('The last one.'),
});

const watchman = watchmanReportSchema.omit({ format: true }).strict();

/** `run --json`, `analyse --json`, and findings.json. */
export const runSchema = z
  .strictObject({
    format: z.literal(resultFormat).describe('The name of the format and its version.'),
    run: z.string().describe("The name of the record's folder."),
    module: z.string().meta({
      description: 'What was tested; of several modules their names joined.',
      examples: ['K1', 'K1+K2'],
    }),
    circuit: z
      .enum(['parallel', 'series'])
      .exactOptional()
      .describe('How several modules were wired; left out for a single one.'),
    modules: z
      .array(z.string())
      .exactOptional()
      .describe('Their names, the lowest of a stack first; left out for a single one.'),
    procedure: z.string().describe('The name of the procedure.'),
    baseline: z
      .strictObject({
        run: z.string().describe('The name of the earlier record.'),
        modules: z.array(z.string()).describe('The names of its modules.'),
        tolerance: z.string().describe('The name of the tolerance.'),
      })
      .exactOptional()
      .describe('The earlier run that this one is judged against; left out where there is none.'),
    takenOver: z
      .array(takenOver)
      .exactOptional()
      .describe('Which steps were measured in earlier runs; left out where none was.'),
    ...endedKeys,
    outcome: outcomeOrNone.describe('The worst of all decisions; "not-judged" where nothing is required.'),
    integrity: integritySchema,
    watchman: watchman
      .exactOptional()
      .describe(
        'What the watchman did when the program was gone or hung; left out where it did not have to.',
      ),
    readings: z.int().nonnegative().describe('How many readings the record holds.'),
    findings: z.array(finding).describe('What was found.'),
    decisions: z.array(decision).describe('What was required, and whether it is met.'),
  })
  .meta({
    title: 'railproof run',
    description: 'What a run came to: findings with their uncertainties, and the decisions on them.',
  });

export type RunJson = AsWritten<typeof runSchema>;
