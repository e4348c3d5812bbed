import * as z from '../libraries/zod.js';
import { product, shifted } from '../quantity/decimal-text.js';
import { QuantityError, readQuantity } from '../quantity/parse-quantity.js';
import type { Dimension } from '../quantity/quantity.js';
import { readUnit } from '../quantity/units.js';
import { exactlyOne } from './alternatives.js';
import { quantity, readFromText } from './building-blocks.js';
import { ask, messages } from './driver-message-schema.js';
import type { DriverReading, Range } from './driver.js';
import { regularExpression } from './driver-expression.js';
import { found } from './plain-words.js';

const numberUnits = ['V', 'mV', 'A', 'mA', 'W', 'Ohm', 'kOhm', '°C'];

const unit = readFromText<{ readonly dimension: Dimension; readonly factor: number }>(
  { description: 'The unit of the number in the reply.', examples: numberUnits },
  `a unit is needed, one as ${numberUnits.join(', ')}`,
  (value) => {
    const known = typeof value === 'string' ? readUnit(value) : undefined;
    if (known !== undefined) {
      return { dimension: known.dimension, factor: shifted(known.factor, known.shift) };
    }
    const expected = `a unit is needed, one as ${numberUnits.join(', ')}`;
    throw new QuantityError(`${found(value)}; ${expected}`, { found: found(value), expected });
  },
);

const upTo = readFromText<{ readonly dimension: Dimension; readonly value: number }>(
  { description: 'The most that is read on it.', examples: ['20 V', '2 kOhm'] },
  'a quantity is needed, as 20 V',
  (value) => {
    const symbol = typeof value === 'string' ? /[^\d\s.]+$/.exec(value)?.[0] : undefined;
    const dimension = symbol === undefined ? undefined : readUnit(symbol)?.dimension;
    if (dimension !== undefined) return { dimension, value: readQuantity(value, dimension) };
    const expected = 'a quantity is needed, as 20 V';
    throw new QuantityError(`${found(value)}; ${expected}`, { found: found(value), expected });
  },
);

const range = z.strictObject({
  'up-to': upTo,
  select: messages.min(1).describe('The messages that choose it.'),
});

/** How one reading is asked for and read. */
export const readingSchema = z
  .strictObject({
    ask,
    unit: unit.exactOptional(),
    scale: z
      .number()
      .meta({ minimum: -1e9, maximum: 1e9, not: { const: 0 } })
      .refine((value) => value !== 0 && Math.abs(value) <= 1e9, { error: 'a number other than 0 is needed' })
      .describe(
        'What the number is multiplied by: -1 where the leads are the other way round, 100 for a shunt of 10 mΩ.',
      )
      .exactOptional(),
    pattern: regularExpression(
      'Finds the number in the reply, in a group named value, and its unit, where there is one, in a group named unit.',
      ['value'],
    ).exactOptional(),
    ranges: z
      .array(range)
      .min(1)
      .max(20)
      .describe('The ranges, the smallest first; the tool chooses between them.')
      .exactOptional(),
    averaging: quantity('time', 'A reading is the mean over this; none is asked for sooner after another.', {
      above: 0,
      most: 60,
    }).exactOptional(),
    'true-when': regularExpression('The answer is yes when the reply looks like this.').exactOptional(),
    'false-when': regularExpression(
      'What a no looks like, where it does not end in 0, OFF, FALSE or NO.',
    ).exactOptional(),
    'channel-in': regularExpression(
      "Finds the number of the scanner's closed channel, in a group named value.",
      ['value'],
    ).exactOptional(),
    'none-when': regularExpression(
      'What the reply looks like when no channel is closed, where that is no empty list: (@).',
    ).exactOptional(),
  })
  .meta(
    exactlyOne(
      { must: ['ask', 'unit'], may: ['scale', 'pattern', 'ranges', 'averaging'] },
      { must: ['ask', 'true-when'], may: ['false-when'] },
      { must: ['ask', 'channel-in'], may: ['none-when'] },
    ),
  )
  .superRefine((value, context) => {
    const complain = (path: PropertyKey[], text: string): void => {
      context.addIssue({ code: 'custom', path, message: text });
    };
    const kinds = [value.unit, value['true-when'], value['channel-in']].filter((each) => each !== undefined);
    if (kinds.length !== 1) {
      complain(
        [],
        "a reading has a 'unit', when it is a number, or 'true-when', when it is a yes or a no, or 'channel-in', when it is a scanner's channel",
      );
    } else if (value.unit === undefined) {
      for (const key of ['pattern', 'scale', 'ranges', 'averaging'] as const) {
        if (value[key] !== undefined) complain([key], `only a reading with a 'unit' has ${ofNumbers[key]}`);
      }
    }
    if (kinds.length === 1 && value['true-when'] === undefined && value['false-when'] !== undefined) {
      complain(['false-when'], "only a reading with 'true-when' can be false");
    }
    if (kinds.length === 1 && value['channel-in'] === undefined && value['none-when'] !== undefined) {
      complain(['none-when'], "only a reading with 'channel-in' can be none");
    }
    for (const [index, { 'up-to': most }] of (value.ranges ?? []).entries()) {
      const before = value.ranges?.[index - 1]?.['up-to'];
      if (value.unit !== undefined && most.dimension !== value.unit.dimension) {
        complain(['ranges', index, 'up-to'], "the unit is not that of the reading's unit");
      } else if (!(most.value > 0)) {
        complain(['ranges', index, 'up-to'], 'a range holds more than nothing');
      } else if (before !== undefined && !(most.value > before.value)) {
        complain(['ranges', index, 'up-to'], 'the smallest range comes first');
      }
    }
  })
  .transform((value): DriverReading => {
    const { ask: asked, unit: given, pattern, 'true-when': trueWhen, 'channel-in': channelIn } = value;
    const { 'false-when': falseWhen, 'none-when': noneWhen, scale, ranges, averaging } = value;
    if (channelIn !== undefined)
      return { kind: 'channel', ask: asked, channelIn, ...(noneWhen === undefined ? {} : { noneWhen }) };
    if (trueWhen !== undefined)
      return { kind: 'flag', ask: asked, trueWhen, ...(falseWhen === undefined ? {} : { falseWhen }) };
    // The refinement above lets no reading through that has neither.
    if (given === undefined) return z.NEVER;
    return {
      kind: 'number',
      ask: asked,
      dimension: given.dimension,
      factor: product(given.factor, scale ?? 1),
      ...(scale !== undefined && { scale }),
      ...(pattern !== undefined && { pattern }),
      ...(averaging !== undefined && { averaging }),
      ...(ranges !== undefined && {
        ranges: ranges.map(({ 'up-to': most, select }): Range => ({ upTo: most.value, select })),
      }),
    };
  });

const ofNumbers = {
  pattern: 'a pattern',
  scale: 'a scale',
  ranges: 'ranges',
  averaging: 'an averaging time',
} as const;
