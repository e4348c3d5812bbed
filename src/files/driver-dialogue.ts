import type { Dimension } from '../quantity/quantity.js';

/**
 * One exchange of the `dialogue` of a driver file: what must be sent, and what an answer must be taken for.
 * `railproof check` goes through them without an instrument.
 */
export type Exchange =
  | { readonly kind: 'identity'; readonly answer: string; readonly is: IdentityMeaning }
  | {
      readonly kind: 'operation';
      readonly operation: string;
      /** In the unit of what the operation sets; for a scanner the number of the channel. */
      readonly value?: number;
      readonly channel?: number;
      readonly sends: readonly string[];
    }
  | {
      readonly kind: 'reading';
      readonly reading: string;
      readonly channel?: number;
      /** Of a list, the last one is the question. */
      readonly sends?: readonly string[];
      readonly heard?: { readonly answer: string; readonly is: ReadingMeaning };
    }
  | { readonly kind: 'errors'; readonly answer: string; readonly is: ErrorMeaning }
  | { readonly kind: 'ready'; readonly answer: string; readonly is: ReadyMeaning };

/** What an answer to a reading is taken for; a number is in the unit of its dimension. */
export type ReadingMeaning =
  | { readonly kind: 'number'; readonly value: number; readonly dimension: Dimension }
  | { readonly kind: 'overload' | 'not-a-number' | 'not-understood' }
  | { readonly kind: 'flag'; readonly value: boolean }
  /** Null where no channel is closed. */
  | { readonly kind: 'channel'; readonly value: number | null };

export type IdentityMeaning = (typeof identityMeanings)[number];
export type ErrorMeaning = (typeof errorMeanings)[number];
export type ReadyMeaning = (typeof readyMeanings)[number];

export const identityMeanings = ['understood', 'not-understood'] as const;
/** `harmless` is passed over, `again` has the message sent once more. */
export const errorMeanings = ['clear', 'error', 'harmless', 'again', 'not-understood'] as const;
export const readyMeanings = ['yes', 'no', 'not-understood'] as const;
