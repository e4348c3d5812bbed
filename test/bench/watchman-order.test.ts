import { expect, it } from 'vitest';
import { orderText, readOrder } from '../../src/bench/watchman-order.js';
import { driverOfChannel } from '../../src/files/driver-channel.js';
import type { Driver } from '../../src/files/driver.js';
import { nursery } from './nursery-bench.js';

it('an order is one line, and comes back with all that makes a load safe', async () => {
  const { description, drivers } = await nursery();
  const text = orderText({ folder: '/runs/K1 "at" work\n', bench: description, driver: drivers.load });
  expect(text).not.toContain('\n');
  const { folder, bench, driver } = readOrder(text);
  expect(folder).toBe('/runs/K1 "at" work\n');
  expect(bench.instruments).toEqual({ load: description.instruments.load });
  expect(bench.limits).toEqual(description.limits);
  expect(bench.simulation).toBeUndefined();
  expect(driver).toEqual(drivers.load);
  const state = driver.readings['input-state'];
  if (state?.kind !== 'flag' || driver.errors === 'none' || driver.errors.kind !== 'queue')
    throw new Error('the driver has lost something');
  expect(['ON', 'ONE', '1', '0'].map((reply) => state.trueWhen.finds(reply))).toEqual([
    true,
    false,
    true,
    false,
  ]);
  expect(driver.errors.clear.finds('+0,"No error"')).toBe(true);
});

it('an order holds the driver of the one channel, and what puts it in remote', async () => {
  const { description, drivers } = await nursery();
  const load: Driver = driverOfChannel(
    {
      ...drivers.load,
      remote: [{ text: 'SYST:REM', rest: 0.05 }],
      channels: { select: [{ text: 'INST:NSEL {channel}' }], first: 1, last: 4 },
    },
    2,
  );
  const { driver } = readOrder(orderText({ folder: '/runs/K1', bench: description, driver: load }));
  expect(driver).toEqual(load);
  expect(driver.remote).toEqual([{ text: 'SYST:REM', rest: 0.05 }]);
  expect(driver.operations['make-safe']?.[0]?.text).toBe('INST:NSEL 2');
});
