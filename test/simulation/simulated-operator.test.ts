import { describe, expect, it } from 'vitest';
import { UnknownActError } from '../../src/simulation/simulation-errors.js';
import { knownActs } from '../../src/simulation/simulated-operator.js';
import { groupBench, module } from '../bench/group-bench.js';
import { k1, simulationOf, wireUp } from './bench-parts.js';

const latching = k1({ style: 'latch-off', current: 5.3 });

describe('the simulated operator', () => {
  it('clears a latch by cycling the input, which takes a while', async () => {
    const bench = wireUp(simulationOf(latching));
    await bench.tell('CURR 6;INP ON');
    await bench.tell('INP OFF');
    await bench.clock.sleep(3600);
    expect(await bench.readVoltage()).toBe(0);
    const before = bench.clock.now();
    await bench.operator.act('cycle input');
    expect(bench.clock.now() - before).toBeCloseTo(10, 9);
    await bench.clock.sleep(0.1);
    expect(await bench.readVoltage()).toBeCloseTo(15.21, 5);
  });

  it('unplugs and plugs in', async () => {
    const bench = wireUp(simulationOf(latching));
    await bench.operator.act('unplug');
    expect(await bench.readVoltage()).toBe(0);
    await bench.operator.act('plug in');
    await bench.clock.sleep(0.1);
    expect(await bench.readVoltage()).toBeCloseTo(15.21, 5);
  });

  it('finds a module by its name wherever it sits, and takes his time over each', async () => {
    const modules = [module('K3', 12.28), module('K1', 12.34), module('K2', 12.34)];
    const { simulation, clock } = await groupBench({ circuit: 'series', modules });
    const { operator, world } = simulation;
    await operator.act('unplug K1');
    expect(clock.now()).toBeCloseTo(2, 9);
    const inputs = (): string[] => ['K1', 'K2', 'K3'].map((name) => world.inputOf(name));
    expect(inputs()).toEqual(['absent', 'present', 'present']);
    await operator.act('plug in K1');
    expect(inputs()).toEqual(['present', 'present', 'present']);
    await operator.act('unplug');
    expect(clock.now()).toBeCloseTo(2 + 2 + 3 * 2, 9);
    expect(inputs()).toEqual(['absent', 'absent', 'absent']);
    await operator.act('plug in');
    await operator.act('cycle input');
    expect(inputs()).toEqual(['present', 'present', 'present']);
  });

  it.each([
    ['leads together', 3],
    ['leads apart', 3],
    ['probe earth and 0 V', 5],
    ['probe earth and 0 V of K2', 5],
    ['probe ballast of K2', 5],
    ['probe output of K2', 5],
    ['probe the output', 5],
  ])('takes the probes up for "%s"', async (act, seconds) => {
    const { simulation, clock } = await groupBench({ measuredBy: 'operator' });
    await simulation.operator.act(act);
    expect(clock.now()).toBeCloseTo(seconds, 9);
  });

  it('says which modules there are when asked for another', async () => {
    const { simulation } = await groupBench();
    for (const act of ['unplug K7', 'probe ballast of K7', 'probe earth and 0 V of K7']) {
      await expect(simulation.operator.act(act)).rejects.toMatchObject({
        code: 'SIMULATION_UNKNOWN_MODULE',
        module: 'K7',
        advice: 'There are K1, K2, K3.',
      });
    }
  });

  it('answers as the simulation says', () => {
    const { operator } = wireUp(simulationOf(latching, { answers: { 'label colour': 'blue' } }));
    expect(operator.answer('label colour')).toBe('blue');
    expect(operator.answer('toString')).toBeUndefined();
  });

  it('says what acts there are when asked for another', async () => {
    const { operator } = wireUp(simulationOf(latching));
    for (const act of ['sing', '', ' ', 'unplug ', 'sing to K1', 'probe the ballast of K1']) {
      const refused = await operator.act(act).catch((error: unknown) => error);
      expect(refused).toBeInstanceOf(UnknownActError);
      expect(refused).toMatchObject({ act, advice: `Known acts: ${knownActs.join(', ')}.` });
    }
    expect(knownActs).toContain('unplug <module>');
  });
});
