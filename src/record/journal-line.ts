import { dimensions } from '../quantity/quantity.js';
import { type JournalEvent, journalFormat, mustBeSealed, phases, type TimedEvent } from './journal-event.js';
import { endsInSeal } from './seal.js';

/**
 * The event that a line of a journal holds; undefined when it holds none: not JSON, an unknown event, a
 * field of the wrong kind, a seal that is missing where there must be one. The first line, and no other,
 * is `opened`. By hand, not by a schema: there may be millions of these lines.
 */
export function parseLine(line: string, first: boolean): TimedEvent | undefined {
  const event = parseJson(line);
  if (typeof event !== 'object' || event === null || Array.isArray(event)) return undefined;
  const fields = event as Readonly<Record<string, unknown>>;
  const { event: name, t } = fields;
  const shape = typeof name === 'string' ? shapes.get(name) : undefined;
  if (shape === undefined || !isNumber(t) || first !== (name === 'opened')) return undefined;
  if (needsSeal(fields) && !endsInSeal(line)) return undefined;
  return shape.every(({ field, fits }) => fits(fields[field])) ? (event as TimedEvent) : undefined;
}

/** Nor is anything carried on from the end of a step that bears none. */
function needsSeal({ event, carried }: Readonly<Record<string, unknown>>): boolean {
  return (
    mustBeSealed.has(event as JournalEvent['event']) || (event === 'step-ended' && carried !== undefined)
  );
}

/** The seal of an event that `parseLine` gave, where it is one that is not believed without; undefined for others. */
export function sealOf(event: TimedEvent): string | undefined {
  const fields = event as TimedEvent & Readonly<Record<string, unknown>>;
  const { seal } = fields;
  return needsSeal(fields) && typeof seal === 'string' ? seal : undefined;
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}

type Fits = (value: unknown) => boolean;

const isNumber: Fits = (value) => Number.isFinite(value);
const isCount: Fits = (value) => Number.isSafeInteger(value) && (value as number) > 0;
const isText: Fits = (value) => typeof value === 'string';
const isFlag: Fits = (value) => typeof value === 'boolean';
const isOneOf = (words: readonly string[]): Fits => {
  const known = new Set<unknown>(words);
  return (value) => known.has(value);
};
const orNull =
  (fits: Fits): Fits =>
  (value) =>
    value === null || fits(value);
const ifThere =
  (fits: Fits): Fits =>
  (value) =>
    value === undefined || fits(value);

const isSetPoint: Fits = (value) => {
  if (typeof value !== 'object' || value === null) return false;
  const { current, voltage } = value as Readonly<Record<string, unknown>>;
  return ifThere(isNumber)(current) && ifThere(isNumber)(voltage);
};

const isRecordOf =
  (fits: Fits): Fits =>
  (value) =>
    typeof value === 'object' && value !== null && !Array.isArray(value) && Object.values(value).every(fits);

const isCarried: Fits = (value) => {
  if (typeof value !== 'object' || value === null) return false;
  const { known, tried, earths } = value as Readonly<Record<string, unknown>>;
  return isRecordOf(isNumber)(known) && isRecordOf(isNumber)(tried) && isRecordOf(isText)(earths);
};

/** For every event, every field but its name. */
type Shapes = {
  readonly [Name in JournalEvent['event']]: Readonly<
    Record<Exclude<keyof Extract<JournalEvent, { event: Name }>, 'event'>, Fits>
  >;
};

const shapeOf: Shapes = {
  opened: { format: isOneOf([journalFormat]), wallClock: isText, header: isText },
  resumed: { run: isText, header: isText, began: isText, steps: isCount },
  instrument: { role: isText, address: isText, identity: isText },
  caution: { name: isText, by: isOneOf(['operator', '--yes', 'simulated-operator']) },
  'step-began': { step: isCount, kind: isText },
  'point-began': {
    step: isCount,
    point: isCount,
    phase: isOneOf(phases),
    set: isSetPoint,
    of: ifThere(isText),
  },
  reading: {
    step: isCount,
    point: isCount,
    sample: isCount,
    of: isText,
    what: isText,
    at: ifThere(isText),
    value: orNull(isNumber),
    problem: ifThere(isOneOf(['overload', 'not-a-number'])),
  },
  'point-ended': {
    step: isCount,
    point: isCount,
    outcome: isOneOf(['held', 'dropped', 'measured', 'interrupted']),
  },
  input: { state: isOneOf(['on', 'off']), confirmed: isFlag },
  recovery: {
    step: isCount,
    outcome: isOneOf(['came-back', 'stayed-off', 'came-back-after-cycling']),
    after: isNumber,
    within: isNumber,
    untimed: ifThere(isFlag),
  },
  prompt: { step: isCount, text: isText, act: ifThere(isText) },
  answer: {
    step: isCount,
    name: isText,
    answer: isText,
    value: ifThere(isNumber),
    dimension: ifThere(isOneOf(Object.keys(dimensions))),
  },
  notice: { text: isText },
  'guard-tripped': { guard: isText, text: isText },
  'step-ended': { step: isCount, carried: ifThere(isCarried) },
  ended: { how: isOneOf(['completed', 'stopped', 'failed']), reason: orNull(isText), status: isNumber },
};

const shapes: ReadonlyMap<string, readonly { readonly field: string; readonly fits: Fits }[]> = new Map(
  Object.entries(shapeOf).map(([name, fields]) => [
    name,
    Object.entries(fields).map(([field, fits]) => ({ field, fits })),
  ]),
);
