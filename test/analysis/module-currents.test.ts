import { describe, expect, it } from 'vitest';
import { budgetOf, type GroupLook, groupLooks, type Weights } from '../../src/analysis/module-currents.js';
import { shareFindings, imbalanceFinding } from '../../src/analysis/shares.js';
import type { RunHeader } from '../../src/record/run-header.js';
import { circuitEvidence, circuitHeader, type CircuitHeader, type CircuitPoint } from './circuit-evidence.js';

const root3 = Math.sqrt(3);
const group = (rest: Partial<CircuitHeader> = {}): RunHeader =>
  circuitHeader({ circuit: 'parallel', ballasts: { K1: [0.05, 0], K2: [0.1, 0] }, ...rest });
/** 3 A through 50 mΩ and 1 A through 100 mΩ. */
const point: CircuitPoint = { set: 4, output: 15, places: { K1: 0.15, K2: 0.1 } };

function lookAt(header: RunHeader, points: readonly CircuitPoint[] = [point]): GroupLook {
  const look = groupLooks(circuitEvidence(header, points)).at(-1);
  if (look === undefined) throw new Error('no look');
  return look;
}

function line(header: RunHeader, weights: Weights, name: string, points?: readonly CircuitPoint[]): number {
  const found = budgetOf(header, lookAt(header, points), weights).find((one) => one.name === name);
  if (found === undefined) throw new Error(`no ${name}`);
  return found.uncertainty;
}

describe('the current of a module', () => {
  it('is the voltage across its ballast over the measured value of it', () => {
    expect(lookAt(group()).currents.map(({ module, current }) => [module, current])).toEqual([
      ['K1', expect.closeTo(3, 12)],
      ['K2', expect.closeTo(1, 12)],
    ]);
  });

  it('is as uncertain as its ballast: a half-width of 1 % is 1 %/√3 of the current', () => {
    const header = group({ ballasts: { K1: [0.05, 0.0005], K2: [0.1, 0] } });
    expect(line(header, { modules: [1, 0] }, 'ballast of K1')).toBeCloseTo((3 * 0.01) / root3, 12);
  });

  it('has the scatter of the mean of its readings', () => {
    const scattered = { ...point, places: { K1: [0.149, 0.15, 0.151], K2: 0.1 } };
    const name = 'scatter of the readings';
    expect(line(group(), { modules: [1, 0] }, name, [scattered])).toBeCloseTo(0.001 / root3 / 0.05, 12);
  });

  it('has the last digit and the offset of the meter over the ballast, and its gain', () => {
    const header = group({ meter: { voltage: { ofReading: 0.01, fixed: 0.003, resolution: 0.002 } } });
    const of = (name: string): number => line(header, { modules: [1, 0] }, `meter voltage, ${name}`);
    expect(of('gain')).toBeCloseTo((3 * 0.01) / root3, 12);
    expect(of('offset')).toBeCloseTo(0.003 / root3 / 0.05, 12);
    expect(of('resolution')).toBeCloseTo(0.001 / root3 / 0.05, 12);
  });

  it('has what moved between the passes, where an operator moved the meter', () => {
    const passes: readonly CircuitPoint[] = [
      { set: 4, current: 4.02, of: 'K1', output: 15.001, by: 'load', places: { K1: 0.15 } },
      { set: 4, current: 3.98, of: 'K2', output: 15, by: 'load', places: { K2: 0.1 } },
    ];
    // 40 mA of 4 A, and 1 mV over 50 mΩ, each rectangular over the whole width.
    const expected = Math.hypot((3 * 0.01) / 2 / root3, 0.001 / 2 / root3 / 0.05);
    expect(line(group(), { modules: [1, 0] }, 'drift between the passes', passes)).toBeCloseTo(expected, 9);
    expect(lookAt(group(), passes).total).toBeCloseTo(4, 12);
  });

  it('is not there for a place whose ballast nobody has measured', () => {
    const header = group();
    const bare = {
      ...header,
      bench: { ...header.bench, places: [{}, { ballast: { resistance: 0.1, uncertainty: 0 } }] },
    };
    expect(lookAt(bare).currents.map(({ module }) => module)).toEqual(['K2']);
  });
});

describe('a share', () => {
  const accuracy = { voltage: { ofReading: 0.05, fixed: 0 } };

  it('is the module’s current over that of all', () => {
    const header = group();
    const look = lookAt(header);
    expect(shareFindings(header, look, [look]).map(({ name, value }) => [name, value])).toEqual([
      ['share-of-K1', expect.closeTo(0.75, 12)],
      ['share-of-K2', expect.closeTo(0.25, 12)],
    ]);
  });

  it('does not feel the gain of a meter that reads every place', () => {
    const header = group({ meter: accuracy });
    const look = lookAt(header);
    expect(shareFindings(header, look, [look])[0]?.standardUncertainty).toBeCloseTo(0, 12);
    expect(imbalanceFinding(header, look, { setting: 0.1, curve: [look] }).standardUncertainty).toBeCloseTo(
      0,
      12,
    );
  });

  it('feels those of meters of the places’ own: ds₁ = s₁·s₂·(g₁ − g₂)', () => {
    const header = group({ ownMeters: accuracy });
    const look = lookAt(header);
    const expected = 0.75 * 0.25 * Math.SQRT2 * (0.05 / root3);
    expect(shareFindings(header, look, [look])[0]?.standardUncertainty).toBeCloseTo(expected, 12);
  });

  it('feels an offset of the common meter only as far as the ballasts differ', () => {
    const offset = { voltage: { ofReading: 0, fixed: 0.003 } };
    const alike = group({ meter: offset, ballasts: { K1: [0.05, 0], K2: [0.05, 0] } });
    const even = lookAt(alike, [{ ...point, places: { K1: 0.1, K2: 0.1 } }]);
    expect(shareFindings(alike, even, [even])[0]?.standardUncertainty).toBeCloseTo(0, 12);
    const header = group({ meter: offset });
    const look = lookAt(header);
    // ∂s₁/∂o = (s₂/R₁ − s₁/R₂)/ΣI
    const expected = (Math.abs(0.25 / 0.05 - 0.75 / 0.1) / 4) * (0.003 / root3);
    expect(shareFindings(header, look, [look])[0]?.standardUncertainty).toBeCloseTo(expected, 12);
  });

  it('tells what it was at the lightest load, where that is known well enough', () => {
    const header = group({ meter: { voltage: { ofReading: 0, fixed: 0.003 } } });
    const at = (set: number, k1: number, k2: number): CircuitPoint => ({
      set,
      output: 15,
      places: { K1: k1, K2: k2 },
    });
    const points = [at(0.04, 0.002, 0), at(2, 0.09, 0.02), at(4, 0.15, 0.1)];
    const looks = groupLooks(circuitEvidence(header, points));
    const [share] = shareFindings(header, lookAt(header, points), looks);
    expect(share?.note).toBe('3.00 A of 4.00 A; 90 % of 2.00 A');
  });
});
