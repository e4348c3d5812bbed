import * as z from '../libraries/zod.js';
import { choice, line, name, paragraph, quantity, quantityOrNameplateShare } from './building-blocks.js';
import { deratingSchema } from './derating-schema.js';
import { headers } from './file-kind.js';
import { cautions, circuits } from './procedure.js';

/**
 * A procedure file but for its steps and criteria, which are lists here; their own rules depend on the
 * step kinds and findings there are.
 */
export const procedureSchema = z
  .strictObject({
    railproof: z.literal(headers.procedure).describe('The kind of file and the version of its format.'),
    name: name('What the procedure is called; runs are filed under it.', ['real-limit']),
    title: line('What it does, as a headline.').min(1),
    purpose: paragraph('Why one would run it, in a few sentences.').default(''),
    circuit: choice(circuits, 'How the modules under test are wired.').default('single'),
    wiring: z
      .array(line('One instruction, as one would say it.', 300).min(1))
      .max(30)
      .default([])
      .describe('How the bench is wired for it; shown, and acknowledged, before anything is energised.'),
    cautions: z
      .array(choice(cautions, 'What the person at the bench must mind.'))
      .max(cautions.length)
      .default([])
      .describe('Shown, and acknowledged, before anything is energised.'),
    limits: z
      .strictObject({
        voltage: quantityOrNameplateShare('voltage', 'The highest voltage.', { above: 0 }).exactOptional(),
        current: quantityOrNameplateShare('current', 'The highest current.', { above: 0 }).exactOptional(),
        power: quantity('power', 'The highest power.', { above: 0 }).exactOptional(),
        temperature: quantity('temperature', 'The highest temperature of a module.').exactOptional(),
      })
      .default({})
      .describe(
        'Never exceeded in this procedure; of these and of what the bench allows the strictest holds.',
      ),
    steps: z.array(z.unknown()).min(1).max(200).describe('What is to be done, in order.'),
    criteria: z.array(z.unknown()).max(200).default([]).describe('What is required of the result.'),
    tolerance: line(
      'How far the findings may be from those of a baseline: a shipped tolerance by its name, or a file beside this one.',
    )
      .min(1)
      .meta({ examples: ['unchanged', 'earth-link-removed'] })
      .exactOptional(),
    derating: deratingSchema
      .prefault({})
      .describe('How the recommended current follows from the usable one.'),
  })
  .meta({ title: 'railproof procedure', description: 'What is to be done, in order, and what is required.' });
