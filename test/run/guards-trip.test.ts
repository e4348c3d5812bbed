import { describe, expect, it } from 'vitest';
import type { SimulatedInstrument, SimulatedFault } from '../../src/files/simulation-section.js';
import { type RehearsalChange, rehearse, tidyUp } from './rehearsal.js';

tidyUp();

const idle = 'open-circuit: { for: 2 s }';
const ramp = 'load-ramp: { to: 4 A, points: 9, dwell: 500 ms, readings: 3 }';
const search = 'dropout-search: { from: 4 A, ceiling: 7 A }';
const soak = 'soak: { current: 3 A, for: 10 min, every: 10 s }';

/** What the errors of one instrument are; all others as drawn. */
const errors = (
  what: string,
  error: Partial<{ gain: number; offset: number }>,
): Readonly<Record<string, SimulatedInstrument>> => ({
  load: { errors: { [what]: { gain: 0, offset: 0, resolution: 0.001, ...error } } },
});
const fault = (what: SimulatedFault['what'], at: number) => ({ simulation: { faults: [{ what, at }] } });
const after = (count: number, first: string, then: string) => (reading: number) =>
  reading <= count ? first : then;

describe('a guard stops the run, leaves the load off, and journals what tripped it, at', () => {
  it.each<[string, string, string, RehearsalChange]>([
    [
      'a voltage that the nameplate does not allow, be the bench made for it',
      'over-voltage',
      'the meter reads 19.20 V and the nameplate allows 18.75 V',
      { steps: [idle, ramp], meterReads: after(12, '15.21', '19.2') },
    ],
    [
      'a voltage that the procedure does not allow',
      'over-voltage',
      'the meter reads 16.30 V and the procedure allows 16.2 V',
      {
        steps: [idle, ramp],
        asksFor: '{ voltage: 108 % of rated-voltage }',
        meterReads: after(12, '15.21', '16.3'),
      },
    ],
    [
      'a current far above the one that was set',
      'over-current',
      'A and the procedure allows 4 A',
      {
        steps: [idle, ramp],
        asksFor: '{ current: 100 % of rated-current }',
        simulation: { instruments: errors('current', { gain: 0.2 }) },
      },
    ],
    [
      'a power above what the procedure allows',
      'over-power',
      'W and the procedure allows 62 W',
      {
        steps: [idle, ramp],
        asksFor: '{ power: 62 W }',
        simulation: { instruments: errors('current', { gain: 0.05 }) },
      },
    ],
    [
      'a temperature that the procedure does not allow, where the bench would',
      'over-temperature',
      'the thermometer reads 61.30 °C and the procedure allows 60 °C',
      {
        steps: [idle, soak],
        file: 'nursery-soak',
        asksFor: '{ temperature: 60 °C }',
        thermometerReads: after(40, '45', '61.3'),
      },
    ],
    [
      'a thermometer whose probe is broken',
      'implausible-reading',
      'the thermometer reads -199.9 °C, which no module has',
      { steps: [idle, soak], file: 'nursery-soak', thermometerReads: after(40, '45', '-199.9') },
    ],
    [
      'leads that are swapped',
      'reversed-polarity',
      'V: the polarity is reversed',
      { steps: [idle, ramp], ...fault('reversed', 4) },
    ],
    [
      'a current out of the load',
      'implausible-reading',
      '3 times in a row the load reads -300.0 mA, and a load only takes current',
      { steps: [idle, ramp], simulation: { instruments: errors('current', { offset: -0.3 }) } },
    ],
    [
      'a load that repeats its readings while it is told more and more',
      'frozen-reading',
      "and the module's voltage is there",
      { steps: [idle, ramp], ...fault('load-stuck', 5) },
    ],
    [
      'a load that repeats what it read with its input off',
      'frozen-reading',
      'digit for digit as before it was told 500.0 mA',
      { steps: [idle, ramp], ...fault('load-stuck', 1) },
    ],
    [
      'a load that repeats the current of a moment ago when its input is off',
      'current-while-off',
      'with its input off the load reads',
      {
        steps: [idle, 'load-ramp: { to: 4 A, points: 2, dwell: 1 s, readings: 100 }', idle],
        ...fault('load-stuck', 12),
      },
    ],
    [
      'a meter that repeats its readings while the module drops out',
      'frozen-reading',
      "digit for digit as before, while the load's voltage has gone to",
      { steps: [idle, ramp, search], ...fault('meter-stuck', 6) },
    ],
  ])('%s', async (_, guard, message, change) => {
    const run = await rehearse(change);
    expect(run.ending).toMatchObject({ how: 'stopped', reason: expect.stringContaining(message) as string });
    expect(run.status).toBe(3);
    expect(run.safety).toEqual({ kind: 'confirmed' });
    expect(run.bench.simulation.world.load.input).toBe('off');
    expect(run.events.filter(({ event }) => event === 'guard-tripped')).toMatchObject([
      { guard, text: expect.stringContaining(message) as string },
    ]);
    expect(run.integrity).toMatchObject({ kind: 'whole' });
  });
});

describe('a silence', () => {
  it.each(['load', 'meter'] as const)('of the %s is journalled as what ended the run', async (role) => {
    const run = await rehearse({ steps: [idle, ramp], ...fault(`${role}-silent`, 4) });
    expect(run.status).toBe(69);
    expect(run.events.filter(({ event }) => event === 'guard-tripped')).toMatchObject([
      { guard: 'silence', text: expect.stringContaining('did not answer') as string },
    ]);
  });
});

it('the load is given the limits of the run for its own protections', async () => {
  const { load: shipped } = (await rehearse({ steps: [idle] })).bench.drivers;
  const run = await rehearse({
    steps: [idle],
    asksFor: '{ current: 5 A, power: 80 W }',
    load: {
      operations: {
        ...shipped.operations,
        'protect-voltage': [{ text: 'VOLT:PROT {volts}' }],
        'protect-power': [{ text: 'POW:PROT {watts}' }],
      },
    },
  });
  const { protection } = run.bench.simulation.world.load;
  expect(run.status).toBe(0);
  expect(protection.voltage).toBeCloseTo(18.75, 6);
  expect(protection.current).toBeCloseTo(5.5, 6);
  expect(protection.power).toBeCloseTo(88, 6);
});
