import { z } from 'zod';
import { QuantityError } from '../quantity/parse-quantity.js';
import type { Dimension } from '../quantity/quantity.js';
import { readUnit } from '../quantity/units.js';
import { choice, line, name, quantity, readFromText } from './building-blocks.js';
import { camelKeys, withoutHeader } from './camel-keys.js';
import { driverProblems } from './driver-checks.js';
import { operationWords, readingWords } from './driver-words.js';
import { operationsOf, readingsOf, type Driver, type DriverReading } from './driver.js';
import { regularExpression } from './driver-expression.js';
import { headers } from './file-kind.js';
import { found } from './plain-words.js';
import { errorDimension, readingDimensions } from './reading-dimensions.js';

const message = z.string().regex(/^[\x20-\x7e]{1,200}$/, {
  error: ({ input }) => `${found(input)}; a message is 1 to 200 plain ASCII characters on one line`,
});

const messages = z.array(message).max(20);

const ask = z
  .union([message, messages.min(1)], {
    error: ({ input }) => `${found(input)}; a message, or a list of messages, is needed`,
  })
  .transform((given) => (typeof given === 'string' ? [given] : given))
  .describe('What is sent; of a list, the last message is the one that is answered.');

const lineEnd = (description: string): z.ZodString =>
  z
    .string()
    .refine((text) => /^\p{ASCII}{1,4}$/u.test(text), {
      error: ({ input }) => `${found(input)}; 1 to 4 ASCII characters are needed, as in "\\n" or "\\r\\n"`,
    })
    .meta({ description, examples: ['\n', '\r\n'] });

const plainUnits = ['V', 'A', 'W', 'Ohm', '°C'];

const unit = readFromText<Dimension>(
  { description: 'The unit of the number in the reply.', examples: plainUnits },
  `one of ${plainUnits.join(', ')} is needed`,
  (value) => {
    const known = typeof value === 'string' ? readUnit(value) : undefined;
    if (known?.factor === 1 && known.shift === 0) return known.dimension;
    const expected = `a unit without a prefix is needed: ${plainUnits.join(', ')}`;
    throw new QuantityError(`${found(value)}; ${expected}`, { found: found(value), expected });
  },
);

const reading = z
  .strictObject({
    ask,
    unit: unit.exactOptional(),
    pattern: regularExpression('Finds the number in the reply, in a group named value.', [
      'value',
    ]).exactOptional(),
    'true-when': regularExpression('The answer is yes when the reply looks like this.').exactOptional(),
    'false-when': regularExpression(
      'What a no looks like, where it does not end in 0, OFF, FALSE or NO.',
    ).exactOptional(),
    'channel-in': regularExpression(
      "Finds the number of the scanner's closed channel, in a group named value; none is closed where it finds none.",
      ['value'],
    ).exactOptional(),
  })
  .superRefine((value, context) => {
    const complain = (path: string[], text: string): void => {
      context.addIssue({ code: 'custom', path, message: text });
    };
    const kinds = [value.unit, value['true-when'], value['channel-in']].filter((each) => each !== undefined);
    if (kinds.length !== 1) {
      complain(
        [],
        "a reading has a 'unit', when it is a number, or 'true-when', when it is a yes or a no, or 'channel-in', when it is a scanner's channel",
      );
    } else if (value.unit === undefined && value.pattern !== undefined) {
      complain(['pattern'], "only a reading with a 'unit' has a pattern");
    } else if (value['true-when'] === undefined && value['false-when'] !== undefined) {
      complain(['false-when'], "only a reading with 'true-when' can be false");
    }
  })
  .transform((value): DriverReading => {
    const { ask: asked, unit: dimension, pattern, 'true-when': trueWhen, 'channel-in': channelIn } = value;
    const { 'false-when': falseWhen } = value;
    if (channelIn !== undefined) return { kind: 'channel', ask: asked, channelIn };
    if (trueWhen !== undefined)
      return { kind: 'flag', ask: asked, trueWhen, ...(falseWhen === undefined ? {} : { falseWhen }) };
    // The refinement above lets no reading through that has neither.
    if (dimension === undefined) return z.NEVER;
    return { kind: 'number', ask: asked, dimension, ...(pattern === undefined ? {} : { pattern }) };
  });

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
    wire: camelKeys(
      z.strictObject({
        'send-end': lineEnd('What ends a message to the instrument.').default('\n'),
        'reply-end': lineEnd('What ends a reply.').default('\n'),
        gap: quantity('time', 'Silence kept between two messages.', { least: 0, most: 60 }).prefault('0 ms'),
        timeout: quantity('time', 'How long a reply may take.', { above: 0, most: 600 }).prefault('1 s'),
      }),
    )
      .prefault({})
      .describe('How messages travel.'),
    identify: message.describe('The question for the identity.'),
    identity: regularExpression(
      'What the identity must look like; any will do when left out.',
    ).exactOptional(),
    errors: z
      .union(
        [
          z.literal('none'),
          z.strictObject({
            ask: message.describe('Asks for the next entry of the error queue.'),
            clear: regularExpression('What the answer looks like when there is none.'),
          }),
        ],
        { error: ({ input }) => `${found(input)}; none, or a map with 'ask' and 'clear', is needed` },
      )
      .describe('The error queue of the instrument, or none.'),
    prepare: messages.default([]).describe('Sent once, when the instrument is taken into use.'),
    release: messages.default([]).describe('Sent once, when it is given back.'),
    operations: z
      .strictObject(optionalKeys(operationsOf, messages, operationWords))
      .describe('The messages for each operation; {amps} and {volts} stand for the value.'),
    readings: z
      .strictObject(optionalKeys(readingsOf, reading, readingWords))
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
