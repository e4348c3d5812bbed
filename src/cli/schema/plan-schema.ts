import * as z from '../../libraries/zod.js';
import { cautions } from '../../files/procedure.js';
import type { AsWritten } from '../../report/schema/as-written.js';

const ceiling = (unit: string) =>
  z.strictObject({
    value: z.number().describe(`In ${unit}.`),
    setBy: z.string().meta({ description: 'Who says so.', examples: ['the bench', 'the nameplate'] }),
  });

const step = z.strictObject({
  kind: z.string().describe('The kind of step, as procedures name it.'),
  summary: z.string().describe('What would be done, in words.'),
  seconds: z.number().nonnegative().describe('How long it takes, about.'),
  done: z
    .boolean()
    .exactOptional()
    .describe('Whether the run that would be resumed has done it; left out where none would be.'),
});

/** `run --dry-run --json`. */
export const planSchema = z
  .strictObject({
    format: z.literal('railproof/plan 1').describe('The name of the format and its version.'),
    procedure: z.string().describe('The name of the procedure.'),
    module: z.string().meta({
      description: 'What would be tested; of several modules their names joined.',
      examples: ['K1', 'K1+K2'],
    }),
    circuit: z.enum(['single', 'parallel', 'series']).describe('How the modules are wired.'),
    bench: z.string().describe('The name of the bench.'),
    steps: z.array(step).describe('What would be done, in order.'),
    wiring: z.array(z.string()).describe('How the bench is wired for it, an instruction each.'),
    cautions: z.array(z.enum(cautions)).describe('What would have to be acknowledged.'),
    ceilings: z
      .strictObject({
        voltage: ceiling('V').describe('The highest voltage.'),
        current: ceiling('A').describe('The highest current.'),
        power: ceiling('W').describe('The highest power.'),
        temperature: ceiling('°C').optional().describe('The highest temperature of a module.'),
      })
      .describe('What would never be exceeded, and who says so.'),
    source: z
      .strictObject({
        voltage: z.number().describe('What the modules are fed with, in V.'),
        current: z.number().describe('The most that they may take together, in A.'),
        offFor: z.number().describe('How long it is off to clear a latch, in s.'),
      })
      .exactOptional()
      .describe('What feeds the modules; left out where no source of the bench does.'),
    seconds: z.number().nonnegative().describe('How long all of it takes, about; what is done left out.'),
  })
  .meta({
    title: 'railproof plan',
    description: 'What a run would do, and what it would never exceed; nothing was touched.',
  });

export type PlanJson = AsWritten<typeof planSchema>;
