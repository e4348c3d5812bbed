import * as z from '../libraries/zod.js';
import { exactlyOne } from './alternatives.js';
import { choice, line, name, quantity } from './building-blocks.js';
import { headers } from './file-kind.js';
import { found } from './plain-words.js';
import { contactSchema, diodeSchema, joint } from './stages-contact-schema.js';
import { formOf, partsSchema } from './stages-form.js';
import type { Stages } from './stages.js';

/** More is no switching that anybody could wire by hand and check by eye. */
const most = { modules: 12, records: 16, contacts: 32, diodes: 24, wires: 100, arrangements: 8 };

const arrangement = z
  .strictObject({
    module: name('A single module.', ['W1']).exactOptional(),
    group: partsSchema.exactOptional().describe('Modules side by side, [W1, W2]; a part may be a stack.'),
    stack: partsSchema
      .exactOptional()
      .describe('Modules one upon the other, the lowest first, [W1, W2]; a part may be a group.'),
    driven: z
      .array(name('A contact by its name.', ['S1']))
      .max(most.contacts)
      .default([])
      .describe('The contacts that are driven; all others are at rest.'),
  })
  .meta(exactlyOne(...['module', 'group', 'stack'].map((form) => ({ must: [form], may: ['driven'] }))))
  .superRefine(({ module, group, stack }, context) => {
    // A misspelt key has been told already.
    if (context.issues.length > 0) return;
    if ([module, group, stack].filter((each) => each !== undefined).length === 1) return;
    const message = 'an arrangement is exactly one of module, group and stack';
    context.addIssue({ code: 'custom', message });
  })
  .transform(({ module, group, stack, driven }) => ({
    form: formOf(module ?? (group === undefined ? { stack: stack ?? [] } : { group })),
    driven,
  }));

const byCase = z
  .strictObject({
    full: quantity('power', 'What it may turn into heat with a cool case.', { above: 0 }),
    'full-to': quantity('temperature', 'The case temperature up to which that holds.'),
    'none-at': quantity('temperature', 'The case temperature at which nothing is left of it.'),
    case: quantity('temperature', 'The warmest that its case gets in use.'),
  })
  .superRefine((line, context) => {
    const complain = (key: keyof typeof line, message: string): void => {
      context.addIssue({ code: 'custom', path: [key], message });
    };
    if (line['none-at'] <= line['full-to']) {
      complain('none-at', "the line falls from 'full-to' to here, so this must be higher");
    } else if (line.case >= line['none-at']) {
      complain('case', "a case as warm as 'none-at' leaves nothing that may be turned into heat");
    }
  })
  .transform((line) => ({
    kind: 'by-case' as const,
    full: line.full,
    fullTo: line['full-to'],
    noneAt: line['none-at'],
    case: line.case,
  }));

const linearStage = z
  .strictObject({
    'drop-out': quantity('voltage', 'The least from its input to its output at which it still regulates.', {
      above: 0,
    }),
    current: quantity('current', 'The most that it may pass.', { above: 0 }),
    dissipation: z
      .union(
        [
          quantity('power', 'At most so much.', { above: 0 }).transform((power) => ({
            kind: 'fixed' as const,
            most: power,
          })),
          byCase.describe('Falling on a straight line with the temperature of the case.'),
        ],
        {
          error: ({ input }) =>
            `${found(input)}; a power is needed, 25 W, or a map of full, full-to, none-at and case`,
        },
      )
      .describe('What it may turn into heat.'),
  })
  .transform(({ 'drop-out': dropOut, ...rest }) => ({ dropOut, ...rest }));

/** A stages file, as an editor sees it and as the program reads it; `stagesProblems` tells what no key alone can. */
export const stagesSchema: z.ZodType<Stages> = z
  .strictObject({
    railproof: z.literal(headers.stages).describe('The kind of file and the version of its format.'),
    name: name('What the supply is called.', ['potting-bench']),
    title: line('What it is for, as a headline.').min(1),
    modules: z
      .record(
        z.string(),
        z
          .array(line('The folder of a record; from the folder of this file on.', 500).min(1))
          .min(1)
          .max(most.records)
          .describe('The records of this module.'),
      )
      .describe('The modules by their names, each with its records.'),
    ballast: z
      .strictObject({
        resistance: quantity('resistance', 'Of each.', { above: 0 }),
        tolerance: quantity('ratio', 'How far off each may be.', { least: 0, most: 0.5 }).prefault('5 %'),
        rating: quantity('power', 'What each may turn into heat for good.', { above: 0 }).exactOptional(),
      })
      .exactOptional()
      .describe("A resistor in series with each module's plus; W1+ is behind it."),
    wires: z.array(joint('Two nodes.')).max(most.wires).default([]).describe('What is joined for good.'),
    contacts: z.record(z.string(), contactSchema).default({}).describe('The contacts by their names.'),
    diodes: z.record(z.string(), diodeSchema).default({}).describe('The diodes by their names.'),
    arrangements: z
      .record(z.string(), arrangement.describe('What it is, and which contacts make it.'))
      .describe('The arrangements that are used, by names of your own.'),
    sequence: choice(
      ['any-order', 'break-before-make', 'make-before-break'],
      'How the contacts move from one arrangement to the next: at random, or all that open before any closes, or the other way round.',
    ).default('any-order'),
    'linear-stage': linearStage.describe('What stands between the modules and the output.'),
    output: z
      .strictObject({
        from: quantity('voltage', 'The lowest.', { least: 0 }),
        to: quantity('voltage', 'The highest.', { above: 0 }),
      })
      .describe('The voltages that the output is set to.'),
    hysteresis: quantity('voltage', 'By how much lower the output must be before it is switched back.', {
      above: 0,
    }),
  })
  .superRefine((file, context) => {
    const complain = (path: PropertyKey[], message: string): void => {
      context.addIssue({ code: 'custom', path, message });
    };
    for (const key of ['modules', 'contacts', 'diodes', 'arrangements'] as const) {
      const count = Object.keys(file[key]).length;
      if (count > most[key]) complain([key], `found ${count} of them; at most ${most[key]} are allowed`);
      if (count === 0 && (key === 'modules' || key === 'arrangements')) {
        complain([key], 'found none; at least one is needed');
      }
    }
    if (file.output.to <= file.output.from) {
      complain(['output', 'to'], "this must be above 'from'");
    }
  })
  .meta({
    title: 'railproof stages',
    description: 'A supply whose modules are joined otherwise as its output rises, ahead of a linear stage.',
  })
  .transform((file): Stages => ({
    modules: entriesOf(file.modules).map(({ name: module, value }) => ({ name: module, records: value })),
    wish: {
      name: file.name,
      title: file.title,
      ballast: file.ballast === undefined ? undefined : { rating: undefined, ...file.ballast },
      contacts: entriesOf(file.contacts).map(({ name: contact, value }) => ({ ...value, name: contact })),
      wires: file.wires,
      diodes: entriesOf(file.diodes).map(({ name: diode, value }) => ({ ...value, name: diode })),
      arrangements: entriesOf(file.arrangements).map(({ name: each, value }) => ({ ...value, name: each })),
      sequence: file.sequence,
      linearStage: file['linear-stage'],
      output: file.output,
      hysteresis: file.hysteresis,
    },
  }));

function entriesOf<T>(map: Readonly<Record<string, T>>): readonly { name: string; value: T }[] {
  return Object.entries(map).map(([key, value]) => ({ name: key, value }));
}
