import * as z from '../../libraries/zod.js';
import { type Dimension, dimensions } from '../../quantity/quantity.js';
import type { AsWritten } from './as-written.js';

const codes = Object.values(dimensions) as [(typeof dimensions)[Dimension]];

/** By its code in UCUM (The Unified Code for Units of Measure, case-sensitive). */
export const unit = z
  .enum(codes)
  .meta({ description: 'The unit, by its UCUM code; a ratio is in %.', examples: ['V', 'Ohm', '%'] });

const number = z.number().nullable().describe('In the unit beside it; null where there is no telling.');

/** A number with its unit. */
export const valueSchema = z
  .strictObject({ value: number, unit })
  .meta({ id: 'value', description: 'A number with its unit.' });

/** Lower end, upper end. */
export const ends = z.tuple([z.number().describe('The lower end.'), z.number().describe('The upper end.')]);

export const coverage = z
  .literal(0.95)
  .nullable()
  .describe('The probability with which the interval holds the true value; null where there is no interval.');

export const bound = z
  .literal('least')
  .nullable()
  .describe('"least" where nothing showed that it is not more; null otherwise.');

/** For a value beside it. */
export const intervalKeys = {
  interval: ends
    .nullable()
    .describe('Lower and upper end, in the unit of the value; null where there is none to give.'),
  coverage,
};

/** A number with its unit and its interval. */
export const estimateSchema = valueSchema
  .extend({ bound, ...intervalKeys })
  .meta({ id: 'estimate', description: 'A number that was worked out, and the interval that holds it.' });

/** One axis of a curve. */
export const valuesSchema = z
  .strictObject({ values: z.array(number).describe('Rising.'), unit })
  .meta({ id: 'values', description: 'One axis of a curve.' });

const line = (description: string) => z.array(number).describe(description);

/** What lies over an axis. */
export const bandSchema = z
  .strictObject({
    best: line('The best values, in the order of the axis.'),
    low: line('The lower ends of their intervals.'),
    high: line('The upper ends of their intervals.'),
    unit,
    coverage: z
      .literal(0.95)
      .describe('The probability with which the band holds the true value at a place.'),
  })
  .meta({ id: 'band', description: 'A curve over an axis, with the band that holds it at each place.' });

export type Value = AsWritten<typeof valueSchema>;
export type EstimateWritten = AsWritten<typeof estimateSchema>;
export type Values = AsWritten<typeof valuesSchema>;
export type BandWritten = AsWritten<typeof bandSchema>;
