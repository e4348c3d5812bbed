/**
 * The part of a driver that was at work when something went wrong, so that the line of its file can be named
 * to whoever must mend it.
 */
export interface DriverPart {
  /** The driver's name. */
  readonly driver: string;
  readonly section:
    | 'remote'
    | 'identify'
    | 'errors'
    | 'ready'
    | 'channels'
    | 'prepare'
    | 'release'
    | 'local'
    | 'operations'
    | 'readings';
  /** Of the operation or the reading. */
  readonly name?: string;
  /** Of the ranges of a reading. */
  readonly range?: number;
  /** Which of its messages, where that is known: several may be told before anything is asked about them. */
  readonly index?: number;
}

/** Where it stands in the driver's file, as far as it is known: `operations`, `set-current`, `0`. */
export function pathOf({ section, name, range, index }: DriverPart): readonly (string | number)[] {
  const list = range === undefined ? ['ask'] : ['ranges', range, 'select'];
  return [
    section,
    ...(name === undefined ? [] : [name]),
    ...(section === 'readings' && (range !== undefined || index !== undefined) ? list : []),
    ...(index === undefined ? [] : [index]),
  ];
}
