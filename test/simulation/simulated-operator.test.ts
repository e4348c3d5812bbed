import { describe, expect, it } from 'vitest';
import { UnknownActError } from '../../src/simulation/simulation-errors.js';
import { knownActs } from '../../src/simulation/simulated-operator.js';
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

  it('answers as the simulation says', () => {
    const { operator } = wireUp(simulationOf(latching, { answers: { 'label colour': 'blue' } }));
    expect(operator.answer('label colour')).toBe('blue');
    expect(operator.answer('toString')).toBeUndefined();
  });

  it('says what acts there are when asked for another', async () => {
    const { operator } = wireUp(simulationOf(latching));
    const refused = await operator.act('sing').catch((error: unknown) => error);
    expect(refused).toBeInstanceOf(UnknownActError);
    expect(refused).toMatchObject({ advice: `Known acts: ${knownActs.join(', ')}.` });
  });
});
