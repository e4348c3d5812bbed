import { describe, expect, it } from 'vitest';
import { UnknownModuleError } from '../../src/simulation/unknown-module-error.js';
import { brick, currentsOf, seen, under, voltagesOf, worldOf } from './circuit-play.js';

const pair = [
  brick('K1', 12.343, { ballast: 0.05, earth: 'bonded' }),
  brick('K2', 12.338, { ballast: 0.05 }),
];

describe('a bench of several modules', () => {
  it('knows each by its name, and says so when there is none of that name', () => {
    const world = worldOf('parallel', [...pair, brick('K3', 12.3, { earth: 20_000 })]);
    expect(world.earthResistance('K1')).toBe(0.005);
    expect(world.earthResistance('K2')).toBe(Number.POSITIVE_INFINITY);
    expect(world.earthResistance('K3')).toBe(20_000);
    expect(() => world.earthResistance('K9')).toThrow('there is no module "K9" on the simulated bench');
    expect(() => {
      world.setInput('absent', 1, 'k1');
    }).toThrow(UnknownModuleError);
    expect(world.inputOf('K1')).toBe('present');
  });

  it('a module that dies takes the first place unless another is named, and cannot be revived', () => {
    const world = worldOf('parallel', pair, [{ at: 2, what: 'module-dead', of: 'K2' }]);
    under(world, 3, 1);
    expect(currentsOf(seen(world, 2.5))).toEqual([3, 0]);
    world.setInput('absent', 3);
    world.setInput('present', 4);
    expect(world.inputOf('K2')).toBe('dead');
    expect(currentsOf(seen(world, 5))).toEqual([3, 0]);
    const first = worldOf('parallel', pair, [{ at: 2, what: 'module-dead' }]);
    expect(seen(first, 3).modules.map(({ phase }) => phase)).toEqual(['off', 'held']);
    expect(() => worldOf('parallel', pair, [{ at: 2, what: 'module-dead', of: 'K7' }])).toThrow(
      UnknownModuleError,
    );
  });

  it('shows all voltages negative and no current once the leads at its output are swapped', () => {
    const world = worldOf('series', pair, [{ at: 2, what: 'reversed' }]);
    under(world, 3, 1);
    const moment = seen(world, 3);
    expect(moment.current).toBe(0);
    expect(moment.moduleVoltage).toBeCloseTo(-24.681, 9);
    expect(voltagesOf(moment)).toEqual([-12.343, -12.338]);
  });

  it('tells those who listen what stood just before and just after', () => {
    const world = worldOf('parallel', pair);
    const heard: number[][] = [];
    world.onStep((before, after) => heard.push([before.current, after.current]));
    under(world, 3, 1);
    under(world, 0, 2);
    expect(heard).toEqual([
      [0, 3],
      [3, 0],
    ]);
  });
});

describe('what a meter finds beside what it means to read', () => {
  const noisy = (noise: number, ballast = 0.0485) => ({ noise, ballast });

  it('in a stack the noises add up as squares, in a group of two alike ones half of each is left', () => {
    const modules = [brick('K1', 12.34, noisy(0.003)), brick('K2', 12.34, noisy(0.004))];
    const stack = under(worldOf('series', modules), 1, 1);
    expect(stack.noise).toBeCloseTo(0.005, 12);
    expect(stack.modules.map(({ noise }) => noise)).toEqual([0.003, 0.004]);
    const group = under(worldOf('parallel', modules), 1, 1);
    expect(group.noise).toBeCloseTo(0.0025, 12);
    // Across K1's ballast: 97 % of half the difference of the two.
    expect(group.modules[0]?.ballastNoise).toBeCloseTo(0.97 * 0.0025, 12);
    expect(group.modules[0]?.noise).toBeGreaterThan(0.0025);
  });

  it('the oscillation of one near its limit is seen halved on the bus, and across both ballasts with opposite signs', () => {
    const modules = [
      brick('K1', 12.4, { ballast: 0.0485, unsteadyAbove: 2 }),
      brick('K2', 12.3, { ballast: 0.0485 }),
    ];
    const moment = under(worldOf('parallel', modules), 4, 1, 0.31);
    expect(Math.abs(moment.ripple)).toBeGreaterThan(0.01);
    const [one, other] = moment.modules;
    expect(one?.ballastRipple).toBeCloseTo(0.97 * moment.ripple, 9);
    expect(other?.ballastRipple).toBeCloseTo(-0.97 * moment.ripple, 9);
  });

  it('with every input taken away nothing is left of it', () => {
    const world = worldOf('parallel', [brick('K1', 12.34, noisy(0.003)), brick('K2', 12.34, noisy(0.004))]);
    expect(seen(world, 1).noise).toBeGreaterThan(0);
    world.setInput('absent', 2);
    expect(seen(world, 3)).toMatchObject({ noise: 0, ripple: 0, phase: 'off', moduleVoltage: 0 });
  });
});
