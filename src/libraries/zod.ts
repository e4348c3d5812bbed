/**
 * What is used of zod, by name, so that the build can put just this into one file (`join-libraries.js`): the whole of
 * it is some hundred files, and takes six times as long to load.
 */
export {
  array,
  boolean,
  discriminatedUnion,
  enum,
  int,
  iso,
  lazy,
  literal,
  NEVER,
  null,
  number,
  object,
  record,
  strictObject,
  string,
  toJSONSchema,
  tuple,
  union,
  unknown,
} from 'zod';
export type {
  core,
  infer,
  output,
  ZodArray,
  ZodEnum,
  ZodExactOptional,
  ZodInt,
  ZodObject,
  ZodPipe,
  ZodString,
  ZodTransform,
  ZodType,
  ZodUnion,
  ZodUnknown,
} from 'zod';
