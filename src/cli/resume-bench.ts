import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { type Bench, type InstrumentPlace, postsOf } from '../files/bench.js';

/** The bench that a run is to go on with is another one than it was begun on. */
export class OtherBenchError extends RailproofError {
  readonly code = 'OTHER_BENCH';
  readonly exitCode = exitCodes.badFile;
  /** Where in a bench file the first difference is: `limits.current`. */
  readonly place: string;

  constructor(bench: string, { place, recorded, given }: Difference) {
    super(`${bench} is not the bench of the record: ${place} was ${recorded} and is ${given}`, {
      advice: 'only the connections may be others now; on another bench, run it afresh',
    });
    this.place = place;
  }
}

interface Difference {
  readonly place: string;
  readonly recorded: string;
  readonly given: string;
}

/**
 * Whether a bench is the recorded one, perhaps at other addresses.
 * @throws OtherBenchError naming the first difference
 */
export function requireSameBench(given: Bench, path: string, recorded: Bench): void {
  const difference = firstDifference(withoutAddresses(recorded), withoutAddresses(given), []);
  if (difference !== undefined) throw new OtherBenchError(path, difference);
}

/** A bench whose instruments are nowhere, and nobody's answers recorded. */
function withoutAddresses(bench: Bench): unknown {
  const places = new Set<unknown>(postsOf(bench).map(([, place]) => place));
  return JSON.parse(
    JSON.stringify({ ...bench, operator: undefined }, (_key, value: unknown) =>
      places.has(value)
        ? { ...(value as InstrumentPlace), connection: undefined, channel: undefined }
        : value,
    ),
  );
}

function firstDifference(recorded: unknown, given: unknown, path: readonly string[]): Difference | undefined {
  if (recorded === given) return undefined;
  if (!isPlain(recorded) || !isPlain(given)) {
    return { place: path.join('.'), recorded: inWords(recorded), given: inWords(given) };
  }
  for (const key of new Set([...Object.keys(recorded), ...Object.keys(given)])) {
    const found = firstDifference(recorded[key], given[key], [...path, asWritten(key)]);
    if (found !== undefined) return found;
  }
  return undefined;
}

function isPlain(value: unknown): value is Readonly<Record<string, unknown>> {
  return typeof value === 'object' && value !== null;
}

/** A key as files write it: `voltage-from`. */
function asWritten(key: string): string {
  return key.replace(/[A-Z]/g, (capital) => `-${capital.toLowerCase()}`);
}

function inWords(value: unknown): string {
  if (value === undefined) return 'not there';
  return isPlain(value) ? 'there' : JSON.stringify(value);
}
