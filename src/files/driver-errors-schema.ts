import * as z from '../libraries/zod.js';
import { exactlyOne } from './alternatives.js';
import { count, quantity } from './building-blocks.js';
import { regularExpression } from './driver-expression.js';
import { messages, messageText } from './driver-message-schema.js';
import type { ErrorReport, Readiness } from './driver.js';
import { found } from './plain-words.js';

/** Of a status byte or of an event register, of which SCPI has some of 16 bits. */
const bits = (description: string): z.ZodInt => count(description, { least: 1, most: 65535 });

const reported = z
  .strictObject({
    ask: messageText.describe('Asks for the next entry of the error queue, or for a register such as *ESR?.'),
    clear: regularExpression('What the answer looks like when there is none.').exactOptional(),
    'error-bits': bits(
      'Where a register is asked for: there is an error when any of these bits is set.',
    ).exactOptional(),
    harmless: regularExpression(
      'Entries that are told as a notice and otherwise passed over.',
    ).exactOptional(),
    again: regularExpression(
      'Entries after which the same is told once more: it came too soon, or was garbled.',
    ).exactOptional(),
    afterwards: messages.default([]).describe('Sent after any other error.'),
  })
  .meta(
    exactlyOne(
      { must: ['ask', 'clear'], may: ['harmless', 'again', 'afterwards'] },
      { must: ['ask', 'error-bits'], may: ['harmless', 'again', 'afterwards'] },
    ),
  )
  .superRefine((value, context) => {
    if ((value.clear === undefined) !== (value['error-bits'] === undefined)) return;
    const message =
      "errors have a 'clear', where a queue is read entry by entry, or 'error-bits', where a register is read";
    context.addIssue({ code: 'custom', path: [], message });
  })
  .transform(({ ask, clear, 'error-bits': errorBits, harmless, again, afterwards }): ErrorReport => {
    const policy = {
      afterwards,
      ...(harmless !== undefined && { harmless }),
      ...(again !== undefined && { again }),
    };
    if (clear !== undefined) return { kind: 'queue', ask, clear, ...policy };
    // The refinement above lets nothing through that has neither.
    if (errorBits === undefined) return z.NEVER;
    return { kind: 'register', ask, bits: errorBits, ...policy };
  });

/** How an instrument says that something was wrong. */
export const errorsSchema = z
  .union([z.literal('none'), reported], {
    error: ({ input }) => `${found(input)}; none, or a map with 'ask' and 'clear', is needed`,
  })
  .describe('The error queue of the instrument, or none.');

/** How an instrument says that it has done what it was told. */
export const readySchema = z
  .strictObject({
    ask: messageText.describe('The question, as *OPC? or *STB?.'),
    when: regularExpression('The instrument is ready when the answer looks like this.').exactOptional(),
    'bits-set': bits('It is ready when all these bits of the answer are set.').exactOptional(),
    'bits-clear': bits('It is ready when all these bits of the answer are clear.').exactOptional(),
    every: quantity('time', 'The pause before it is asked again.', { least: 0, most: 60 }).prefault('100 ms'),
    within: quantity('time', 'How long it may take in all.', { above: 0, most: 600 }).prefault('10 s'),
  })
  .meta(
    exactlyOne(
      ...['when', 'bits-set', 'bits-clear'].map((sign) => ({
        must: ['ask', sign],
        may: ['every', 'within'],
      })),
    ),
  )
  .superRefine((value, context) => {
    const given = [value.when, value['bits-set'], value['bits-clear']].filter((each) => each !== undefined);
    if (given.length === 1) return;
    const message = "ready has a 'when', or 'bits-set', or 'bits-clear'";
    context.addIssue({ code: 'custom', path: [], message });
  })
  .transform(({ ask, when, 'bits-set': set, 'bits-clear': clear, every, within }): Readiness => {
    if (when !== undefined) return { ask, when: { kind: 'answer', like: when }, every, within };
    const [bitsOf, are] = set === undefined ? ([clear ?? 0, 'clear'] as const) : ([set, 'set'] as const);
    return { ask, when: { kind: 'bits', bits: bitsOf, are }, every, within };
  })
  .describe("How the instrument says that it has done what it was told; for messages with 'until: ready'.");
