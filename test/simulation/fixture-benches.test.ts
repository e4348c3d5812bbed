import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { readBench } from '../../src/files/read-bench.js';
import { readDriver } from '../../src/files/read-driver.js';
import { dialectFor } from '../../src/simulation/dialects/choose-dialect.js';
import { openSimulation } from '../../src/simulation/open-simulation.js';
import { type TrueCircuit, trueCircuit } from '../../src/simulation/true-circuit.js';
import { Instrument } from '../../src/instrument/instrument.js';

const root = join(import.meta.dirname, '../..');
const shelves = { relativeTo: root, shipped: join(root, 'drivers') };
const benches = readdirSync(join(root, 'fixtures/benches'), { encoding: 'utf8', recursive: true }).filter(
  (file) => file.endsWith('.yaml'),
);

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

  async function truthOf(file: string): Promise<TrueCircuit> {
    const { value: bench } = await readBench(join(root, 'fixtures/benches', file));
    if (bench.simulation === undefined) throw new Error('no simulation');
    return trueCircuit(bench.simulation);
  }

  it('show the same two bricks fail together at one brick’s limit, and hold both labels through ballasts', async () => {
    const joined = await truthOf('group-hiccup.yaml');
    expect(joined.currentsAt(4)).toEqual([4, 0]);
    // K1 meets its 5.3 A, and the group is gone.
    expect(joined.dropoutCurrent(0.1)).toBeCloseTo(5.38, 2);
    const held = await truthOf('group-constant-current.yaml');
    expect(held.firstAtItsLimit?.module).toBe('K1');
    expect(held.dropoutCurrent(0.1)).toBeCloseTo(5.3 + 5.2, 6);
    const through = await truthOf('group-ballast.yaml');
    expect(through.imbalanceAt(8)).toBeLessThan(0.075);
    expect(through.dropoutCurrent(0.1)).toBeGreaterThan(10);
  });

  it('tell of each ballast what is there', async () => {
    for (const file of benches) {
      const { value: bench } = await readBench(join(root, 'fixtures/benches', file));
      for (const [place, { ballast }] of bench.group?.places.entries() ?? []) {
        expect(ballast?.resistance ?? 0).toBe(bench.simulation?.modules[place]?.ballast);
      }
    }
  });

  it.each([
    ['load-input-scpi', 'standard-load'],
    ['load-short-scpi', 'short-load'],
    ['meter-read-scpi', 'configured-meter'],
    ['meter-query-scpi', 'query-meter'],
    ['scanner-route-scpi', 'routed-scanner'],
    ['thermometer-query-scpi', 'query-thermometer'],
    ['source-output-scpi', 'dc-source'],
  ])('the shipped driver %s is understood by %s', async (driver, dialect) => {
    const { value } = await readDriver(driver, shelves);
    expect(dialectFor(value).name).toBe(dialect);
  });
});
