import type * as z from '../libraries/zod.js';
import { checkValue } from '../files/check-value.js';
import { UnfitAnswerError } from './questions.js';

/** Reads an answer as the key of a file is read, with the same complaints. */
export function readBy<T>(schema: z.ZodType<T>): (answer: unknown) => T {
  return (answer) => {
    const checked = checkValue(schema, answer);
    if (checked.kind === 'good') return checked.value;
    throw new UnfitAnswerError(checked.complaints.map(({ message }) => message).join('; '));
  };
}
