import { describe, expect, it } from 'vitest';
import type { ModuleLimit, SimulatedModule } from '../../src/files/simulation-section.js';
import fc from '../property.js';
import { LEADS, brick, currentsOf, seen, under, voltagesOf, worldOf } from './circuit-play.js';

const weak = (style: 'hiccup' | 'constant-current'): ModuleLimit =>
  style === 'hiccup' ? { style, current: 2, period: 0.8 } : { style, current: 2 };

/** Three of the bricks of common practice (no published source), through 50 mΩ each. */
const three = (
  change: Partial<SimulatedModule> = {},
  middle: Partial<SimulatedModule> = {},
): SimulatedModule[] => [
  brick('K1', 12.34, { ballast: 0.05, ...change }),
  brick('K2', 12.338, { ballast: 0.05, ...change, ...middle }),
  brick('K3', 12.336, { ballast: 0.05, ...change }),
];

describe('three bricks in series', () => {
  it('hold 3.5 A together, and the voltages add up', () => {
    const world = worldOf('series', three());
    expect(under(world, 0, 1).moduleVoltage).toBeCloseTo(37.014, 9);
    // About 36.8 V is what practice reads, at a moderate load; at 3.5 A the resistors take 0.5 V.
    expect(under(world, 1.4, 2).moduleVoltage).toBeCloseTo(36.8, 1);
    const full = under(world, 3.5, 3);
    expect(full.moduleVoltage).toBeCloseTo(37.014 - 3.5 * (0.15 + 3 * 0.0015), 9);
    expect(currentsOf(full)).toEqual([3.5, 3.5, 3.5]);
    // What the uppermost 0 V rail floats at.
    const [low = 0, middle = 0] = voltagesOf(full);
    expect(low + middle - 2 * 3.5 * 0.05).toBeCloseTo(24.3, 1);
  });

  it('beyond the weakest one’s limit the string fails as a whole, and is back with the load eased', () => {
    const world = worldOf('series', three());
    const failed = under(world, 3.8, 1);
    expect(failed.moduleVoltage).toBeLessThan(1.5);
    expect(failed.modules.filter(({ phase }) => phase === 'retrying')).toHaveLength(1);
    expect(under(world, 3.5, 2, 1).moduleVoltage).toBeGreaterThan(36.4);
  });
});

describe('a collapsed module in a stack', () => {
  it('with a reverse diode leaves the string its current, and costs it a little more than its own voltage', () => {
    const world = worldOf('series', three({ reverseDiode: true }, { limit: weak('hiccup') }));
    const moment = under(world, 2.5, 1, 0.5);
    expect(moment.current).toBeCloseTo(2.5, 9);
    expect(voltagesOf(moment)[1]).toBeLessThan(-0.6);
    expect(voltagesOf(moment)[1]).toBeGreaterThan(-0.9);
    expect(currentsOf(moment)[1]).toBeLessThan(0.01);
    expect(moment.modules[1]?.ballastVoltage).toBeCloseTo(0.125, 9);
    expect(moment.moduleVoltage).toBeGreaterThan(23);
  });

  it('without one stops the string, the others’ voltage across it backwards', () => {
    const world = worldOf('series', three({}, { limit: weak('hiccup') }));
    const moment = under(world, 2.5, 1, 0.5);
    // What is left goes through the resistor that discharges its output.
    expect(moment.current).toBeLessThan(0.03);
    expect(voltagesOf(moment)[1]).toBeLessThan(-24);
    expect(moment.modules.map(({ phase }) => phase)).toEqual(['held', 'retrying', 'held']);
  });

  it('that stays at its limit holds the string there', () => {
    const bare = under(worldOf('series', three({}, { limit: weak('constant-current') })), 2.5, 1);
    expect(bare.current).toBeCloseTo(2, 9);
    expect(bare.moduleVoltage).toBeLessThan(1.5);
    const world = worldOf('series', three({ reverseDiode: true }, { limit: weak('constant-current') }));
    const moment = under(world, 2.5, 1);
    expect(moment.current).toBeCloseTo(2.5, 9);
    expect(currentsOf(moment)[1]).toBeCloseTo(2, 3);
    expect(under(world, 1.9, 2).moduleVoltage).toBeGreaterThan(36.6);
  });

  it('that folds back stays down until the string asks for less than it still gives', () => {
    const limit: ModuleLimit = { style: 'foldback', current: 2, shortCircuit: 0.6 };
    const world = worldOf('series', three({ reverseDiode: true }, { limit }));
    expect(voltagesOf(under(world, 1.9, 1))[1]).toBeGreaterThan(12);
    expect(voltagesOf(under(world, 2.1, 2))[1]).toBeLessThan(-0.5);
    expect(voltagesOf(under(world, 1, 3))[1]).toBeLessThan(-0.5);
    expect(voltagesOf(under(world, 0.5, 4))[1]).toBeGreaterThan(12);
  });

  it('among others that all fold back stays down with them, warm or cooling, until the load is eased', () => {
    const thermal = { riseAtRated: 35, timeConstant: 600, ambient: 23, limitPerKelvin: -0.002 };
    const limit: ModuleLimit = { style: 'foldback', current: 3.7, shortCircuit: 1 };
    const world = worldOf('series', three({ limit, thermal, ratedCurrent: 3, reverseDiode: true }));
    expect(under(world, 3.5, 1).moduleVoltage).toBeGreaterThan(36);
    for (let at = 600; at <= 7200; at += 600) {
      const moment = seen(world, at);
      expect(moment.modules.map(({ phase }) => phase)).toEqual(['limiting', 'limiting', 'limiting']);
      // The load, which cannot fill itself, is some tenths of an ohm: 1 V and 35 mΩ for 3.5 A.
      expect(moment.current).toBeLessThan(1.5);
      expect(moment.loadVoltage).toBeCloseTo(moment.current / 3.5, 9);
    }
    expect(under(world, 0.5, 7201).moduleVoltage).toBeGreaterThan(36);
  });

  it('and an unplugged one are the same to the others; plugged in again it comes up by itself', () => {
    const world = worldOf('series', three({ reverseDiode: true }));
    under(world, 2, 1);
    world.setInput('absent', 2, 'K2');
    expect(world.inputOf('K2')).toBe('absent');
    const without = seen(world, 2.1);
    expect(voltagesOf(without)[1]).toBeLessThan(-0.6);
    expect(without.modules.map(({ phase }) => phase)).toEqual(['held', 'off', 'held']);
    world.setInput('present', 3, 'K2');
    const rising = seen(world, 3.004);
    expect(voltagesOf(rising)[1]).toBeGreaterThan(6);
    expect(voltagesOf(rising)[1]).toBeLessThan(9);
    expect(seen(world, 3.2).moduleVoltage).toBeCloseTo(37.014 - 2 * 0.1545, 6);
  });
});

describe('earth bonds in a stack', () => {
  const bonded = (...names: string[]): SimulatedModule[] =>
    three({ limit: weak('constant-current') }).map((module) =>
      names.includes(module.name) ? { ...module, earth: 'bonded' } : module,
    );

  it('one alone does nothing', () => {
    expect(under(worldOf('series', bonded('K2')), 1, 1).moduleVoltage).toBeGreaterThan(36.7);
  });

  it('two short the module between them from the beginning', () => {
    const moment = under(worldOf('series', bonded('K1', 'K2')), 1, 1);
    expect(moment.modules.map(({ phase }) => phase)).toEqual(['limiting', 'held', 'held']);
    expect(currentsOf(moment)).toEqual([2, 1, 1]);
    // All that it has left stands across its own series resistor.
    expect(voltagesOf(moment)[0]).toBeCloseTo(2 * 0.05, 9);
    expect(moment.moduleVoltage).toBeCloseTo(12.338 + 12.336 - 0.103, 9);
  });

  it('the lowest and the uppermost short both modules below the uppermost', () => {
    const moment = under(worldOf('series', bonded('K1', 'K3')), 1, 1);
    expect(moment.moduleVoltage).toBeCloseTo(12.336 - 0.0515, 9);
    expect((voltagesOf(moment)[0] ?? NaN) + (voltagesOf(moment)[1] ?? NaN)).toBeCloseTo(2 * 0.1, 6);
  });

  it('a hiccuping module between them keeps trying into the short', () => {
    const modules = three().map((module, place) =>
      place < 2 ? { ...module, earth: 'bonded' as const } : module,
    );
    const world = worldOf('series', modules);
    expect(seen(world, 0.5).modules[0]).toMatchObject({ phase: 'retrying', current: 0 });
    expect(seen(world, 0.85).modules[0]?.current).toBeCloseTo(3.7, 9);
  });
});

describe('any stack at any moment', () => {
  const limits = fc.constantFrom<ModuleLimit>(
    { style: 'constant-current', current: 4 },
    { style: 'foldback', current: 3, shortCircuit: 1 },
    { style: 'constant-power', current: 4 },
    { style: 'hiccup', current: 3.5, period: 0.7 },
    { style: 'latch-off', current: 4 },
  );
  const module = fc.record({
    openCircuitVoltage: fc.double({ min: 12, max: 12.6, noNaN: true }),
    droopResistance: fc.double({ min: 0.001, max: 0.1, noNaN: true }),
    ballast: fc.constantFrom(0, 0.05, 0.2),
    limit: limits,
    reverseDiode: fc.boolean(),
    earth: fc.constantFrom<SimulatedModule['earth']>('isolated', 'isolated', 'bonded', 20_000),
  });
  const acts = fc.array(
    fc.tuple(
      fc.oneof(
        fc.double({ min: 0, max: 6, noNaN: true }),
        fc.double({ min: 0, max: 40, noNaN: true }).map((volts) => ({ volts })),
        fc.constantFrom('absent' as const, 'present' as const),
      ),
      fc.double({ min: 0.001, max: 300, noNaN: true }),
    ),
    { minLength: 1, maxLength: 6 },
  );

  it('obeys Kirchhoff: voltages and drops add up to the output, shorted ones to nothing', () => {
    fc.assert(
      fc.property(fc.array(module, { minLength: 2, maxLength: 4 }), acts, (drawn, played) => {
        const modules = drawn.map((one, index) => brick(`K${index + 1}`, one.openCircuitVoltage, one));
        const world = worldOf('series', modules);
        let at = 1;
        for (const [act, elapsed] of played) {
          if (act === 'absent' || act === 'present') world.setInput(act, at, 'K1');
          else if (typeof act === 'number')
            world.setLoad({ input: 'on', mode: 'current', setCurrent: act }, at);
          else world.setLoad({ input: 'on', mode: 'voltage', setVoltage: act.volts }, at);
          at += elapsed;
          const moment = seen(world, at);
          const inside = moment.modules.reduce((sum, own) => sum + own.voltage - own.ballastVoltage, 0);
          expect(Math.abs(inside - moment.moduleVoltage)).toBeLessThan(1e-6);
          expect(moment.current).toBeGreaterThanOrEqual(0);
          expect(moment.loadVoltage).toBeCloseTo(moment.moduleVoltage - LEADS * moment.current, 9);
          for (const [place, own] of moment.modules.entries()) {
            expect(Number.isFinite(own.voltage) && Number.isFinite(own.current)).toBe(true);
            if (modules[place]?.reverseDiode === true) expect(own.voltage).toBeGreaterThan(-0.9);
          }
        }
      }),
      { numRuns: 300 },
    );
  });

  it('one module in it alone does as it would without a stack', () => {
    fc.assert(
      fc.property(module, acts, (drawn, played) => {
        const own = brick('K1', drawn.openCircuitVoltage, { ...drawn, ballast: 0, earth: 'isolated' });
        const worlds = [worldOf('single', [own]), worldOf('series', [own])] as const;
        let at = 1;
        for (const [act, elapsed] of played) {
          for (const world of worlds) {
            if (act === 'absent' || act === 'present') world.setInput(act, at, 'K1');
            else if (typeof act === 'number')
              world.setLoad({ input: 'on', mode: 'current', setCurrent: act }, at);
            else world.setLoad({ input: 'on', mode: 'voltage', setVoltage: act.volts }, at);
          }
          at += elapsed;
          const [alone, stacked] = [seen(worlds[0], at), seen(worlds[1], at)];
          expect(stacked.modules[0]?.phase).toBe(alone.modules[0]?.phase);
          expect(Math.abs(stacked.moduleVoltage - alone.moduleVoltage)).toBeLessThan(1e-6);
          expect(Math.abs(stacked.current - alone.current)).toBeLessThan(1e-6);
        }
      }),
      { numRuns: 300 },
    );
  });
});
