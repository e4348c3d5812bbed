import { expect, it } from 'vitest';
import { type DriverPart, pathOf } from '../../src/instrument/driver-part.js';

it.each<[Omit<DriverPart, 'driver'>, string]>([
  [{ section: 'prepare' }, 'prepare'],
  [{ section: 'prepare', index: 1 }, 'prepare.1'],
  [{ section: 'operations', name: 'set-current' }, 'operations.set-current'],
  [{ section: 'operations', name: 'set-current', index: 0 }, 'operations.set-current.0'],
  [{ section: 'readings', name: 'voltage' }, 'readings.voltage'],
  [{ section: 'readings', name: 'voltage', index: 1 }, 'readings.voltage.ask.1'],
  [{ section: 'readings', name: 'voltage', range: 2, index: 0 }, 'readings.voltage.ranges.2.select.0'],
  [{ section: 'ready' }, 'ready'],
])('%j stands in the file of the driver at %s', (part, path) => {
  expect(pathOf({ driver: 'toy', ...part }).join('.')).toBe(path);
});
