import type * as z from '../libraries/zod.js';

type Camel<S extends string> = S extends `${infer Head}-${infer Tail}`
  ? `${Head}${Capitalize<Camel<Tail>>}`
  : S;

/** An object's keys as the program writes them. */
export type CamelKeys<T> = { [K in keyof T as K extends string ? Camel<K> : never]: T[K] };

/** A map as files write it, `droop-resistance`, becomes an object as the program writes it, `droopResistance`. */
export function camelKeys<S extends z.ZodObject>(
  schema: S,
): z.ZodPipe<S, z.ZodTransform<CamelKeys<z.output<S>>, z.output<S>>> {
  return schema.transform((value) => renamed(value) as CamelKeys<z.output<S>>);
}

/** The same for a whole file, whose first line has done its work by then. */
export function withoutHeader<T extends { railproof: string }>(file: T): CamelKeys<Omit<T, 'railproof'>> {
  const rest = Object.entries(file).filter(([key]) => key !== 'railproof');
  return renamed(Object.fromEntries(rest)) as CamelKeys<Omit<T, 'railproof'>>;
}

function renamed(value: object): object {
  return Object.fromEntries(Object.entries(value).map(([key, each]) => [camel(key), each as unknown]));
}

function camel(key: string): string {
  return key.replace(/-([a-z])/g, (_, letter: string) => letter.toUpperCase());
}
