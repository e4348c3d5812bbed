import type { JournalEvent, TimedEvent } from '../../src/record/journal-event.js';
import type { RunHeader } from '../../src/record/run-header.js';
import { headerOf } from './evidence-of.js';

export interface SoakGiven {
  readonly current?: number;
  readonly until?: number;
  readonly every?: number;
  readonly temperature?: ((t: number) => number) | undefined;
  readonly voltage?: (t: number) => number;
  readonly dropsAt?: number;
}

/** To 59 °C, with a time constant of 12 min. */
export const warming = (t: number): number => 23 + 36 * (1 - Math.exp(-t / 720));

/** The events of a soak with a look each 20 s unless told otherwise, after three looks at the cold module. */
export function soak(step: number, from: number, given: SoakGiven): readonly TimedEvent[] {
  const {
    current = 4,
    until = 6000,
    every = 20,
    temperature,
    voltage = () => 15.1,
    dropsAt = Infinity,
  } = given;
  const events: TimedEvent[] = [{ t: from, event: 'step-began', step, kind: 'soak' }];
  let point = 0;
  const look = (t: number, phase: 'idle' | 'soak', outcome: 'measured' | 'held' | 'dropped'): void => {
    point += 1;
    const set = phase === 'idle' ? {} : { current };
    const read: JournalEvent[] = [
      { event: 'point-began', step, point, phase, set },
      ...[1, 2].flatMap((sample): JournalEvent[] => {
        const reading = { event: 'reading', step, point, sample } as const;
        return [
          { ...reading, of: 'meter', what: 'voltage', value: voltage(Math.max(0, t)) },
          ...(temperature === undefined
            ? []
            : [
                {
                  ...reading,
                  of: 'thermometer',
                  what: 'temperature',
                  value: temperature(Math.max(0, t)),
                } as const,
              ]),
          { ...reading, of: 'load', what: 'current', value: phase === 'idle' ? 0 : current },
        ];
      }),
      { event: 'point-ended', step, point, outcome },
    ];
    events.push(...read.map((event) => ({ t: from + t + 10, ...event })));
  };
  for (const t of [-9, -6, -3]) look(t, 'idle', 'measured');
  for (let t = 0; t <= until; t += every) {
    look(t, 'soak', t >= dropsAt ? 'dropped' : 'held');
    if (t >= dropsAt) break;
  }
  return events;
}

/** With a thermometer whose standard uncertainties are 1 % and 1 K. */
export function thermometerHeader(change: Partial<RunHeader['bench']> = {}, settings = {}): RunHeader {
  const header = headerOf();
  const root = Math.sqrt(3);
  return {
    ...header,
    bench: { ...header.bench, ...change },
    steps: [{ kind: 'soak', summary: '', settings: { over: 600, ...settings } }],
    instruments: [
      ...header.instruments,
      {
        role: 'thermometer',
        driver: 'thermometer-scpi',
        address: 'simulated:',
        identity: 'a thermometer',
        accuracy: { temperature: { ofReading: 0.01 * root, fixed: 1 * root } },
        ratings: {},
      },
    ],
  };
}
