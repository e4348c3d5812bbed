import type { JournalEvent } from '../../src/record/journal-event.js';
import { evenly, type Recovered, type Step } from './evidence-of.js';

/** What the module gives at a voltage that is held, sample by sample; `null` is nothing at all. */
export type Gives = (voltage: number, sample: number) => number | null;

/** The events of a trace over these voltages, ten samples a point, read without error. */
export function traced(
  gives: Gives,
  voltages: readonly number[],
  recoveries: readonly Recovered[] = [],
  step = 1,
): Step {
  const more: JournalEvent[] = voltages.flatMap((voltage, index) => {
    const point = index + 1;
    return [
      { event: 'point-began', step, point, phase: 'trace', set: { voltage } },
      ...evenly(0, 9, 10).flatMap((sample): JournalEvent[] => {
        const current = gives(voltage, sample);
        const read = { event: 'reading', step, point, sample: sample + 1 } as const;
        return [
          { ...read, of: 'meter', what: 'voltage', value: current === null ? 0 : voltage },
          { ...read, of: 'load', what: 'voltage', value: current === null ? 0 : voltage },
          { ...read, of: 'load', what: 'current', value: current ?? 0 },
        ];
      }),
      { event: 'point-ended', step, point, outcome: 'measured' },
    ] satisfies JournalEvent[];
  });
  return { kind: 'limit-trace', recoveries, more };
}
