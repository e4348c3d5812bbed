import { PointCollector, type PointEvidence } from '../../src/analysis/point-evidence.js';
import type { PointBegan, PointOutcome, ReadingTaken } from '../../src/record/journal-event.js';

export interface LookGiven {
  readonly t: number;
  readonly temperatures?: readonly number[];
  readonly voltages: readonly number[];
  readonly outcome?: PointOutcome | undefined;
  readonly phase?: PointBegan['phase'];
  readonly set?: PointBegan['set'];
  readonly point?: number;
}

/** A look of a soak as the evidence has it that boils down its readings. */
export function lookOf(given: LookGiven): PointEvidence {
  const { t, voltages, temperatures = [], outcome = 'held', phase = 'soak', set = { current: 4 } } = given;
  const { point = 1 } = given;
  const bench = { voltageFrom: 'meter-at-module', leads: { resistance: 0, uncertainty: 0 } } as const;
  const collector = new PointCollector(bench, { event: 'point-began', step: 1, point, phase, set }, t);
  const read = (sample: number, of: string, what: string, value: number): void => {
    const reading: ReadingTaken = { event: 'reading', step: 1, point, sample, of, what, value };
    collector.add(reading);
  };
  voltages.forEach((volts, index) => {
    const celsius = temperatures[index];
    read(index + 1, 'meter', 'voltage', volts);
    if (celsius !== undefined) read(index + 1, 'thermometer', 'temperature', celsius);
    read(index + 1, 'load', 'voltage', volts - 0.1);
    read(index + 1, 'load', 'current', set.current ?? 0);
  });
  collector.point.outcome = outcome;
  return collector.point;
}

/** What a point says, as plain numbers and words that can be compared to the last digit. */
export function saidBy(point: PointEvidence): unknown {
  const moments = ({ moduleVoltage, loadVoltage, meterVoltage, current, temperature }: PointEvidence) =>
    [moduleVoltage, loadVoltage, meterVoltage, current, temperature].map((of) =>
      of.count === 0 ? 0 : [of.count, of.mean, of.sampleVariance, of.minimum, of.maximum],
    );
  const { looks, reach, phase, set, t, outcome, voltageBy, of, samples, taps, resistance } = point;
  return {
    ...{ point: point.point, looks, reach, phase, set, t, outcome, voltageBy, of, samples },
    taps: [...taps].map(([at, { count, mean }]) => [at, count, mean]),
    resistance: [resistance.values.count, resistance.open],
    moments: moments(point),
  };
}
