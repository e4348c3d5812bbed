import * as z from '../libraries/zod.js';
import { choice, count, line, name, quantity } from './building-blocks.js';
import { camelKeys, withoutHeader } from './camel-keys.js';
import { driverProblems } from './driver-checks.js';
import { dialogueSchema } from './driver-dialogue-schema.js';
import { errorsSchema, readySchema } from './driver-errors-schema.js';
import { regularExpression } from './driver-expression.js';
import { messages, messageText } from './driver-message-schema.js';
import { readingSchema } from './driver-reading-schema.js';
import { wireSchema } from './driver-wire-schema.js';
import { operationWords, readingWords } from './driver-words.js';
import { operationsOf, readingsOf, type Channels, type Driver } from './driver.js';
import { headers } from './file-kind.js';
import { errorDimension, readingDimensions } from './reading-dimensions.js';

const mostChannels = 9999;

const channels = z
  .strictObject({
    select: messages
      .default([])
      .describe('Sent before each operation and each reading; {channel} stands for the number.'),
    from: count('The lowest channel.', { least: 0, most: mostChannels }).default(1),
    to: count('The highest channel.', { least: 0, most: mostChannels }),
  })
  .transform(({ select, from, to }): Channels => ({ select, first: from, last: to }))
  .describe('The channels of such an instrument, one of which the bench file names.');

const accuracy = Object.fromEntries(
  Object.entries(readingDimensions).map(([each, dimension]) => {
    const fixedUnit = errorDimension(dimension);
    const promised = camelKeys(
      z.strictObject({
        'of-reading': quantity('ratio', 'The part that grows with the reading (half-width).', { least: 0 }),
        fixed: quantity(fixedUnit, 'The part that does not (half-width).', { least: 0 }),
        resolution: quantity(fixedUnit, 'The step of the last digit.', { least: 0 }).exactOptional(),
      }),
    );
    return [each, promised.exactOptional().describe(`How far off a reading of ${each} may be.`)];
  }),
);

/** A driver file, as an editor sees it and as the program reads it. */
export const driverSchema: z.ZodType<Driver> = z
  .strictObject({
    railproof: z.literal(headers.driver).describe('The kind of file and the version of its format.'),
    name: name('What the driver is called: how its instruments are spoken to, never who made them.'),
    role: choice(
      ['load', 'meter', 'scanner', 'thermometer', 'source'],
      'The part of these instruments in the work.',
    ),
    summary: line('Which instruments this is for, in a sentence.').min(1),
    wire: wireSchema,
    remote: messages
      .default([])
      .describe('Sent before anything else, even before what makes safe, on each new connection.'),
    identify: messageText.describe('The question for the identity.'),
    identity: regularExpression(
      'What the identity must look like; any will do when left out.',
    ).exactOptional(),
    errors: errorsSchema,
    ready: readySchema.exactOptional(),
    channels: channels.exactOptional(),
    prepare: messages.default([]).describe('Sent once, when the instrument is taken into use.'),
    release: messages.default([]).describe('Sent once, when it is given back.'),
    local: messages
      .default([])
      .describe('Sent last of all, with nothing asked after it: back to the front panel.'),
    operations: z
      .strictObject(optionalKeys(operationsOf, messages, operationWords))
      .describe('The messages for each operation; {amps} and {volts} stand for the value.'),
    readings: z
      .strictObject(optionalKeys(readingsOf, readingSchema, readingWords))
      .prefault({})
      .describe('How each reading is asked for and read.'),
    settling: quantity('time', 'What the instrument needs after an operation before a reading counts.', {
      least: 0,
      most: 600,
    }).prefault('0 s'),
    ratings: camelKeys(
      z.strictObject({
        voltage: quantity('voltage', 'The highest voltage it takes.', { above: 0 }).exactOptional(),
        current: quantity('current', 'The highest current it takes.', { above: 0 }).exactOptional(),
        power: quantity('power', 'The highest power it takes.', { above: 0 }).exactOptional(),
        'least-voltage': quantity('voltage', 'Below this it cannot sink its current.', {
          least: 0,
        }).exactOptional(),
      }),
    )
      .prefault({})
      .describe('What the instrument can stand.'),
    accuracy: z.strictObject(accuracy).default({}).describe('What the maker promises, by reading.'),
    dialogue: dialogueSchema.exactOptional(),
  })
  .meta({ title: 'railproof driver', description: 'How one family of instruments is spoken to.' })
  .superRefine((driver, context) => {
    for (const { path, message: text } of driverProblems(driver)) {
      context.addIssue({ code: 'custom', path: [...path], message: text });
    }
  })
  .transform(withoutHeader);

function optionalKeys<S extends z.ZodType>(
  byRole: Readonly<Record<string, { must: readonly string[]; may: readonly string[] }>>,
  schema: S,
  words: Readonly<Record<string, string>>,
): Record<string, z.ZodExactOptional<S>> {
  const names = Object.values(byRole).flatMap(({ must, may }) => [...must, ...may]);
  return Object.fromEntries(names.map((each) => [each, schema.exactOptional().describe(words[each] ?? '')]));
}
