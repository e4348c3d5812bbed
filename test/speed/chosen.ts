/** Which benchmarks are to be measured, or why there is none of that name. */
export type Chosen =
  | { readonly kind: 'names'; readonly names: readonly string[] }
  | { readonly kind: 'unknown'; readonly message: string };

/** All of them, or the one that was asked for. */
export function chosenFrom(all: readonly string[], only: string | undefined): Chosen {
  if (only === undefined) return { kind: 'names', names: all };
  if (all.includes(only)) return { kind: 'names', names: [only] };
  return { kind: 'unknown', message: `no benchmark is called '${only}'; there are ${all.join(', ')}` };
}
