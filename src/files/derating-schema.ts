import * as z from '../libraries/zod.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import { choice, quantity } from './building-blocks.js';
import { camelKeys } from './camel-keys.js';

const ambientLine = z
  .strictObject({
    expected: quantity('temperature', 'The warmest air that will be around the module in use.'),
    'full-to': quantity('temperature', 'Full load up to here.'),
    'falling-to': quantity('ratio', 'What is left of the load at `at`; nothing beyond it.', {
      least: 0,
      most: 1,
    }),
    at: quantity('temperature', 'Where the falling line ends.'),
  })
  .superRefine((line, context) => {
    if (line.at > line['full-to']) return;
    const [from, to] = [line['full-to'], line.at].map((each) => formatQuantity(each, 'temperature'));
    const message = `found ${to}, and full load to ${from}; the line falls from the one to the other, so this must be higher`;
    context.addIssue({ code: 'custom', path: ['at'], message });
  });

/** The `derating` of a procedure: how the recommended current follows from the usable one. */
export const deratingSchema = camelKeys(
  z
    .strictObject({
      margin: quantity('ratio', 'The part of the usable current that is recommended.', {
        above: 0,
        most: 1,
      }).prefault('80 %'),
      'above-nameplate': choice(
        ['never', 'after-soak'],
        'Whether more than the rated current may ever be recommended.',
      ).default('never'),
      ambient: camelKeys(ambientLine)
        .exactOptional()
        .describe('Less load in warmer air: full to one temperature, then along a straight line.'),
      'loss-model': camelKeys(
        z.strictObject({
          fixed: quantity('ratio', 'The share of the losses at the soaked current that no load changes.', {
            least: 0,
            most: 1,
          }).prefault('0 %'),
        }),
      )
        .exactOptional()
        .describe(
          'How a temperature rise is carried over to other currents: a fixed share, the rest as the square of the current.',
        ),
      'temperature-limit': quantity(
        'temperature',
        'The warmest that the place where a soak measures may become in use.',
      ).exactOptional(),
    })
    .superRefine(({ ambient, 'temperature-limit': limit }, context) => {
      if (ambient === undefined || limit === undefined || limit > ambient.expected) return;
      const [found, expected] = [limit, ambient.expected].map((each) => formatQuantity(each, 'temperature'));
      const message = `found ${found}, and the air is expected to have ${expected}; nothing stays below that`;
      context.addIssue({ code: 'custom', path: ['temperature-limit'], message });
    }),
);
