import { beforeAll, describe, expect, it } from 'vitest';
import { Guards, type GuardLimits, type Told } from '../../src/bench/guards.js';
import type { Taken } from '../../src/bench/sample.js';
import type { Bench, BenchDrivers } from '../../src/files/bench.js';
import fc from '../property.js';
import { nursery } from './nursery-bench.js';

const limits: GuardLimits = {
  voltage: { value: 60, setBy: 'the bench' },
  current: { value: 20, setBy: 'the bench' },
  power: { value: 400, setBy: 'the bench' },
  ratedVoltage: 15,
};
let bench: Bench;
let drivers: BenchDrivers;

beforeAll(async () => {
  ({ description: bench, drivers } = await nursery());
});

const value = (number: number): Taken['measurement'] => ({ kind: 'value', value: number });

interface Read {
  readonly meter?: number;
  readonly load: number;
  readonly current: number;
}

function taken({ meter, load, current }: Read): Taken[] {
  return [
    ...(meter === undefined
      ? []
      : [{ of: 'meter', what: 'voltage', measurement: value(meter) } as const satisfies Taken]),
    { of: 'load', what: 'voltage', measurement: value(load) },
    { of: 'load', what: 'current', measurement: value(current) },
  ];
}

/** Lets the guards of one run look at samples one after the other; the number of the one that trips, from 1. */
function tripped(samples: readonly (Read & { readonly told: Told })[], change: Partial<Bench> = {}) {
  const guards = new Guards(limits, { ...bench, ...change }, drivers);
  for (const [index, { told, ...read }] of samples.entries()) {
    try {
      guards.look(taken(read), told);
    } catch (error) {
      return { at: index + 1, error };
    }
  }
  return undefined;
}

const times = <T>(count: number, one: T): T[] => Array.from({ length: count }, () => one);
const at = (set: number, current: number, volts = 15) => ({
  meter: volts,
  load: volts,
  current,
  told: { current: set },
});
const off = (current: number, volts = 15) => ({ meter: volts, load: volts, current, told: {} });

describe('a load that repeats its current while its set-point goes on', () => {
  it('stops the run at the third look that no regulating load could give', () => {
    const found = tripped([...times(5, at(2, 2.001)), ...times(5, at(2.5, 2.001))]);
    expect(found?.at).toBe(8);
    expect(found?.error).toMatchObject({
      code: 'GUARD_TRIPPED',
      exitCode: 3,
      guard: 'frozen-reading',
      message:
        "the load reads 2.001 A, digit for digit as before it was told 2.500 A, and the module's voltage is there",
    });
  });

  it('is found on the way down as on the way up, and from the zero that it read with its input off', () => {
    expect(tripped([...times(3, at(4, 4)), ...times(3, at(3, 4))])?.at).toBe(6);
    expect(tripped([...times(3, off(0)), ...times(3, at(1, 0))])?.at).toBe(6);
  });

  it('is found through looks with the input off, which a search takes between its probes', () => {
    expect(tripped([at(2, 2), at(3, 2), off(2), at(2, 2), at(3, 2), off(2), at(3, 2)])).toMatchObject({
      at: 7,
      error: { guard: 'frozen-reading' },
    });
  });

  it.each([
    ['a change that is within the error of a load', [...times(9, at(2, 2)), ...times(9, at(2.1, 2))]],
    [
      'a module at a limit that holds its current, where the voltage breaks down',
      [...times(5, at(5.3, 5.3)), ...times(200, at(6, 5.3, 1.1)), ...times(200, at(8, 5.3, 1.1))],
    ],
    [
      'a load that can not regulate with so little voltage',
      [...times(5, at(2, 2, 15)), ...times(9, at(4, 2, 7))],
    ],
    [
      'a constant voltage, at which the module does what it likes',
      times(99, {
        ...at(0, 5.3),
        told: { voltage: 12 },
      }),
    ],
    ['hours of the same', times(10_000, at(4, 4))],
    ['a load that is off for hours', times(10_000, off(0.003))],
    [
      'a reading that has moved by its last digit',
      [...times(5, at(2, 2)), ...[2.01, 2, 2.01, 2].map((amps) => at(4, amps))],
    ],
  ])('is not seen in %s', (_, samples) => {
    expect(tripped(samples)).toBeUndefined();
  });
});

describe('a meter that repeats its voltage while the load sees the module break down', () => {
  const held = { meter: 15.21, load: 15.1, current: 4, told: { current: 4 } };
  const gone = { meter: 15.21, load: 1.03, current: 0.4, told: { current: 6 } };

  it('stops the run at the third such look', () => {
    const found = tripped([held, held, gone, gone, gone]);
    expect(found?.at).toBe(5);
    expect(found?.error).toMatchObject({
      exitCode: 3,
      guard: 'frozen-reading',
      message:
        "the meter reads 15.21 V, digit for digit as before, while the load's voltage has gone to 1.030 V",
    });
  });

  it('is not seen where the meter has moved by its last digit, nor where leads may lose as much', () => {
    expect(tripped([held, held, ...times(9, { ...gone, meter: 15.2 })])).toBeUndefined();
    const leads = { resistance: 1, uncertainty: 0.5 };
    expect(tripped([held, ...times(9, { ...gone, load: 3.2, current: 6 })], { leads })).toBeUndefined();
  });

  it('is not seen where the meter is not at the module', () => {
    expect(tripped([held, ...times(9, gone)], { voltageFrom: 'load-terminals' })).toBeUndefined();
  });

  it('is not seen between a look and the next, when the output goes while it is read', () => {
    const wobbling = [held, gone, gone, held, gone, gone, held];
    expect(tripped(wobbling)).toBeUndefined();
  });
});

describe('what can not be', () => {
  it('is a current through an input that is off, three looks in a row, whatever lies between them', () => {
    const found = tripped([off(0.4), at(4, 4), off(0.5), at(3, 3), off(0.6)]);
    expect(found?.at).toBe(5);
    expect(found?.error).toMatchObject({
      exitCode: 3,
      guard: 'current-while-off',
      message: 'with its input off the load reads 600.0 mA, 3 times in a row',
    });
    expect(tripped([off(0.4), off(0.5), off(0), off(0.5), off(0.4)])).toBeUndefined();
  });

  it('is a current out of a load, three looks in a row', () => {
    const found = tripped([at(2, -0.3), at(2, -0.4), at(2, -0.5)]);
    expect(found?.at).toBe(3);
    expect(found?.error).toMatchObject({
      guard: 'implausible-reading',
      message: '3 times in a row the load reads -500.0 mA, and a load only takes current',
    });
    expect(tripped([off(-0.4), off(-0.5), off(0.01), off(-0.5), off(-0.5)])).toBeUndefined();
  });
});

/** How a healthy module gives in to a load that asks for more than it has. */
const styles = ['none', 'constant-current', 'foldback', 'hiccup', 'latch-off'] as const;

/** A healthy bench: what it is made of, and what is asked of it. */
const healthy = fc.record({
  droop: fc.oneof(fc.constant(0), fc.double({ min: 0, max: 0.08, noNaN: true })),
  leads: fc.double({ min: 0, max: 0.3, noNaN: true }),
  volts: fc.constantFrom(0.001, 0.01, 0.1),
  amps: fc.constantFrom(0.001, 0.01, 0.1),
  gain: fc.double({ min: -0.002, max: 0.002, noNaN: true }),
  offset: fc.double({ min: -0.01, max: 0.01, noNaN: true }),
  limit: fc.double({ min: 1, max: 8, noNaN: true }),
  style: fc.constantFrom(...styles),
  acts: fc.array(
    fc.record({
      told: fc.oneof(
        fc.constant<Told>({}),
        fc.double({ min: 0, max: 9, noNaN: true }).map((current): Told => ({ current })),
        fc.double({ min: 1, max: 15, noNaN: true }).map((voltage): Told => ({ voltage })),
      ),
      looks: fc.integer({ min: 1, max: 12 }),
      /** Whether a module that hiccups is just trying to start. */
      tries: fc.array(fc.boolean(), { minLength: 12, maxLength: 12 }),
      metered: fc.boolean(),
    }),
    { maxLength: 40 },
  ),
});

type Healthy = typeof healthy extends fc.Arbitrary<infer T> ? T : never;

/** What the instruments of a healthy bench read, to their last digits. */
function readingsOf(of: Healthy): (Read & { readonly told: Told })[] {
  const shown = (number: number, step: number): number => Math.round(number / step) * step;
  return of.acts.flatMap(({ told, looks, tries, metered }) =>
    Array.from({ length: looks }, (_, look) => {
      const { volts, current } = outputOf(of, told, tries[look] ?? false);
      return {
        ...(metered ? { meter: shown(volts, of.volts) } : {}),
        load: shown(Math.max(0, volts - current * of.leads), of.volts),
        current: shown(current * (1 + of.gain) + of.offset, of.amps),
        told,
      };
    }),
  );
}

function outputOf({ droop, limit, style }: Healthy, told: Told, tries: boolean) {
  const open = 15.21;
  if (told.voltage !== undefined) {
    const wanted = droop === 0 ? limit : (open - told.voltage) / droop;
    return { volts: told.voltage, current: Math.min(limit, wanted) };
  }
  const set = told.current ?? 0;
  if (style === 'none' || set <= limit) return { volts: open - set * droop, current: set };
  switch (style) {
    case 'constant-current':
      return { volts: 1, current: limit };
    case 'foldback':
      return { volts: 1, current: limit / 3 };
    case 'hiccup':
      return tries ? { volts: 1, current: limit } : { volts: 0, current: 0 };
    case 'latch-off':
      return { volts: 0, current: 0 };
  }
}

it('a healthy bench never trips, however coarse its instruments and whatever the module does at its limit', () => {
  fc.assert(
    fc.property(healthy, (of) => {
      // Of a coarse instrument the last digit is part of what its driver promises.
      const promise = { ofReading: 0.002, fixed: 0.01 };
      const load = {
        ...drivers.load,
        accuracy: {
          voltage: { ...promise, resolution: of.volts },
          current: { ...promise, resolution: of.amps },
        },
      };
      const guards = new Guards(limits, bench, { ...drivers, load });
      for (const { told, ...read } of readingsOf(of)) guards.look(taken(read), told);
    }),
    { numRuns: 2000 },
  );
});

it('a load that freezes in the middle of a ramp never gets far, whatever its step', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0.3, max: 2, noNaN: true }),
      fc.integer({ min: 1, max: 5 }),
      fc.integer({ min: 3, max: 8 }),
      (step, frozenAt, readings) => {
        const ramp = Array.from({ length: 12 }, (_, index) =>
          times(readings, at(index * step, Math.min(index, frozenAt) * step)),
        ).flat();
        fc.pre(step * 11 < 18);
        const found = tripped(ramp);
        expect(found?.error).toMatchObject({ guard: 'frozen-reading' });
        // 5 % and 50 mA, and what is promised, is passed at the latest two steps further on.
        expect(found?.at).toBeLessThanOrEqual((frozenAt + 3) * readings);
      },
    ),
  );
});
