/**
 * The kinds of file a user writes, and what stands after `railproof:` in the first line of each: the kind
 * and the version of its format.
 */
export const headers = {
  module: 'module 1',
  bench: 'bench 1',
  driver: 'driver 1',
  procedure: 'procedure 1',
  tolerance: 'tolerance 1',
  stages: 'stages 1',
} as const;

export type FileKind = keyof typeof headers;

export const fileKinds = Object.keys(headers) as readonly FileKind[];
