import * as z from '../libraries/zod.js';
import { choice, line, name, quantity, quantityOrWord } from './building-blocks.js';
import { withoutHeader } from './camel-keys.js';
import { headers } from './file-kind.js';
import type { Module } from './module.js';
import { found } from './plain-words.js';

export const changeDate = z.iso
  .date({ error: ({ input }) => `${found(input)}; a date is needed, year first: 2026-11-14` })
  .meta({ description: 'The day of the change, year first.', examples: ['2026-11-14'] });

const change = z.strictObject({
  date: changeDate,
  what: line('What was done.').min(1),
});

/** No label names air beyond these: one that seems to is a slip of the pen, such as 400 for 40. */
export const ambientOnLabel = quantity('temperature', 'The highest ambient temperature on the label.', {
  least: -50,
  most: 150,
});

/** A module file, as an editor sees it and as the program reads it. */
export const moduleSchema: z.ZodType<Module> = z
  .strictObject({
    railproof: z.literal(headers.module).describe('The kind of file and the version of its format.'),
    name: name('What the module is called; runs are filed under it.', ['K1']),
    description: line('What it is and where it came from.').default(''),
    rated: z
      .strictObject({
        voltage: quantity('voltage', 'The voltage on the label.', { above: 0 }),
        current: quantity('current', 'The current on the label.', { above: 0 }),
        ambient: ambientOnLabel.exactOptional(),
      })
      .describe('What the label says.'),
    'protection-class': choice(['I', 'II'], 'IEC 61140: I has an earthed plug, II has not.'),
    input: choice(['mains', 'dc'], 'What the module runs from.'),
    'output-isolation': quantityOrWord(
      'voltage',
      ['unknown'],
      'What output to earth withstands, where it is known.',
      { above: 0 },
    ).prefault('unknown'),
    changes: z
      .array(change)
      .max(1000)
      .default([])
      .describe('What was done to the module, oldest first.')
      .superRefine((changes, context) => {
        for (const [index, { date }] of changes.entries()) {
          const before = changes[index - 1]?.date;
          if (before === undefined || before <= date) continue;
          const message = `found ${date} after ${before}; the oldest change comes first`;
          context.addIssue({ code: 'custom', path: [index, 'date'], message });
        }
      }),
  })
  .meta({
    title: 'railproof module',
    description: 'A supply under test, as its label and its owner know it.',
  })
  .transform(withoutHeader);
