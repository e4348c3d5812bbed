import * as z from '../../libraries/zod.js';
import type { AsWritten } from './as-written.js';
import { bound, intervalKeys, unit, valueSchema } from './number-schemas.js';

const text = (description: string) => z.string().describe(description);
export const sentences = (description: string) => z.array(z.string()).describe(description);
export const moduleNames = (description: string) => z.array(z.string()).describe(description);

const concern = z
  .strictObject({
    kind: z
      .enum([
        'old',
        'dated-ahead',
        'changed-since',
        'coarse',
        'cut-off',
        'limit-unknown',
        'style-unknown',
        'not-warmed',
        'isolation-unknown',
        'not-accepted',
        'described-otherwise',
        'of-little-use',
        'simulated',
      ])
      .describe('What it is about.'),
    module: text('The module it concerns.'),
    record: z.string().nullable().describe('The record it concerns; null where it is no one record.'),
    weight: z
      .enum(['hinders', 'weakens'])
      .describe('"hinders": nothing can be decided on it; "weakens": to be known and weighed.'),
    text: text('What it is and what to do about it; reads after the name of the module.'),
  })
  .meta({ id: 'concern', description: 'Something about the records that a builder must know.' });

const part = z
  .strictObject({
    marks: z.array(z.string()).meta({ description: 'As in the diagram.', examples: [['R1', 'R2']] }),
    what: text('What it is.'),
    ratings: z.array(z.string()).meta({
      description: 'What it must bear, a few words each.',
      examples: [['at least 3 W']],
    }),
    why: text('Why it is there and what its ratings rest on.'),
  })
  .meta({ id: 'part', description: 'A line of the parts list.' });

const source = z
  .strictObject({
    record: text("The name of the record's folder."),
    procedure: text('The procedure by which it was made.'),
    began: text('When that run began; ISO 8601, UTC.'),
    state: z.enum(['whole', 'stopped', 'cut-off']).describe('How that record ended.'),
    simulated: z.boolean().describe('Whether the bench was a simulated one: for practice only.'),
  })
  .meta({ id: 'source', description: 'The record that something was taken from.' });

const contribution = z
  .strictObject({
    name: text('What is uncertain.'),
    type: z
      .enum(['A', 'B'])
      .describe('A: from the scatter of readings; B: from anything else (JCGM 100:2008, 4.2 and 4.3).'),
    uncertainty: z.number().nullable().describe('Standard uncertainty, in the unit of the value.'),
    degreesOfFreedom: z
      .number()
      .positive()
      .nullable()
      .describe('null says that the value is taken as known.'),
    shared: z
      .string()
      .nullable()
      .describe('Two lines with the same text here are one and the same error; null where it is of its own.'),
  })
  .meta({ id: 'contribution', description: 'A line of an uncertainty budget.' });

const taken = valueSchema
  .extend({
    bound,
    ...intervalKeys,
    note: text('What a reader must know besides; empty where there is nothing.'),
    budget: z.array(contribution).describe('What its uncertainty is made of.'),
    from: source.describe('The record it was taken from.'),
  })
  .meta({ id: 'taken', description: 'A measured number taken over from a record.' });

const word = z
  .strictObject({
    value: text('The word.'),
    unit: z.null().describe('A word has none.'),
    from: source.describe('The record it was taken from.'),
  })
  .meta({ id: 'word', description: 'A finding that is a word, taken over from a record.' });

const module = z
  .strictObject({
    name: text('What the module is called.'),
    description: text('What its file says of it.'),
    nameplate: z
      .strictObject({
        voltage: valueSchema.describe('The rated voltage.'),
        current: valueSchema.describe('The rated current.'),
      })
      .describe('What the label says.'),
    protectionClass: z.enum(['I', 'II']).describe('IEC 61140: I has an earthed plug, II has not.'),
    outputIsolation: valueSchema
      .nullable()
      .describe('What its output withstands to earth; null where nobody knows.'),
    openCircuitVoltage: taken.describe('Its voltage without a load.'),
    droopResistance: taken.describe('The slope of its voltage in regulation.'),
    usableCurrent: taken.describe('The most that it gives within its sag, steadily.'),
    recommendedCurrent: valueSchema
      .extend({
        note: text('What it follows from.'),
        from: source.describe('The record that recommends it.'),
      })
      .describe('For continuous use; the lowest that any of its records recommends.'),
    dropoutCurrent: taken.nullable().describe('Where it drops out; null where no record went so far.'),
    shortCircuitCurrent: taken.nullable().describe('Into a short; null where no record measured it.'),
    limitStyle: word
      .nullable()
      .describe('What it does past its limit; null where it was not measured or could not be told.'),
    earthRelation: word
      .nullable()
      .describe('How its output stands to earth; null where no record measured it.'),
  })
  .meta({ id: 'module', description: 'What the records say of one module.' });

/** What every build has, however its modules are joined. */
export const commonSchema = z.strictObject({
  outcome: z
    .enum(['may-be-built', 'too-little', 'must-not-be-built', 'cannot-tell'])
    .describe(
      'What it all comes to; "too-little" where it might be built, and is recommended for less than the load asked for.',
    ),
  standing: z
    .strictObject({
      kind: z.enum(['may-be-built', 'must-not-be-built', 'cannot-tell']).describe('Whether it may be built.'),
      because: sentences('Why not, or why it can not be told, a sentence each.'),
    })
    .describe('Whether it may be built, and why not.'),
  concerns: z.array(concern).describe('What must be known about the records.'),
  cautions: sentences('What must be minded, a sentence each.'),
  parts: z.array(part).describe('The parts list; empty where it must not be built.'),
  modules: z.array(module).describe('The modules; of a stack the lowest first.'),
});

const moduleForm = z.strictObject({
  kind: z.literal('module').describe('A single module.'),
  name: text('What it is called.'),
});

const joinedForm = z.strictObject({
  kind: z.enum(['group', 'stack']).describe('Side by side, or one upon the other.'),
  get of(): z.ZodArray<z.ZodUnion<readonly [typeof moduleForm, typeof joinedForm]>> {
    return z.array(formSchema).describe('What is joined; of a stack the lowest first.');
  },
});

export const formSchema = z
  .union([moduleForm, joinedForm])
  .meta({ id: 'form', description: 'How modules are joined: side by side, or one upon the other.' });

export const circuitSchema = z
  .strictObject({
    form: formSchema,
    ballast: z
      .strictObject({
        resistance: valueSchema.describe('Of each.'),
        tolerance: valueSchema.describe('How far off each may be, half-width.'),
      })
      .nullable()
      .describe('In series with the output of each module; null for none.'),
    reverseDiodes: z.boolean().describe('Whether one stands across the output of each module.'),
    orDiodes: z.boolean().describe('Whether one stands in series with the output of each module.'),
  })
  .meta({
    id: 'circuit',
    description: 'What is drawn: how modules are joined, and what stands beside each.',
  });

export const recommendationSchema = valueSchema
  .extend({ setBy: text('What sets it, in a few words.') })
  .meta({ id: 'recommendation', description: 'What it may feed continuously.' });

export const resistorSchema = z.strictObject({
  resistance: valueSchema.describe('Of each.'),
  tolerance: valueSchema.describe('How far off each may be, half-width.'),
  dissipation: valueSchema.describe('The most that it turns into heat in use.'),
  dissipationAtLimit: valueSchema.describe('The same with its module at its limit.'),
  rating: valueSchema
    .nullable()
    .describe('What to buy, reserve included; null where no usual resistor does.'),
  voltageCost: valueSchema.describe('The voltage across it at full load.'),
});

export const loadSchema = z
  .strictObject({
    value: z.number().nullable().describe('In the unit beside it.'),
    unit,
    from: z.enum(['asked-for', 'recommended']).describe('Whether somebody asked for it.'),
  })
  .describe('The load at which it was worked out.');

export type Common = AsWritten<typeof commonSchema>;
export type PartWritten = Common['parts'][number];
export type ModuleWritten = Common['modules'][number];
export type TakenWritten = AsWritten<typeof taken>;
export type WordWritten = AsWritten<typeof word>;
export type SourceWritten = AsWritten<typeof source>;
export type CircuitWritten = AsWritten<typeof circuitSchema>;
export type FormJson = AsWritten<typeof formSchema>;
export type RecommendationWritten = AsWritten<typeof recommendationSchema>;
export type ResistorWritten = AsWritten<typeof resistorSchema>;
