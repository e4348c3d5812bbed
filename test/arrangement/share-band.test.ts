import { describe, expect, it } from 'vitest';
import { drawnGroup, withoutErrors } from '../../src/arrangement/drawn-group.js';
import { wayUp } from '../../src/arrangement/group-draws.js';
import type { ModuleProfile, Taken } from '../../src/arrangement/module-profile.js';
import type { ShareBand } from '../../src/arrangement/parallel-build.js';
import { bandLoads, shareBand } from '../../src/arrangement/share-band.js';
import { latinHypercube } from '../../src/statistics/latin-hypercube.js';
import { randomFrom } from '../../src/statistics/random.js';
import fc from '../property.js';
import { madeProfile } from './made-profile.js';

function bandOf(profiles: readonly ModuleProfile[], tolerance: number, loads: readonly number[]): ShareBand {
  const ballast = { resistance: 0.1, tolerance };
  return shareBand(
    {
      best: drawnGroup(profiles, ballast, withoutErrors),
      drawn: drawnGroup(profiles, ballast, latinHypercube(2000, randomFrom(1))),
    },
    loads,
  );
}

const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const profiles = fc
  .array(fc.record({ openCircuit: number(15.1, 15.3), droop: number(0.005, 0.05) }), {
    minLength: 2,
    maxLength: 4,
  })
  .map((made) =>
    made.map((one, index) => madeProfile(`K${index + 1}`, { ...one, style: 'constant-current' })),
  );

describe('the band of the shares', () => {
  it('holds the best line, whose currents add up to the load', () => {
    fc.assert(
      fc.property(profiles, number(0, 0.2), number(0.1, 4.5), (modules, tolerance, each) => {
        const load = each * modules.length;
        const { currents, busVoltage } = bandOf(modules, tolerance, [load]);
        expect(currents.reduce((sum, { best }) => sum + (best[0] ?? NaN), 0)).toBeCloseTo(load, 7);
        for (const { best, low, high } of [...currents, busVoltage]) {
          expect(low[0]).toBeLessThanOrEqual(best[0] ?? NaN);
          expect(high[0]).toBeGreaterThanOrEqual(best[0] ?? NaN);
        }
      }),
      { numRuns: 50 },
    );
  });

  it('is never narrower for coarser ballasts', () => {
    fc.assert(
      fc.property(profiles, number(0, 0.1), number(0.005, 0.1), (modules, tolerance, more) => {
        const load = 3 * modules.length;
        const closer = bandOf(modules, tolerance, [load]);
        const coarser = bandOf(modules, tolerance + more, [load]);
        for (const [index, { low, high }] of closer.currents.entries()) {
          const width = (high[0] ?? NaN) - (low[0] ?? NaN);
          const wider = (coarser.currents[index]?.high[0] ?? NaN) - (coarser.currents[index]?.low[0] ?? NaN);
          // Two thousand draws leave a quantile uncertain by a per cent or two.
          expect(wider).toBeGreaterThan(0.97 * width);
        }
      }),
      { numRuns: 50 },
    );
  });

  it('is not widened by an error that the meter makes for all of them alike', () => {
    const gainOf = (taken: Taken, shared: string | undefined): Taken => ({
      ...taken,
      budget: [{ name: 'gain', kind: 'B', uncertainty: 0.02, degreesOfFreedom: Infinity, shared }],
    });
    const pair = (shared: string | undefined) =>
      [madeProfile('K1'), madeProfile('K2')].map((one) => ({
        ...one,
        openCircuit: gainOf(one.openCircuit, shared),
      }));
    const widthOf = ({ currents: [first], busVoltage }: ShareBand) => ({
      current: (first?.high[0] ?? NaN) - (first?.low[0] ?? NaN),
      bus: (busVoltage.high[0] ?? NaN) - (busVoltage.low[0] ?? NaN),
    });
    const alike = widthOf(bandOf(pair('meter voltage, gain'), 0, [4]));
    const own = widthOf(bandOf(pair(undefined), 0, [4]));
    // Of their own: 20 mV·√2 over 236 mΩ, twice 1.96 of it; the droops alone leave less than a hundredth.
    expect(own.current).toBeCloseTo((2 * 1.96 * 0.02 * Math.SQRT2) / 0.236, 1);
    expect(alike.current).toBeLessThan(0.02 * own.current);
    // The bus moves with all of the one, and with half of each of the others.
    expect(alike.bus / own.bus).toBeCloseTo(Math.SQRT2, 1);
  });

  it('has a place at each corner of the best line', () => {
    const group = [
      madeProfile('K1', { openCircuit: 15.4, dropout: 2.5 }),
      madeProfile('K2', { openCircuit: 15.2, style: 'constant-current' }),
      madeProfile('K3', { openCircuit: 15.1, style: 'constant-current' }),
    ];
    const { end, corners } = wayUp(drawnGroup(group, { resistance: 0.1, tolerance: 0 }, withoutErrors));
    const loads = bandLoads(end.end, corners);
    expect(loads).toHaveLength(200);
    expect(loads.every((load, place) => load > (loads[place - 1] ?? 0))).toBe(true);
    const inside = corners.filter(({ load }) => load > 0 && load < end.end);
    expect(inside.length).toBeGreaterThanOrEqual(4);
    for (const { load } of inside) {
      const nearest = Math.min(...loads.map((each) => Math.abs(each - load)));
      expect(nearest).toBeLessThan(1e-6);
    }
  });
});
