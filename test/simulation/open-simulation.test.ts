import { performance } from 'node:perf_hooks';
import { describe, expect, it } from 'vitest';
import type { ModuleLimit } from '../../src/files/simulation-section.js';
import { openSimulation } from '../../src/simulation/open-simulation.js';
import { CannotSimulateError } from '../../src/simulation/simulation-errors.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { ask, hiccup, k1, loadDriver, meterDriver, say, simulationOf, wireUp } from './bench-parts.js';

const thermal = { riseAtRated: 35, timeConstant: 720, ambient: 23, limitPerKelvin: -0.002 };
const spread = (values: readonly number[]): number => {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1));
};

describe('the truth comes back through bytes', () => {
  it('from instruments without errors, to all the digits they send', async () => {
    const bench = wireUp(simulationOf(k1(hiccup)));
    expect(await bench.readVoltage()).toBeCloseTo(15.21, 5);
    await bench.tell('CURR 4;INP ON');
    expect(await bench.readVoltage()).toBeCloseTo(15.21 - 0.018 * 4, 5);
    expect(Number(await ask(bench.load, 'MEAS:VOLT?'))).toBeCloseTo(15.21 - (0.018 + 0.035) * 4, 5);
    expect(await bench.readCurrent()).toBeCloseTo(4, 6);
    expect(Number(await ask(bench.load, 'MEAS:POW?'))).toBeCloseTo((15.21 - 0.053 * 4) * 4, 4);
  });

  it('with the gain, the offset and the resolution that the simulation gives an instrument', async () => {
    const errors = { voltage: { gain: 0.01, offset: -0.2, resolution: 0.05 } };
    const bench = wireUp(simulationOf(k1(hiccup), { instruments: { meter: { errors } } }));
    const reading = await bench.readVoltage();
    expect(Math.abs(reading - (15.21 * 1.01 - 0.2))).toBeLessThan(0.15);
    expect(reading / 0.05).toBeCloseTo(Math.round(reading / 0.05), 3);
  });

  it('within what the driver promises, for any seed, and differently for each', async () => {
    const seen = new Set<number>();
    for (let seed = 0; seed < 100; seed++) {
      const bench = wireUp(simulationOf(k1(hiccup), { seed, instruments: {} }));
      await bench.tell('CURR 4;INP ON');
      const [{ moduleVoltage, current } = { moduleVoltage: NaN, current: NaN }] = bench.world.look([
        bench.clock.now(),
      ]);
      // The last digit flickers a little beyond the promise, as on a real display.
      expect(Math.abs((await bench.readVoltage()) - moduleVoltage)).toBeLessThan(
        0.0005 * 15.2 + 0.003 + 0.001,
      );
      expect(Math.abs((await bench.readCurrent()) - current)).toBeLessThan(0.002 * 4 + 0.01 + 0.001);
      expect(Math.abs(current - 4)).toBeLessThan(0.002 * 4 + 0.01);
      seen.add(current);
    }
    expect(seen.size).toBe(100);
  });

  it('with the scatter of the module’s noise', async () => {
    const bench = wireUp(simulationOf(k1(hiccup, { noise: 0.001 })));
    const readings: number[] = [];
    for (let count = 0; count < 400; count++) readings.push(await bench.readVoltage());
    // The relative standard error of a standard deviation from 400 readings is 1/√800 = 3.5 %.
    expect(spread(readings)).toBeGreaterThan(0.00086);
    expect(spread(readings)).toBeLessThan(0.00114);
  });

  it('the same to the last byte for the same seed', async () => {
    const dialogue = async (seed: number): Promise<string> => {
      const bench = wireUp(
        simulationOf(k1(hiccup, { noise: 0.001, unsteadyAbove: 5.1, thermal }), { seed, instruments: {} }),
      );
      let said = '';
      for (const amps of [0, 2, 4, 5.2, 6, 1]) {
        await bench.tell(`CURR ${amps};INP ON`);
        said += `${await ask(bench.meter, 'READ?')} ${await ask(bench.load, 'MEAS:CURR?;VOLT?')}\n`;
      }
      return said;
    };
    expect(await dialogue(7)).toBe(await dialogue(7));
    expect(await dialogue(7)).not.toBe(await dialogue(8));
  });
});

describe('readings move as they do on a bench', () => {
  it('a step is seen settling, and has settled when the driver says', async () => {
    const bench = wireUp(simulationOf(k1(hiccup)));
    await say(bench.load, 'CURR 4;INP ON');
    const early = await bench.readCurrent();
    expect(early).toBeGreaterThan(1);
    expect(early).toBeLessThan(3.9);
    await bench.clock.sleep(loadDriver.settling);
    expect(Math.abs((await bench.readCurrent()) - 4)).toBeLessThan(0.001);
  });

  it('near its limit an unsteady module scatters by some per cent, and holds its mean', async () => {
    const bench = wireUp(simulationOf(k1(hiccup, { unsteadyAbove: 5.1 })));
    const scatterAt = async (amps: number): Promise<{ spread: number; mean: number }> => {
      await bench.tell(`CURR ${amps};INP ON`);
      const readings: number[] = [];
      for (let count = 0; count < 40; count++) readings.push(await bench.readVoltage());
      return { spread: spread(readings), mean: readings.reduce((sum, value) => sum + value, 0) / 40 };
    };
    expect((await scatterAt(5)).spread).toBeLessThan(1e-6);
    const onset = await scatterAt(5.11);
    const near = await scatterAt(5.29);
    expect(onset.spread).toBeGreaterThan(0.03);
    expect(near.spread).toBeGreaterThan(1.5 * onset.spread);
    expect(Math.abs(near.mean - (15.21 - 0.018 * 5.29))).toBeLessThan(0.1);
  });

  it('a hiccuping module reads as noise, not as a voltage', async () => {
    const bench = wireUp(simulationOf(k1(hiccup)));
    await bench.tell('CURR 6;INP ON');
    const currents: number[] = [];
    for (let count = 0; count < 80; count++) currents.push(await bench.readCurrent());
    expect(Math.max(...currents)).toBeGreaterThan(5);
    expect(Math.min(...currents)).toBeLessThan(0.01);
    await bench.tell('CURR 4');
    await bench.clock.sleep(0.8);
    expect(await bench.readVoltage()).toBeCloseTo(15.21 - 0.072, 4);
  });

  it.each<[string, ModuleLimit, number, number]>([
    ['constant current', { style: 'constant-current', current: 5.3 }, 5.3, 8 + 0.035 * 5.3],
    [
      'foldback',
      { style: 'foldback', current: 5.3, shortCircuit: 1.3 },
      1.3 + (4 * (8 + 0.035 * 3.42)) / 15.1146,
      8 + 0.035 * 3.42,
    ],
  ])('held at a voltage, a module of %s shows its limit', async (_, limit, current, voltage) => {
    const bench = wireUp(simulationOf(k1(limit)));
    await bench.tell('FUNC VOLT;:VOLT 8;:INP ON');
    expect(await bench.readCurrent()).toBeCloseTo(current, 2);
    expect(await bench.readVoltage()).toBeCloseTo(voltage, 2);
  });

  it('below its least voltage the load sinks only its share', async () => {
    const bench = wireUp(
      simulationOf(k1({ style: 'constant-current', current: 5.3 }, { openCircuitVoltage: 0.5 })),
    );
    await bench.tell('CURR 2;INP ON');
    const volts = Number(await ask(bench.load, 'MEAS:VOLT?'));
    expect(await bench.readCurrent()).toBeCloseTo(2 * volts, 4);
  });

  it('beyond its protection the load switches its input off', async () => {
    const bench = wireUp(simulationOf(k1(hiccup)));
    await bench.tell('CURR:PROT 3;:CURR 2;INP ON');
    expect(await ask(bench.load, 'INP?')).toBe('1');
    await bench.tell('CURR 3.1');
    expect(await ask(bench.load, 'INP?')).toBe('0');
    expect(await bench.readCurrent()).toBeCloseTo(0, 9);
  });
});

describe('an hour of soak', () => {
  it('takes milliseconds, and warms the module all the same', async () => {
    const bench = wireUp(simulationOf(k1(hiccup, { thermal, ratedCurrent: 4, noise: 0.001 })));
    const began = performance.now();
    await bench.tell('CURR 4;INP ON');
    await bench.clock.sleep(3600);
    await bench.readVoltage();
    expect(performance.now() - began).toBeLessThan(250);
    const [moment] = bench.world.look([bench.clock.now()]);
    expect(moment?.rise).toBeCloseTo(35 * (1 - Math.exp(-3600 / 720)), 1);
    expect(moment?.temperature).toBeCloseTo(23 + (moment?.rise ?? NaN), 9);
  });

  it('lets the falling limit pass a current that was held cold', async () => {
    const bench = wireUp(
      simulationOf(k1({ style: 'constant-current', current: 5.3 }, { thermal, ratedCurrent: 4 })),
    );
    await bench.tell('CURR 5.2;INP ON');
    expect(await bench.readVoltage()).toBeGreaterThan(15);
    await bench.clock.sleep(3600);
    expect(await bench.readVoltage()).toBeLessThan(1.5);
    // It settles where the limit and the warming it causes agree: I = 5.3·(1 − 0.002·35·(I/4)²).
    const settled = await bench.readCurrent();
    expect(settled).toBeCloseTo(5.3 * (1 - 0.07 * (settled / 4) ** 2), 2);
  });
});

describe('what cannot be simulated', () => {
  const clock = new VirtualClock(new Date(0));
  const drivers = { load: loadDriver, meter: meterDriver };

  it('is refused by name: two modules of one name, none, or one of several the wrong way round', () => {
    const group = simulationOf(k1(hiccup), { circuit: 'parallel', modules: [k1(hiccup), k1(hiccup)] });
    expect(() => openSimulation({ simulation: group, clock, drivers })).toThrow(CannotSimulateError);
    const none = { ...simulationOf(k1(hiccup)), modules: [] };
    expect(() => openSimulation({ simulation: none, clock, drivers })).toThrow(
      'cannot simulate a single circuit of 0 modules',
    );
    const faults = [{ at: 1, what: 'reversed', of: 'K2' }] as const;
    const crossed = { ...group, modules: [k1(hiccup), k1(hiccup, { name: 'K2' })], faults };
    expect(() => openSimulation({ simulation: crossed, clock, drivers })).toThrow(
      'cannot simulate one module of several that is wired the wrong way round',
    );
  });

  it.each([
    ['source', meterDriver],
    ['scanner', meterDriver],
    ['meter-0', meterDriver],
  ] as const)('is refused by name: at the post "%s" something that has no place there', (post, driver) => {
    const opened = openSimulation({ simulation: simulationOf(k1(hiccup)), clock, drivers });
    expect(() => opened.connect(post, driver)).toThrow(CannotSimulateError);
    expect(() => opened.connect(post, driver)).toThrow(`at the post "${post}"`);
  });
});
