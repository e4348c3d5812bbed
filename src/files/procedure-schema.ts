import { z } from 'zod';
import { choice, line, name, paragraph, quantity } from './building-blocks.js';
import { camelKeys } from './camel-keys.js';
import { headers } from './file-kind.js';
import { cautions } from './procedure.js';

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
    cautions: z
      .array(choice(cautions, 'What the person at the bench must mind.'))
      .max(cautions.length)
      .default([])
      .describe('Shown, and acknowledged, before anything is energised.'),
    steps: z.array(z.unknown()).min(1).max(200).describe('What is to be done, in order.'),
    criteria: z.array(z.unknown()).max(200).default([]).describe('What is required of the result.'),
    derating: camelKeys(
      z.strictObject({
        margin: quantity('ratio', 'The part of the usable current that is recommended.', {
          above: 0,
          most: 1,
        }).prefault('80 %'),
        'above-nameplate': choice(
          ['never', 'after-soak'],
          'Whether more than the rated current may ever be recommended.',
        ).default('never'),
      }),
    )
      .prefault({})
      .describe('How the recommended current follows from the usable one.'),
  })
  .meta({ title: 'railproof procedure', description: 'What is to be done, in order, and what is required.' });
