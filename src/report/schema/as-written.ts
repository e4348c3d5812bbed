import type * as z from '../../libraries/zod.js';

/**
 * What a writer of JSON hands over: the type that the schema of the format stands for, nothing of it to be changed.
 * So a key that is written and not described, or described and not written, does not compile. Only the type is
 * taken over: whoever writes loads no schema.
 */
export type AsWritten<Schema extends z.ZodType> = Fixed<z.output<Schema>>;

type Fixed<T> = { readonly [Key in keyof T]: Fixed<T[Key]> };
