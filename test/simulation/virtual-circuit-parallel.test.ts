import { describe, expect, it } from 'vitest';
import type { ModuleLimit, SimulatedModule } from '../../src/files/simulation-section.js';
import fc from '../property.js';
import { LEADS, brick, currentsOf, seen, under, voltagesOf, worldOf } from './circuit-play.js';

// Common practice; there is no published source for the figures: two bricks that both read 12.34 V with no
// load (to the 10 mV digit), a limit between 3.5 and 4 A each, milliohms of droop.
const two = (change: Partial<SimulatedModule> = {}): SimulatedModule[] => [
  brick('K1', 12.343, change),
  brick('K2', 12.338, change),
];
const constantCurrent: ModuleLimit = { style: 'constant-current', current: 3.7 };
const latchOff: ModuleLimit = { style: 'latch-off', current: 3.7 };

describe('two hiccuping bricks joined directly', () => {
  it('read alike with no load, and fail together at about one brick’s limit', () => {
    for (const { openCircuitVoltage } of two()) expect(openCircuitVoltage.toFixed(2)).toBe('12.34');
    const world = worldOf('parallel', two());
    expect(under(world, 0, 1).moduleVoltage).toBeCloseTo(12.343, 9);
    // One hogs: it takes all until the other's droop lets it in.
    expect(currentsOf(under(world, 3, 2))).toEqual([3, 0]);
    expect(under(world, 4, 3).moduleVoltage).toBeGreaterThan(12.3);
    // The hog is pushed past its limit and leaves; the other, asked for everything, follows in the same instant.
    const failed = under(world, 4.1, 4);
    expect(failed.moduleVoltage).toBe(0);
    expect(failed.modules.map(({ phase }) => phase)).toEqual(['retrying', 'retrying']);
  });

  it('are never back under that load, however often they try, and come back together under less', () => {
    const world = worldOf('parallel', two());
    under(world, 4.1, 1);
    for (let at = 1.5; at < 6; at += 0.05) expect(seen(world, at).moduleVoltage).toBeLessThan(1.3);
    expect(under(world, 3, 6, 1).moduleVoltage).toBeCloseTo(12.343 - 3 * 0.0015, 6);
  });

  it('hold 7 A with 50 mΩ in each, sharing it almost evenly', () => {
    const moment = under(worldOf('parallel', two({ ballast: 0.05 })), 7, 1);
    expect(moment.current).toBeCloseTo(7, 9);
    expect(moment.moduleVoltage).toBeGreaterThan(12.1);
    const [one = 0, other = 0] = currentsOf(moment);
    // 5 mV over two times 51.5 mΩ, on either side of the half.
    expect(one).toBeCloseTo(3.5 + 0.0025 / 0.0515, 6);
    expect(one + other).toBeCloseTo(7, 9);
    expect(moment.modules[0]?.ballastVoltage).toBeCloseTo(one * 0.05, 9);
  });
});

describe('modules that stay at their limit', () => {
  it('one hogs without ballast, and the group still holds', () => {
    const moment = under(worldOf('parallel', two({ limit: constantCurrent })), 7, 1);
    expect(moment.modules.map(({ phase }) => phase)).toEqual(['limiting', 'held']);
    expect(currentsOf(moment)[0]).toBeCloseTo(3.7, 9);
    expect(currentsOf(moment)[1]).toBeCloseTo(3.3, 9);
    expect(moment.moduleVoltage).toBeGreaterThan(12.3);
  });

  it('collapse together beyond the sum of their limits, and are back when it eases', () => {
    const world = worldOf('parallel', two({ limit: constantCurrent }));
    const low = under(world, 7.5, 1);
    expect(low.moduleVoltage).toBeLessThan(1.5);
    expect(low.current).toBeCloseTo(7.4, 9);
    const soon = under(world, 6, 2, 0.002);
    expect(soon.moduleVoltage).toBeGreaterThan(2);
    expect(soon.moduleVoltage).toBeLessThan(11);
    expect(seen(world, 2.2).moduleVoltage).toBeGreaterThan(12.3);
  });

  it('the hog warms most, its limit falls, and the other takes over what it loses', () => {
    const thermal = { riseAtRated: 35, timeConstant: 600, ambient: 23, limitPerKelvin: -0.002 };
    const world = worldOf('parallel', two({ limit: constantCurrent, thermal, ratedCurrent: 3 }));
    const cold = under(world, 6.5, 1);
    const warm = seen(world, 7200);
    expect(warm.modules[0]?.rise).toBeGreaterThan((warm.modules[1]?.rise ?? NaN) + 2);
    const [hog = 0, other = 0] = currentsOf(warm);
    // It settles where its limit and the warming that causes agree: I = 3.7·(1 − 0.002·35·(I/3)²).
    expect(hog).toBeCloseTo(3.7 * (1 - 0.07 * (hog / 3) ** 2), 3);
    expect(hog).toBeLessThan((currentsOf(cold)[0] ?? NaN) - 0.2);
    expect(hog + other).toBeCloseTo(6.5, 9);
  });
});

describe('who leaves the group', () => {
  it('one after the other in one instant, until those that are left stand', () => {
    const limited = (name: string, volts: number, current: number): SimulatedModule =>
      brick(name, volts, { limit: { style: 'latch-off', current }, ballast: 0.05 });
    const modules = [limited('K1', 12.5, 2), limited('K2', 12.4, 3), limited('K3', 12.3, 9)];
    const world = worldOf('parallel', modules);
    // K1 is past its 2 A; without it K2 is past its 3 A; K3 carries all.
    const moment = under(world, 7, 1);
    expect(moment.modules.map(({ phase }) => phase)).toEqual(['latched', 'latched', 'held']);
    expect(currentsOf(moment)).toEqual([0, 0, 7]);
  });

  it('a latched one stays out until its own input is cycled', () => {
    const world = worldOf('parallel', two({ limit: latchOff }));
    under(world, 4.1, 1);
    expect(under(world, 1, 2).moduleVoltage).toBe(0);
    world.setInput('absent', 3, 'K2');
    world.setInput('present', 13, 'K2');
    const moment = seen(world, 13.1);
    expect(moment.modules.map(({ phase }) => phase)).toEqual(['latched', 'held']);
    expect(currentsOf(moment)).toEqual([0, 1]);
    world.setInput('absent', 14);
    world.setInput('present', 24);
    expect(seen(world, 24.1).modules.map(({ phase }) => phase)).toEqual(['held', 'held']);
  });

  it('a folding-back one gives nothing beside others, and comes back when the load has eased', () => {
    const folding = brick('K1', 12.343, { limit: { style: 'foldback', current: 3.7, shortCircuit: 1 } });
    const strong = brick('K2', 12.338, { limit: { style: 'constant-current', current: 6 } });
    const world = worldOf('parallel', [folding, strong]);
    expect(currentsOf(under(world, 3, 1))).toEqual([3, 0]);
    expect(currentsOf(under(world, 5, 2))).toEqual([0, 5]);
    expect(currentsOf(under(world, 3, 3))).toEqual([3, 0]);
  });

  it('an unplugged one leaves the rest to carry everything; its output stands at the bus', () => {
    const world = worldOf('parallel', two({ ballast: 0.05 }));
    under(world, 3, 1);
    world.setInput('absent', 2, 'K1');
    const moment = seen(world, 2.1);
    expect(currentsOf(moment)).toEqual([0, 3]);
    expect(moment.modules[0]?.phase).toBe('off');
    expect(moment.modules[0]?.voltage).toBeCloseTo(moment.moduleVoltage, 12);
  });

  it('two that try out of step do not come up on a load that takes both, until it eases', () => {
    const world = worldOf('parallel', two({ ballast: 0.05 }));
    world.setInput('absent', 1, 'K1');
    under(world, 6, 2);
    // K2 tries at 2 s, 2.8 s, 3.6 s and so on for 0.12 s each, K1 from 3 s on: never both.
    world.setInput('present', 3, 'K1');
    expect(seen(world, 30).modules.map(({ phase }) => phase)).toEqual(['retrying', 'retrying']);
    expect(under(world, 3, 31, 1).modules.map(({ phase }) => phase)).toEqual(['held', 'held']);
    expect(under(world, 6, 33).modules.map(({ phase }) => phase)).toEqual(['held', 'held']);
  });

  it('a folding-back one that cools and warms at the edge costs a soak no more than a moment', () => {
    const thermal = { riseAtRated: 35, timeConstant: 600, ambient: 23, limitPerKelvin: -0.002 };
    const limit: ModuleLimit = { style: 'foldback', current: 3.7, shortCircuit: 1 };
    const folding = brick('K1', 12.4, { limit, thermal, ratedCurrent: 3 });
    const strong = brick('K2', 12.3, { limit: { style: 'constant-current', current: 6 } });
    const world = worldOf('parallel', [folding, strong]);
    under(world, 3.5, 1);
    const phases = new Set<string>();
    for (let at = 10; at < 36_000; at += 60) phases.add(seen(world, at).modules[0]?.phase ?? '');
    expect([...phases].sort()).toEqual(['held', 'limiting']);
  });
});

describe('any group at any moment', () => {
  const limits = fc.constantFrom<ModuleLimit>(
    { style: 'constant-current', current: 4 },
    { style: 'foldback', current: 4, shortCircuit: 1 },
    { style: 'constant-power', current: 4 },
    { style: 'hiccup', current: 4, period: 0.7 },
    { style: 'latch-off', current: 4 },
  );
  const module = fc.record({
    openCircuitVoltage: fc.double({ min: 12, max: 12.6, noNaN: true }),
    droopResistance: fc.double({ min: 0.001, max: 0.1, noNaN: true }),
    ballast: fc.constantFrom(0, 0.05, 0.2),
    limit: limits,
  });
  const acts = fc.array(
    fc.tuple(
      fc.oneof(
        fc.double({ min: 0, max: 14, noNaN: true }),
        fc.double({ min: 0, max: 13, noNaN: true }).map((volts) => ({ volts })),
        fc.constantFrom('absent' as const, 'present' as const),
      ),
      fc.double({ min: 0.001, max: 300, noNaN: true }),
    ),
    { minLength: 1, maxLength: 6 },
  );

  it('obeys Kirchhoff, and no current flows backwards', () => {
    fc.assert(
      fc.property(fc.array(module, { minLength: 2, maxLength: 4 }), acts, (drawn, played) => {
        const modules = drawn.map((one, index) => brick(`K${index + 1}`, one.openCircuitVoltage, one));
        const world = worldOf('parallel', modules);
        let at = 1;
        for (const [act, elapsed] of played) {
          if (act === 'absent' || act === 'present') world.setInput(act, at, 'K1');
          else if (typeof act === 'number')
            world.setLoad({ input: 'on', mode: 'current', setCurrent: act }, at);
          else world.setLoad({ input: 'on', mode: 'voltage', setVoltage: act.volts }, at);
          at += elapsed;
          const moment = seen(world, at);
          const currents = currentsOf(moment);
          expect(Math.min(...currents)).toBeGreaterThanOrEqual(0);
          expect(Math.abs(currents.reduce((sum, own) => sum + own, 0) - moment.current)).toBeLessThan(1e-9);
          for (const [place, voltage] of voltagesOf(moment).entries()) {
            const drop = (currents[place] ?? 0) * (modules[place]?.ballast ?? 0);
            expect(Math.abs(voltage - moment.moduleVoltage - drop)).toBeLessThan(1e-9);
            expect(currents[place]).toBeLessThan(4 / 0.6 + 1e-9);
          }
          expect(moment.loadVoltage).toBeCloseTo(moment.moduleVoltage - LEADS * moment.current, 9);
        }
      }),
      { numRuns: 200 },
    );
  });

  it('one module behind no ballast beside one that is unplugged does as it would alone', () => {
    fc.assert(
      fc.property(module, acts, (drawn, played) => {
        const own = brick('K1', drawn.openCircuitVoltage, { ...drawn, ballast: 0 });
        const alone = worldOf('single', [own]);
        const beside = worldOf('parallel', [own, brick('K2', 12.3)]);
        beside.setInput('absent', 0.5, 'K2');
        let at = 1;
        for (const [act, elapsed] of played) {
          for (const world of [alone, beside]) {
            if (act === 'absent' || act === 'present') world.setInput(act, at, 'K1');
            else if (typeof act === 'number')
              world.setLoad({ input: 'on', mode: 'current', setCurrent: act }, at);
            else world.setLoad({ input: 'on', mode: 'voltage', setVoltage: act.volts }, at);
          }
          at += elapsed;
          const [one, other] = [seen(alone, at), seen(beside, at)];
          expect(other.modules[0]?.phase).toBe(one.phase);
          expect(Math.abs(other.moduleVoltage - one.moduleVoltage)).toBeLessThan(1e-6);
          expect(Math.abs(other.current - one.current)).toBeLessThan(1e-6);
        }
      }),
      { numRuns: 300 },
    );
  });
});
