import * as z from '../../libraries/zod.js';
import { sequences } from '../../arrangement/stages-wish.js';
import { stagedSupplyFormat } from '../build/staged-supply-json.js';
import type { AsWritten } from './as-written.js';
import { circuitSchema, commonSchema, moduleNames, recommendationSchema } from './build-part-schemas.js';
import { estimateSchema, unit, valueSchema, valuesSchema } from './number-schemas.js';

const text = (description: string) => z.string().describe(description);
const contacts = (description: string) => z.array(z.string()).describe(description);
const sequence = z.enum(sequences);

const connection = z
  .strictObject({
    kind: z
      .enum(['short', 'unequal', 'reversed'])
      .describe(
        '"short": an output across itself; "unequal": different voltages side by side; "reversed": against each other.',
      ),
    modules: moduleNames('The modules in the loop.'),
    voltage: valueSchema.describe('That drives the current round the loop.'),
    through: contacts('The contacts it goes through.'),
    sentence: text('The same in words.'),
  })
  .meta({ id: 'connection', description: 'A closed loop of unequal voltages.' });

const bySequence = {
  sequence: sequence.describe('How the contacts are driven.'),
};

const verdict = z
  .discriminatedUnion('kind', [
    z.strictObject({
      ...bySequence,
      kind: z.literal('clear').describe('No state that is passed through is forbidden.'),
      states: z.int().nonnegative().describe('How many states were looked at.'),
      interrupts: z.boolean().describe('Whether the linear stage is without any feed in some state.'),
    }),
    z.strictObject({
      ...bySequence,
      kind: z.literal('forbidden').describe('A state that is passed through must never be.'),
      order: z.array(z.string()).meta({
        description: 'What moves, one after the other, until it is so.',
        examples: [['S2 opens']],
      }),
      connection,
    }),
  ])
  .meta({ id: 'verdict', description: 'What a movement of contacts passes through.' });

const movement = z
  .strictObject({
    moving: contacts('The contacts that move.'),
    verdicts: z.array(verdict).describe('For every way of driving them; that of `sequence` decides.'),
  })
  .meta({ id: 'movement', description: 'The contacts of one change, moving at different times.' });

const guaranteed = z
  .strictObject({
    arrangement: text('Which one feeds it.'),
    current: valueSchema.describe('What it feeds continuously.'),
    setBy: z
      .enum(['module', 'ballast', 'dissipation', 'drop-out', 'linear-stage'])
      .describe('What sets that.'),
  })
  .meta({ id: 'guaranteed', description: 'What is fed at an output voltage.' });

const linearStage = z.strictObject({
  dropOut: valueSchema.describe('The least from its input to its output at which it still regulates.'),
  current: valueSchema.describe('The most that it may pass.'),
  dissipation: z
    .discriminatedUnion('kind', [
      z.strictObject({ kind: z.literal('fixed').describe('The same at whatever temperature.') }),
      z.strictObject({
        kind: z
          .literal('by-case')
          .describe('Full up to a case temperature, then falling on a straight line.'),
        full: valueSchema.describe('What it may turn into heat with a cool case.'),
        fullTo: valueSchema.describe('The case temperature up to which that holds.'),
        noneAt: valueSchema.describe('The case temperature at which nothing is left of it.'),
        case: valueSchema.describe('The warmest that its case gets in use.'),
      }),
    ])
    .describe('What it may turn into heat.'),
  most: valueSchema.describe('What it may turn into heat in this use.'),
});

/** `stages --json`. */
export const stagedSupplySchema = z
  .strictObject({
    format: z.literal(stagedSupplyFormat).describe('The name of the format and its version.'),
    name: text('What the supply is called.'),
    title: text('What it is for.'),
    ...commonSchema.shape,
    output: z
      .strictObject({ from: valueSchema.describe('The lowest.'), to: valueSchema.describe('The highest.') })
      .describe('The voltages that the output is set to.'),
    hysteresis: valueSchema.describe('By how much lower the output must be before it is switched back.'),
    sequence: sequence.describe('How the contacts are driven; of the verdicts that one decides.'),
    linearStage: linearStage.describe('What stands between the modules and the output.'),
    arrangements: z
      .array(
        z.strictObject({
          name: text('What it is called.'),
          circuit: circuitSchema,
          closed: contacts('The contacts that are closed; of a change-over contact with the side it is on.'),
          openVoltage: estimateSchema.describe('Without a load.'),
          fullVoltage: estimateSchema.describe('At its full current.'),
          recommended: recommendationSchema,
        }),
      )
      .describe('By rising voltage.'),
    switchOvers: z
      .array(
        z.strictObject({
          lower: text('The arrangement below.'),
          upper: text('The arrangement above.'),
          up: valueSchema.describe('The output voltage at which it goes up.'),
          down: valueSchema.describe('The output voltage at which it comes back.'),
          swing: z
            .strictObject({
              noLoad: valueSchema.describe('Without a load.'),
              fullLoad: valueSchema.describe('At full load.'),
            })
            .describe('By how much the input of the linear stage jumps.'),
          goingUp: movement.describe('The contacts that move on the way up.'),
          comingDown: movement.describe('The contacts that move on the way back.'),
        }),
      )
      .describe('From each arrangement to the next higher one, and back.'),
    guaranteed: z
      .array(
        z.strictObject({
          output: valueSchema.describe('The output voltage.'),
          rising: guaranteed.describe('What it feeds coming from below.'),
          falling: guaranteed.describe('What it feeds coming from above.'),
        }),
      )
      .describe('What it feeds over the whole output range, rising.'),
    dissipation: z
      .strictObject({
        output: valuesSchema.describe('One axis: the output voltage.'),
        current: valuesSchema.describe('The other axis: the current.'),
        watts: z
          .array(z.array(z.number().nullable()))
          .describe('By output, then by current; null beyond what is guaranteed.'),
        unit,
      })
      .describe('What the linear stage turns into heat, at worst.'),
  })
  .meta({
    title: 'railproof staged-supply',
    description: 'A supply whose modules are joined otherwise as its output rises.',
  });

export type StagedSupplyJson = AsWritten<typeof stagedSupplySchema>;
