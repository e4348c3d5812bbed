import { describe, expect, it } from 'vitest';
import { BlindSamples, guard, type GuardLimits, valueOf } from '../../src/bench/guards.js';
import type { Taken } from '../../src/bench/sample.js';
import fc from '../property.js';

const limits: GuardLimits = {
  voltage: { value: 60, setBy: 'the bench' },
  current: { value: 8, setBy: 'the bench' },
  power: { value: 150, setBy: "the load's rating" },
  ratedVoltage: 15,
};

type Measurement = Taken['measurement'];
const value = (number: number): Measurement => ({ kind: 'value', value: number });
const overload: Measurement = { kind: 'overload' };
const nothing: Measurement = { kind: 'not-a-number' };

function sample(meter: Measurement, volts: Measurement, amps: Measurement): Taken[] {
  return [
    { of: 'meter', what: 'voltage', measurement: meter },
    { of: 'load', what: 'voltage', measurement: volts },
    { of: 'load', what: 'current', measurement: amps },
  ];
}

describe('a guard lets pass', () => {
  it.each([
    ['a module at work', sample(value(15.1), value(14.96), value(4))],
    ['a module that is off', sample(value(0), value(0), value(0))],
    ['the last digits of an instrument below zero', sample(value(-0.003), value(-0.012), value(-0.004))],
    ['a reading that an instrument could not give', sample(nothing, nothing, nothing)],
    ['exactly the limits', sample(value(60), value(60), value(2.5))],
    ["a current above the ceiling by the load's own error", sample(value(15), value(15), value(8.03))],
  ])('%s', (_, taken) => {
    expect(() => {
      guard(taken, limits);
    }).not.toThrow();
  });
});

describe('a guard stops the run, saying what was read and who set the limit, at', () => {
  it.each([
    [
      'over-voltage',
      'over-voltage',
      sample(value(60.4), value(15), value(0)),
      'the meter reads 60.40 V and the bench allows 60 V',
    ],
    [
      'over-voltage at the load',
      'over-voltage',
      sample(value(15), value(61), value(0)),
      'the load reads 61.00 V and the bench allows 60 V',
    ],
    [
      'reversed polarity',
      'reversed-polarity',
      sample(value(-15.2), value(-15.2), value(0)),
      'the meter reads -15.20 V: the polarity is reversed',
    ],
    [
      'over-current',
      'over-current',
      sample(value(15), value(15), value(9)),
      'the load reads 9.000 A and the bench allows 8 A',
    ],
    [
      'over-power',
      'over-power',
      sample(value(30), value(29), value(6)),
      "the load takes 174.0 W and the load's rating allows 150 W",
    ],
    [
      'over-power where the load can not read its voltage',
      'over-power',
      sample(value(30), nothing, value(6)),
      "the load takes 180.0 W and the load's rating allows 150 W",
    ],
    [
      'over-power by little, to four digits and no more',
      'over-power',
      sample(value(30), value(30.123456789), value(5)),
      "the load takes 150.6 W and the load's rating allows 150 W",
    ],
    [
      'an overload of the meter',
      'over-voltage',
      sample(overload, value(15), value(1)),
      'the meter shows overload instead of a voltage',
    ],
    [
      'an overload of the load',
      'over-current',
      sample(value(15), value(15), overload),
      'the load shows overload instead of a current',
    ],
  ])('%s', (_, name, taken, message) => {
    expect(() => {
      guard(taken, limits);
    }).toThrow(expect.objectContaining({ code: 'GUARD_TRIPPED', exitCode: 3, guard: name, message }));
  });

  it('any reading beyond a limit, whichever instrument it comes from', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(0, 1, 2),
        fc.oneof(
          fc.double({ min: 60.001, max: 1e6, noNaN: true }),
          fc.double({ min: -1e6, max: -0.31, noNaN: true }),
        ),
        (which, far) => {
          fc.pre(which !== 2 || far > 0);
          const quiet = [value(15), value(15), value(1)];
          const [meter, volts, amps] = quiet.with(which, value(far));
          expect(() => {
            guard(sample(meter ?? nothing, volts ?? nothing, amps ?? nothing), limits);
          }).toThrow(expect.objectContaining({ code: 'GUARD_TRIPPED' }));
        },
      ),
    );
  });
});

describe('what a guard looks at beside the output of the whole', () => {
  const at = (of: Taken['of'], what: Taken['what'], number: number, where?: string): Taken => ({
    of,
    what,
    measurement: value(number),
    ...(where === undefined ? {} : { at: where }),
  });
  const guarded =
    (taken: readonly Taken[], change: Partial<GuardLimits> = {}) =>
    () => {
      guard(taken, { ...limits, ...change });
    };

  it('is the temperature, where the bench limits it', () => {
    const hot = [at('thermometer', 'temperature', 81.26)];
    expect(guarded(hot)).not.toThrow();
    expect(guarded(hot, { temperature: { value: 81.5, setBy: 'the bench' } })).not.toThrow();
    expect(guarded(hot, { temperature: { value: 80, setBy: 'the bench' } })).toThrow(
      expect.objectContaining({
        code: 'GUARD_TRIPPED',
        exitCode: 3,
        guard: 'over-temperature',
        message: 'the thermometer reads 81.26 °C and the bench allows 80 °C',
      }),
    );
  });

  it('is not the sign or the size of what is read across a ballast, or across a module of a stack', () => {
    expect(guarded([at('meter', 'voltage', -0.6, 'ballast-of-K1')])).not.toThrow();
    expect(guarded([at('meter-2', 'voltage', -0.6, 'output-of-K2')])).not.toThrow();
  });

  it('is an overload there too', () => {
    const taken: Taken[] = [{ of: 'meter-2', what: 'voltage', at: 'ballast-of-K2', measurement: overload }];
    expect(guarded(taken)).toThrow('the meter-2 shows overload instead of a voltage');
  });

  it('is no resistance: open leads show overload', () => {
    const taken: Taken[] = [{ of: 'meter', what: 'resistance', at: 'leads', measurement: overload }];
    expect(guarded(taken)).not.toThrow();
  });
});

describe('samples that show nothing', () => {
  it('stop the run at the third in a row', () => {
    const blind = new BlindSamples();
    blind.count('voltage');
    blind.count('current');
    expect(() => {
      blind.count('voltage');
    }).toThrow(
      expect.objectContaining({
        code: 'GUARD_TRIPPED',
        exitCode: 3,
        guard: 'no-reading',
        message: '3 times in a row the voltage could not be read',
      }),
    );
  });

  it('are let pass while there is one between them that shows something', () => {
    const blind = new BlindSamples();
    expect(() => {
      for (let round = 0; round < 100; round += 1) {
        blind.count('voltage');
        blind.count('voltage');
        blind.count(undefined);
      }
    }).not.toThrow();
  });
});

describe('a value out of a sample', () => {
  it('is not a number when it was not read, or when there was none', () => {
    const taken = sample(value(15.1), nothing, overload);
    expect(valueOf(taken, 'meter', 'voltage')).toBe(15.1);
    expect(valueOf(taken, 'load', 'voltage')).toBeNaN();
    expect(valueOf(taken, 'load', 'current')).toBeNaN();
    expect(valueOf(taken, 'meter', 'current')).toBeNaN();
  });

  it('is that of the usual place, or of the place that is asked for', () => {
    const taken: Taken[] = [
      { of: 'meter', what: 'voltage', at: 'ballast-of-K1', measurement: value(0.15) },
      { of: 'meter', what: 'voltage', measurement: value(15.1) },
    ];
    expect(valueOf(taken, 'meter', 'voltage')).toBe(15.1);
    expect(valueOf(taken, 'meter', 'voltage', 'ballast-of-K1')).toBe(0.15);
    expect(valueOf(taken, 'meter', 'voltage', 'ballast-of-K2')).toBeNaN();
  });
});
