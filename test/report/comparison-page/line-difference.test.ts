import { describe, expect, it } from 'vitest';
import type { RunHeader } from '../../../src/record/run-header.js';
import { lineDifferenceFigure } from '../../../src/report/comparison-page/line-difference.js';
import { evenly, faultless, headerOf, ramp } from '../../analysis/evidence-of.js';
import { readChart } from '../chart/read-chart.js';
import { madeResult } from '../run-charts/made-results.js';
import { compared } from './made-comparisons.js';

/** A brick on a ramp without any scatter: all that is uncertain is what the header says. */
function brickOf(openCircuit: number, droop: number, header: RunHeader, leads = 0) {
  const points = ramp(evenly(0, 4, 21), (current) => openCircuit - droop * current).map((point) => ({
    ...point,
    samples: point.samples.map(({ meter, current }) => ({
      ...(header.bench.voltageFrom === 'meter-at-module' ? { meter: meter ?? 0 } : {}),
      load: (meter ?? 0) - leads * (current ?? 0),
      current,
    })),
  }));
  return madeResult([{ kind: 'load-ramp', points }], header);
}

function shown(before: ReturnType<typeof brickOf>, after: ReturnType<typeof brickOf>) {
  const records = compared(before, after);
  const figure = lineDifferenceFigure(records);
  if (figure === undefined) throw new Error('no difference is drawn');
  const chart = readChart(figure);
  const band = chart.bands[0] ?? [];
  const at = (current: number): readonly number[] =>
    band.filter(([x]) => Math.abs(x - current) < 0.01).map(([, y]) => y);
  const words = figure.toString().replaceAll('\u00a0', ' ').replaceAll('&quot;', '"');
  const named = (name: string) =>
    records.comparison.findings.find(({ finding }) => finding === name)?.difference;
  return { chart, at, words, named };
}

// 10 mV of offset, taken as rectangular, twice: U = √2 · 1.96 · 10/√3 mV = 16.0 mV.
const offset = headerOf({ meter: { ...faultless, voltage: { ofReading: 0, fixed: 0.01 } } });

describe('the later line less the earlier one', () => {
  it('is drawn with all that the voltages may be wrong by, so that what was not found is not seen', () => {
    const { at, named, words } = shown(brickOf(15.21, 0.018, offset), brickOf(15.218, 0.018, offset));
    const [low, high] = [Math.min(...at(0)), Math.max(...at(0))];
    expect((high - low) / 2).toBeCloseTo(16, 0);
    expect((high + low) / 2).toBeCloseTo(8, 0);
    expect((high - low) / 2000).toBeCloseTo(named('open-circuit-voltage')?.expanded ?? NaN, 3);
    expect(Math.abs(named('open-circuit-voltage')?.normalizedError ?? NaN)).toBeLessThan(1);
    expect(low).toBeLessThan(0);
    expect(words).toContain('+8 ± 16 mV without load, +8 ± 16 mV at 4.000 A');
  });

  it('stands clear of nothing where the voltage did change', () => {
    const { at } = shown(brickOf(15.21, 0.018, offset), brickOf(15.25, 0.018, offset));
    expect(Math.min(...at(0))).toBeGreaterThan(0);
  });

  it('says by how much the droop changed, with the uncertainty of that', () => {
    const gain = { ...faultless, voltage: { ofReading: 0.01, fixed: 0 } };
    const header = headerOf({ meter: gain });
    const grown = shown(brickOf(15.21, 0.018, header), brickOf(15.21, 0.024, header));
    // U = 1.96 · 1 %/√3 · √(18² + 24²) mΩ = 0.34 mΩ.
    expect(grown.words).toMatch(
      /The droop differs by \+6\.00 ± 0\.34 mΩ \(\+33 %\), which is more than its unc/,
    );
    const same = shown(brickOf(15.21, 0.018, header), brickOf(15.21, 0.0181, header));
    expect(same.words).toMatch(/by \+100 ± 290 µΩ \(\+0\.56 %\), which is not more than its uncertainty/);
  });

  it('read at the module, is shifted as a whole; read at the load, the leads tilt it', () => {
    const leads = { resistance: 0.035, uncertainty: 0.005 };
    const atModule = shown(brickOf(15.21, 0.018, offset), brickOf(15.21, 0.018, offset));
    expect(atModule.words).toContain('shifts the line as a whole');
    expect(atModule.words).not.toContain('leads');
    const header = headerOf({ load: faultless, leads, voltageFrom: 'load-terminals' });
    const atLoad = shown(brickOf(15.21, 0.018, offset), brickOf(15.21, 0.018, header, 0.035));
    expect(atLoad.words).toContain('may be wrong by (± 5 mΩ in the later record) tilts the line');
    const both = shown(brickOf(15.21, 0.018, header, 0.035), brickOf(15.21, 0.018, header, 0.035));
    expect(both.words).toContain('(± 5 mΩ in the earlier record and ± 5 mΩ in the later record)');
    // By hand: √2 · 1.96 · 5 mΩ/√3 · 4 A = 32.0 mV at the end, and nothing without load.
    expect(Math.max(...both.at(4))).toBeCloseTo(32, 0);
    expect(Math.max(...both.at(0))).toBeCloseTo(0, 0);
  });
});
