import * as z from '../../libraries/zod.js';
import { combinationFormat } from '../build/combination-json.js';
import type { AsWritten } from './as-written.js';
import { ballastWishSchema } from './ballast-wish-schema.js';
import {
  circuitSchema,
  commonSchema,
  loadSchema,
  moduleNames,
  recommendationSchema,
  resistorSchema,
  sentences,
} from './build-part-schemas.js';
import { bandSchema, bound, estimateSchema, valueSchema, valuesSchema } from './number-schemas.js';

const text = (description: string) => z.string().describe(description);

const sharedKeys = (arrangement: 'parallel' | 'series') => ({
  format: z.literal(combinationFormat).describe('The name of the format and its version.'),
  arrangement: z
    .literal(arrangement)
    .describe(arrangement === 'parallel' ? 'Side by side.' : 'One upon the other.'),
  ...commonSchema.shape,
  load: loadSchema,
  usable: estimateSchema.describe('The most that it gives.'),
  recommended: recommendationSchema,
  circuit: circuitSchema,
});

const wishedLoad = valueSchema
  .nullable()
  .describe('What it is to feed; null where it was left out, and is what is recommended.');

const parallel = z.strictObject({
  ...sharedKeys('parallel'),
  wish: z.strictObject({ ...ballastWishSchema.shape, load: wishedLoad }).describe('What was asked for.'),
  ballast: z
    .discriminatedUnion('kind', [
      z.strictObject({ kind: z.literal('none').describe('They share well enough joined directly.') }),
      z.strictObject({
        kind: z.literal('impossible').describe('No ballast does what is asked for.'),
        why: text('Why not.'),
      }),
      z.strictObject({
        kind: z.literal('resistor').describe('One in series with each.'),
        ...resistorSchema.shape,
      }),
    ])
    .describe('What stands in series with each module.'),
  sharing: z
    .strictObject({
      busVoltage: estimateSchema.describe('Where they are joined.'),
      currents: z.array(estimateSchema).describe("Each module's current."),
      shares: z.array(estimateSchema).describe("Each module's part of the load."),
      imbalance: valueSchema
        .extend({
          least: valueSchema.describe('Of every tolerance at its best together.'),
          worst: valueSchema.describe('Of every tolerance at its worst together; no limit of 95 %.'),
        })
        .describe('The highest current less the lowest, over their mean.'),
    })
    .describe('How they share at the load; lists in the order of the modules.'),
  curves: z
    .strictObject({
      load: valuesSchema.describe('The axis: the load of the group.'),
      busVoltage: bandSchema.describe('The voltage where they are joined.'),
      currents: z.array(bandSchema).describe("Each module's current, in the order of the modules."),
    })
    .describe('How they share as the load rises.'),
  firstToSaturate: z
    .strictObject({
      module: text('Which one.'),
      load: estimateSchema.describe('At which load of the group.'),
      probability: valueSchema.describe('That it is this one.'),
      then: text('What the group does there.'),
    })
    .describe('Which module reaches its limit first as the load rises.'),
  sumOfSingles: z
    .strictObject({
      usable: valueSchema.describe('The sum of what each gives.'),
      recommended: valueSchema.describe('The sum of what each is recommended for.'),
    })
    .describe('What they could do one by one: more than the group can, and not to be taken for that.'),
  withoutBallast: z
    .strictObject({
      load: valueSchema.describe('The load for which the imbalance holds.'),
      imbalance: estimateSchema.describe('The highest current less the lowest, over their mean.'),
      hog: z.string().nullable().describe('Who carries most; null where it can not be told.'),
      failsAt: valueSchema.describe('The load at which the group fails as a whole.'),
      story: sentences('What happens on the way there, a sentence each.'),
    })
    .describe('What they would do joined directly.'),
  failures: z
    .array(
      z.strictObject({
        module: text('Which one is lost.'),
        recommended: valueSchema.describe('What the rest may feed continuously.'),
        usable: valueSchema.describe('What the rest holds.'),
        rest: z
          .enum(['carries-it', 'overloaded', 'fails'])
          .describe('Whether the rest still carries the load: for good, for a while, or not at all.'),
        sentences: sentences('What happens, a sentence each.'),
      }),
    )
    .describe('What happens when a module fails or is switched off; one for each.'),
});

const series = z.strictObject({
  ...sharedKeys('series'),
  wish: z.strictObject({ load: wishedLoad }).describe('What was asked for.'),
  openVoltage: estimateSchema.describe('Of the whole string, without a load.'),
  voltageAtLoad: estimateSchema.describe('Of the whole string at the load.'),
  weakest: z
    .strictObject({
      module: text('Which one.'),
      sure: z.boolean().describe('Whether it is this one with 95 %.'),
      then: text('What the string does when more is asked of it.'),
    })
    .describe('The module that gives least.'),
  rails: z
    .array(
      z.strictObject({
        module: text('Which one.'),
        float: estimateSchema.describe('Its 0 V above that of the string, without a load.'),
        top: estimateSchema.describe('Its upper end above 0 V of the string, without a load.'),
        isolation: valueSchema
          .nullable()
          .describe('What its output withstands to earth; null where nobody knows.'),
        verdict: z
          .enum(['within', 'beyond', 'unknown', 'not-needed'])
          .describe("Whether its isolation bears that, the string's 0 V being earthed."),
      }),
    )
    .describe('Where each module stands, the lowest first.'),
  beyondTouchable: z.boolean().describe('Whether anything on it can be above 60 V DC (ES1 of IEC 62368-1).'),
  reverseDiodes: z
    .array(
      z.strictObject({
        module: text('Across the output of which one.'),
        current: valueSchema.extend({ bound }).describe('The most that the rest can push through it.'),
        voltage: valueSchema.describe('Of the rest of the string at its highest.'),
        heat: valueSchema.describe('What it turns into heat while the current flows.'),
        rating: z
          .strictObject({
            current: valueSchema.describe('Forward.'),
            voltage: valueSchema.describe('Reverse.'),
          })
          .describe('What to buy, reserve included.'),
      }),
    )
    .describe('One for each module, for the day on which it fails while the others push.'),
  bonds: z
    .array(
      z.strictObject({
        module: text('Whose 0 V is bonded to earth.'),
        shorts: moduleNames('The modules that would be shorted; none for the lowest.'),
        voltage: valueSchema.describe('The voltage that would be shorted.'),
        sentence: text('What would happen.'),
      }),
    )
    .describe("What a bond from a module's 0 V to earth would do, the string's 0 V being earthed too."),
  curves: z
    .strictObject({
      load: valuesSchema.describe('The axis: the load of the string.'),
      voltage: bandSchema.describe('The voltage of the whole string.'),
    })
    .describe('How its voltage falls as the load rises.'),
});

/** `combine --json`. */
export const combinationSchema = z.discriminatedUnion('arrangement', [parallel, series]).meta({
  title: 'railproof combination',
  description: 'What modules come to side by side or one upon the other, and whether that may be built.',
});

export type CombinationJson = AsWritten<typeof combinationSchema>;
export type ParallelJson = AsWritten<typeof parallel>;
export type SeriesJson = AsWritten<typeof series>;
