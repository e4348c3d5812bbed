import { type Evidence, EvidenceCollector } from '../../src/analysis/evidence.js';
import type { JournalEvent, Phase, PointOutcome, TimedEvent } from '../../src/record/journal-event.js';
import { headerFormat, type RunHeader } from '../../src/record/run-header.js';

/** One sample as the instruments read it; null where an instrument said that it has no value. */
export interface Sample {
  readonly meter?: number | null;
  readonly load?: number | null;
  readonly current: number | null;
}

export interface Point {
  readonly phase?: Phase;
  readonly set?: number;
  /** `null` for a point that was cut off in its middle. */
  readonly outcome?: PointOutcome | null;
  readonly samples: readonly Sample[];
}

export type Recovered = readonly ['came-back' | 'stayed-off' | 'came-back-after-cycling', number, number];

export interface Step {
  readonly kind: string;
  readonly points?: readonly Point[];
  readonly recoveries?: readonly Recovered[];
  readonly more?: readonly JournalEvent[];
}

/** Instruments whose promises are easy to reckon with: √3 in a half-width is 1 in a standard uncertainty. */
export const faultless = { voltage: { ofReading: 0, fixed: 0 }, current: { ofReading: 0, fixed: 0 } };

interface HeaderParts {
  readonly meter?: RunHeader['instruments'][number]['accuracy'];
  readonly load?: RunHeader['instruments'][number]['accuracy'];
  readonly voltageFrom?: RunHeader['bench']['voltageFrom'];
  readonly leads?: RunHeader['bench']['leads'];
  readonly rated?: RunHeader['modules'][number]['rated'];
  readonly criteria?: RunHeader['criteria'];
  readonly margin?: number;
}

/** The header of a record of K1 on a bench whose instruments are faultless unless told otherwise. */
export function headerOf(parts: HeaderParts = {}): RunHeader {
  const instrument = (role: string, accuracy: HeaderParts['load']): RunHeader['instruments'][number] => ({
    role,
    driver: `${role}-scpi`,
    address: 'simulated:',
    identity: `a ${role}`,
    accuracy: accuracy ?? faultless,
    ratings: {},
  });
  return {
    format: headerFormat,
    program: { name: 'railproof', version: '0.1.0' },
    began: '2026-12-01T08:30:00.000Z',
    modules: [
      {
        name: 'K1',
        description: '15 V brick from a retired label printer',
        rated: parts.rated ?? { voltage: 15, current: 4 },
        protectionClass: 'II',
        input: 'mains',
        outputIsolation: 'unknown',
        changes: [],
      },
    ],
    circuit: 'single',
    bench: {
      name: 'nursery bench',
      leads: parts.leads ?? { resistance: 0.035, uncertainty: 0.005 },
      voltageFrom: parts.voltageFrom ?? 'meter-at-module',
      simulated: true,
    },
    procedure: { name: 'real-limit', title: 'What one module really delivers', cautions: [] },
    steps: [],
    criteria: parts.criteria ?? [],
    derating: { margin: parts.margin ?? 0.8, aboveNameplate: 'never' },
    instruments: [instrument('load', parts.load), instrument('meter', parts.meter)],
    files: [],
  };
}

/** The events of a journal that holds these steps, one second a point. */
export function eventsOf(steps: readonly Step[], ended = true): readonly TimedEvent[] {
  const events: TimedEvent[] = [];
  let t = 0;
  const add = (event: JournalEvent): void => {
    events.push({ t, ...event });
  };
  add({ event: 'opened', format: 'railproof/journal 1', wallClock: '2026-12-01T08:30:00.000Z', header: '' });
  steps.forEach(({ kind, points = [], recoveries = [], more = [] }, index) => {
    const step = index + 1;
    add({ event: 'step-began', step, kind });
    points.forEach(({ phase = 'ramp', set, outcome = 'held', samples }, at) => {
      const point = at + 1;
      t += 1;
      add({ event: 'point-began', step, point, phase, set: set === undefined ? {} : { current: set } });
      samples.forEach((sample, taken) => {
        for (const [of, what, value] of readingsOf(sample)) {
          const problem = value === null ? { problem: 'not-a-number' as const } : {};
          add({ event: 'reading', step, point, sample: taken + 1, of, what, value, ...problem });
        }
      });
      if (outcome !== null) add({ event: 'point-ended', step, point, outcome });
    });
    for (const [outcome, after, within] of recoveries) {
      add({ event: 'recovery', step, outcome, after, within });
    }
    more.forEach(add);
    add({ event: 'step-ended', step });
  });
  if (ended) add({ event: 'ended', how: 'completed', reason: null, status: 0 });
  return events;
}

function readingsOf({ meter, load, current }: Sample): [of: string, what: string, value: number | null][] {
  return [
    ...(meter === undefined ? [] : ([['meter', 'voltage', meter]] as [string, string, number | null][])),
    ...(load === undefined ? [] : ([['load', 'voltage', load]] as [string, string, number | null][])),
    ['load', 'current', current],
  ];
}

export function evidenceOf(steps: readonly Step[], header = headerOf()): Evidence {
  return collected(eventsOf(steps), header);
}

export function collected(events: Iterable<TimedEvent>, header: RunHeader): Evidence {
  const collector = new EvidenceCollector(header);
  for (const event of events) collector.add(event);
  return collector.result();
}

/** A ramp of held points with one sample each, read without error, at the module and at the load. */
export function ramp(
  currents: readonly number[],
  voltage: (current: number) => number,
  leads = 0.035,
): readonly Point[] {
  return currents.map((current) => {
    const meter = voltage(current);
    return { set: current, samples: [{ meter, load: meter - leads * current, current }] };
  });
}

/** `count` values from one end to the other, both included. */
export function evenly(from: number, to: number, count: number): readonly number[] {
  return Array.from({ length: count }, (_, index) => from + ((to - from) * index) / (count - 1));
}
