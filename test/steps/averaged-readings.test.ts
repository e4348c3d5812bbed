import { expect, it } from 'vitest';
import type { Driver, DriverReading } from '../../src/files/driver.js';
import { exactInstruments, nursery } from '../bench/nursery-bench.js';
import { stage } from './one-step.js';

/** The same driver, each number that it reads a mean over some time. */
function averaged({ readings }: Driver, averaging: number): Partial<Driver> {
  return {
    readings: Object.fromEntries(
      Object.entries(readings).map(([name, reading]): [string, DriverReading] => [
        name,
        reading.kind === 'number' ? { ...reading, averaging } : reading,
      ]),
    ),
  };
}

it('readings that are means are taken so far apart that none is in part another, and trip no guard', async () => {
  const { drivers } = await nursery();
  const averaging = 0.5;
  const { perform, the } = await stage({
    load: averaged(drivers.load, averaging),
    meter: averaged(drivers.meter, averaging),
    // Digit for digit the same, which is what copies would be.
    simulation: { instruments: exactInstruments },
  });
  await perform('load-ramp', { from: '1 A', to: '3 A', points: 3, dwell: '100 ms', readings: 6 });
  expect(the('point-ended').map(({ outcome }) => outcome)).toEqual(['held', 'held', 'held']);
  expect(the('notice')).toEqual([]);
  for (const of of ['load', 'meter']) {
    const times = the('reading')
      .filter((each) => each.of === of && each.what === 'voltage')
      .map(({ t }) => t);
    expect(times.length).toBeGreaterThanOrEqual(18);
    const apart = times.slice(1).map((t, index) => t - (times[index] ?? t));
    expect(Math.min(...apart)).toBeGreaterThan(averaging - 1e-9);
    // Nor before the mean reaches back to what was set before.
    for (const [index, { t }] of the('point-began').entries()) {
      const first = times.find((time) => time > t) ?? NaN;
      expect([index, first - t >= averaging - 1e-9]).toEqual([index, true]);
    }
  }
});
