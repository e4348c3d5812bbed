import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { readBench } from '../../src/files/read-bench.js';
import { readDriver } from '../../src/files/read-driver.js';
import { dialectFor } from '../../src/simulation/dialects/choose-dialect.js';
import { openSimulation } from '../../src/simulation/open-simulation.js';
import { ask } from './bench-parts.js';

const root = join(import.meta.dirname, '../..');
const shelves = { relativeTo: root, shipped: join(root, 'drivers') };
const benches = readdirSync(join(root, 'fixtures/benches')).filter((file) => file.endsWith('.yaml'));

describe('the benches that come with the project', () => {
  it.each(benches)('%s opens, and both its instruments say who they are', async (file) => {
    const { value: bench } = await readBench(join(root, 'fixtures/benches', file));
    const { simulation, instruments } = bench;
    if (simulation === undefined || instruments.meter === undefined)
      throw new Error('no simulation or no meter');
    const { value: load } = await readDriver(instruments.load.driver, shelves);
    const { value: meter } = await readDriver(instruments.meter.driver, shelves);
    const opened = openSimulation({
      simulation,
      clock: new VirtualClock(new Date(0)),
      drivers: { load, meter },
    });
    expect(await ask(opened.connect('load', load), load.identify)).toMatch(/simulated load/);
    expect(await ask(opened.connect('meter', meter), meter.identify)).toMatch(/simulated meter/);
    expect(opened.world.look([0])[0]?.moduleVoltage).toBe(simulation.modules[0]?.openCircuitVoltage);
  });

  it.each([
    ['load-input-scpi', 'standard-load'],
    ['load-short-scpi', 'short-load'],
    ['meter-read-scpi', 'configured-meter'],
    ['meter-query-scpi', 'query-meter'],
  ])('the shipped driver %s is understood by %s', async (driver, dialect) => {
    const { value } = await readDriver(driver, shelves);
    expect(dialectFor(value).name).toBe(dialect);
  });
});
