import { describe, expect, it } from 'vitest';
import type { TimedEvent } from '../../src/record/journal-event.js';
import { collected, evidenceOf, eventsOf, headerOf } from './evidence-of.js';

const atLoad = headerOf({ voltageFrom: 'load-terminals', leads: { resistance: 0.05, uncertainty: 0 } });

function onlyPoint(...samples: Parameters<typeof evidenceOf>[0][number]['points'] & object) {
  const point = evidenceOf([{ kind: 'load-ramp', points: samples }]).steps[0]?.points[0];
  if (point === undefined) throw new Error('no point');
  return point;
}

describe('the evidence of a journal', () => {
  it('boils the readings of a point down to their mean, spread and number', () => {
    const samples = [15.2, 15.1, 15.3].map((meter) => ({ meter, load: meter - 0.1, current: 2 }));
    const { moduleVoltage, loadVoltage, current } = onlyPoint({ set: 2, samples });
    expect([moduleVoltage.count, moduleVoltage.mean, moduleVoltage.sampleDeviation]).toEqual([
      3,
      expect.closeTo(15.2, 12),
      expect.closeTo(0.1, 12),
    ]);
    expect(loadVoltage.mean).toBeCloseTo(15.1, 12);
    expect(current.mean).toBe(2);
  });

  it('adds what the leads lose where the voltage is read at the load', () => {
    const points = [{ set: 2, samples: [{ load: 15, current: 2 }] }];
    const point = evidenceOf([{ kind: 'load-ramp', points }], atLoad).steps[0]?.points[0];
    expect(point?.moduleVoltage.mean).toBeCloseTo(15.1, 12);
  });

  it('takes nothing for a value that the instrument said it has not', () => {
    const samples = [
      { meter: null, load: 15, current: 2 },
      { meter: 15.1, load: 15, current: null },
    ];
    const { moduleVoltage, loadVoltage, current } = onlyPoint({ set: 2, samples });
    expect([moduleVoltage.count, loadVoltage.count, current.count]).toEqual([1, 2, 1]);
    expect(moduleVoltage.mean).toBe(15.1);
  });

  // Source: SCPI-1999, volume 1: 9.9E37 is infinity and 9.91E37 is not a number (fixtures/reference/scpi-488.json).
  it.each(['1e999', '9.9e37', '-9.9e37', '9.91e37'])(
    'takes nothing for %s, which a journal made elsewhere may hold',
    (text) => {
      const value = JSON.parse(text) as number;
      const { moduleVoltage, current, samples } = onlyPoint({
        phase: 'overload',
        set: 2,
        samples: [{ meter: value, current: value }],
      });
      expect([moduleVoltage.count, current.count]).toEqual([0, 0]);
      expect(samples).toEqual([{ voltage: Number.NaN, current: Number.NaN }]);
    },
  );

  it('does not lend the reading of a broken-off sample to the next point', () => {
    const events: readonly TimedEvent[] = [
      { t: 0, event: 'step-began', step: 1, kind: 'load-ramp' },
      { t: 0, event: 'point-began', step: 1, point: 1, phase: 'ramp', set: { current: 1 } },
      { t: 1, event: 'reading', step: 1, point: 1, sample: 1, of: 'meter', what: 'voltage', value: 99 },
      { t: 1, event: 'point-began', step: 1, point: 2, phase: 'ramp', set: { current: 2 } },
      { t: 2, event: 'reading', step: 1, point: 2, sample: 1, of: 'load', what: 'current', value: 2 },
    ];
    const point = collected(events, headerOf()).steps[0]?.points[1];
    expect([point?.moduleVoltage.count, point?.current.count]).toEqual([0, 1]);
  });

  it('keeps the samples of an overload one by one, and no more than five hundred of them', () => {
    const samples = Array.from({ length: 700 }, (_, index) => ({ meter: 1, load: 1, current: index }));
    const overload = onlyPoint({ phase: 'overload', set: 5, outcome: 'measured', samples });
    expect(overload.samples).toHaveLength(500);
    expect(overload.samples[3]).toEqual({ voltage: 1, current: 3 });
    expect(overload.current.count).toBe(700);
    expect(onlyPoint({ phase: 'ramp', set: 5, samples }).samples).toEqual([]);
  });

  it('knows how a record ended, and that one which was cut off has no end', () => {
    const steps = [
      { kind: 'load-ramp', points: [{ set: 1, outcome: null, samples: [{ meter: 15, current: 1 }] }] },
    ];
    expect(evidenceOf(steps).ended?.how).toBe('completed');
    const cut = collected(eventsOf(steps, false), headerOf());
    expect(cut.ended).toBeUndefined();
    expect(cut.steps[0]?.points[0]?.outcome).toBeUndefined();
    expect(cut.readings).toBe(2);
  });

  it('keeps the first guard that tripped', () => {
    const trip = (guard: string): TimedEvent => ({ t: 1, event: 'guard-tripped', guard, text: '' });
    expect(collected([trip('over-voltage'), trip('over-power')], headerOf()).tripped?.guard).toBe(
      'over-voltage',
    );
  });
});
