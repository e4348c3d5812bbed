import { describe, expect, it } from 'vitest';
import type { SimulatedModule } from '../../src/files/simulation-section.js';
import { VirtualBench, type WorldFault } from '../../src/simulation/virtual-bench.js';
import { sourceAtRest, sourceOutput } from '../../src/simulation/virtual-source.js';
import { brick, LEADS, seen, under } from './circuit-play.js';

const exact = { gain: 0, offset: 0, resolution: 0 };
const latching = brick('K7', 15.08, { limit: { style: 'latch-off', current: 3.4 }, droopResistance: 0.024 });
const on = { output: 'on', setVoltage: 24, setCurrent: 4 } as const;

function fedBySource(
  modules: readonly SimulatedModule[] = [latching],
  faults: readonly WorldFault[] = [],
): VirtualBench {
  const hardware = { leads: LEADS, leastVoltage: 1, setCurrent: exact, setVoltage: exact };
  const circuit = modules.length === 1 ? 'single' : 'parallel';
  return new VirtualBench({ circuit, modules }, hardware, faults, 'source');
}

describe('modules that a source feeds', () => {
  it('give nothing before it is on, and whatever it is told of its voltage', () => {
    const world = fedBySource();
    expect(seen(world, 1)).toMatchObject({ moduleVoltage: 0, phase: 'off' });
    world.setSource({ setVoltage: 24, setCurrent: 4 }, 2);
    expect(seen(world, 3).moduleVoltage).toBe(0);
    world.setSource({ output: 'on' }, 4);
    expect(seen(world, 5).moduleVoltage).toBeCloseTo(15.08, 9);
    world.setSource({ output: 'off' }, 6);
    expect(seen(world, 7)).toMatchObject({ moduleVoltage: 0, phase: 'off' });
  });

  it('that have latched off are unlatched when it goes off and on again', () => {
    const world = fedBySource();
    world.setSource(on, 0);
    expect(under(world, 3.5, 1).phase).toBe('latched');
    world.setLoad({ input: 'off' }, 2);
    expect(seen(world, 10).phase).toBe('latched');
    world.setSource({ output: 'off' }, 10);
    world.setSource({ output: 'on' }, 15);
    expect(seen(world, 16)).toMatchObject({ phase: 'held' });
    expect(seen(world, 16).moduleVoltage).toBeCloseTo(15.08, 9);
  });

  it('are fed only while they are plugged in', () => {
    const world = fedBySource([latching, { ...latching, name: 'K8' }]);
    world.setInput('absent', 1, 'K7');
    world.setSource(on, 2);
    expect(seen(world, 3).modules.map(({ phase }) => phase)).toEqual(['off', 'held']);
    world.setSource({ output: 'off' }, 4);
    world.setInput('present', 5, 'K7');
    expect(seen(world, 6).modules.map(({ phase }) => phase)).toEqual(['off', 'off']);
    world.setSource({ output: 'on' }, 7);
    expect(seen(world, 8).modules.map(({ phase }) => phase)).toEqual(['held', 'held']);
    expect(world.inputOf('K7')).toBe('present');
  });

  it('lose it when it loses its power, which makes it forget all that it was told', () => {
    const world = fedBySource([latching], [{ at: 5, what: 'source-restarted', for: 1 }]);
    world.setSource(on, 1);
    expect(seen(world, 4.9).phase).toBe('held');
    expect(seen(world, 5.1).phase).toBe('off');
    expect(world.sourceAt(7)).toEqual(sourceAtRest);
    world.setSource({ output: 'on' }, 8);
    expect(seen(world, 9).phase).toBe('off');
  });

  it('that are dead stay so', () => {
    const world = fedBySource([latching], [{ at: 2, what: 'module-dead' }]);
    world.setSource(on, 1);
    world.setSource({ output: 'off' }, 3);
    world.setSource({ output: 'on' }, 4);
    expect(seen(world, 5).phase).toBe('off');
  });

  it('where there is none are fed by hand, and on from the beginning', () => {
    const hardware = { leads: LEADS, leastVoltage: 1, setCurrent: exact, setVoltage: exact };
    const world = new VirtualBench({ circuit: 'single', modules: [latching] }, hardware);
    expect(seen(world, 1).moduleVoltage).toBeCloseTo(15.08, 9);
    expect(world.sourceAt(1)).toEqual(sourceAtRest);
  });
});

describe('the output of a source', () => {
  it('is what it was told while the modules take less than they may', () => {
    const world = fedBySource();
    world.setSource(on, 0);
    const moment = under(world, 2.5, 1);
    const { voltage, current } = world.sourceOutput(moment);
    expect(voltage).toBe(24);
    expect(current).toBeGreaterThan((moment.moduleVoltage * 2.5) / 24);
    expect(current).toBeLessThan(2);
  });

  it('sags where they would take more, and is nothing when it is off', () => {
    const world = fedBySource();
    world.setSource({ ...on, setCurrent: 1 }, 0);
    const moment = under(world, 2.5, 1);
    const { voltage, current } = world.sourceOutput(moment);
    expect(current).toBe(1);
    expect(voltage).toBeLessThan(20);
    expect(sourceOutput({ ...on, output: 'off' }, moment)).toEqual({ voltage: 0, current: 0 });
    expect(sourceOutput({ ...on, setVoltage: 0 }, moment)).toEqual({ voltage: 0, current: 0 });
  });
});
