import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { readBench } from '../../src/files/read-bench.js';
import { readDriver } from '../../src/files/read-driver.js';
import { dialectFor } from '../../src/simulation/dialects/choose-dialect.js';
import { openSimulation } from '../../src/simulation/open-simulation.js';
import { trueCircuit } from '../../src/simulation/true-circuit.js';
import { Instrument } from '../../src/instrument/instrument.js';

const root = join(import.meta.dirname, '../..');
const shelves = { relativeTo: root, shipped: join(root, 'drivers') };
const benches = readdirSync(join(root, 'fixtures/benches')).filter((file) => file.endsWith('.yaml'));

describe('the benches that come with the project', () => {
  it.each(benches)(
    '%s is worked through its own drivers, and shows what it has within their accuracy',
    async (file) => {
      const { value: bench } = await readBench(join(root, 'fixtures/benches', file));
      const { simulation, instruments } = bench;
      const [module] = simulation?.modules ?? [];
      if (simulation === undefined || module === undefined || instruments.meter === undefined) {
        throw new Error('no simulation, module or meter');
      }
      const { value: loadDriver } = await readDriver(instruments.load.driver, shelves);
      const { value: meterDriver } = await readDriver(instruments.meter.driver, shelves);
      const clock = new VirtualClock(new Date(0));
      const opened = openSimulation({ simulation, clock, drivers: { load: loadDriver, meter: meterDriver } });
      const open = (role: 'load' | 'meter', driver: typeof loadDriver): Promise<Instrument> =>
        Instrument.open({ role, driver, connection: opened.connect(role, driver), clock });
      const load = await open('load', loadDriver);
      const meter = await open('meter', meterDriver);
      expect(load.identity).toBe('railproof,simulated load,K-bench,1');

      await load.perform('current-mode');
      await load.perform('set-current', { amps: 2 });
      await load.perform('input-on');
      await clock.sleep(0.5);
      expect(await load.flag('input-state')).toBe(true);
      const volts = await meter.read('voltage');
      const promised = meterDriver.accuracy['voltage'];
      if (volts.kind !== 'value' || promised === undefined) throw new Error('no value or no accuracy');
      const expected = trueCircuit(simulation).voltageAt(2);
      expect(Math.abs(volts.value - expected)).toBeLessThan(
        promised.ofReading * expected + promised.fixed + 5 * module.noise,
      );
      const amps = await load.read('current');
      expect(amps.kind === 'value' && Math.abs(amps.value - 2)).toBeLessThan(0.03);

      await load.perform('make-safe');
      expect(await load.flag('input-state')).toBe(false);
    },
  );

  it.each([
    ['load-input-scpi', 'standard-load'],
    ['load-short-scpi', 'short-load'],
    ['meter-read-scpi', 'configured-meter'],
    ['meter-query-scpi', 'query-meter'],
    ['scanner-route-scpi', 'routed-scanner'],
    ['thermometer-query-scpi', 'query-thermometer'],
  ])('the shipped driver %s is understood by %s', async (driver, dialect) => {
    const { value } = await readDriver(driver, shelves);
    expect(dialectFor(value).name).toBe(dialect);
  });
});
