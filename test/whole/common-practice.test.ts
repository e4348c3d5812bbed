import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Finding } from '../../src/analysis/finding.js';
import type { ModuleLimit, SimulatedModule } from '../../src/files/simulation-section.js';
import { plainStyle } from '../../src/report/style.js';
import { resultAsText } from '../../src/report/text.js';
import { brick, type CircuitCase, runCircuit } from './circuit-bench.js';

// Common practice, no published source: what happens when supplies are simply joined, told from experience.
// Bricks that read 12.34 V with no load, milliohms of droop, limits near 3.5 to 4 A.

let runs: string;
beforeAll(() => {
  runs = mkdtempSync(join(tmpdir(), 'railproof-common-practice-'));
});
afterAll(() => {
  rmSync(runs, { recursive: true, force: true });
});

type Style = (current: number) => ModuleLimit;
const hiccup: Style = (current) => ({ style: 'hiccup', current, period: 0.8 });
const constantCurrent: Style = (current) => ({ style: 'constant-current', current });
const latchOff: Style = (current) => ({ style: 'latch-off', current });

function twelve(name: string, volts: number, limit: ModuleLimit, ballast: number): SimulatedModule {
  return brick(name, { openCircuitVoltage: volts, droopResistance: 0.002, noise: 2e-4, limit, ballast });
}

/** A joint between two wires. */
const joined = 0.001;

async function told(
  procedure: string,
  given: Pick<CircuitCase, 'circuit' | 'modules' | 'fineMeter'>,
): Promise<{ readonly text: string; readonly found: (name: string) => Finding | undefined }> {
  const { result, error } = await runCircuit(
    procedure,
    { measuredBy: 'scanner', rated: { voltage: 12, current: 3.5 }, fineMeter: true, ...given },
    runs,
  );
  if (error !== undefined) throw error;
  return {
    text: resultAsText(result, plainStyle),
    found: (name) => result.findings.find((finding) => finding.name === name),
  };
}

describe('two bricks that both read 12.34 V', () => {
  it('whose joints are too small for the meter: nobody is called a hog, and one label is all that is allowed', async () => {
    const { found, text } = await told('sharing', {
      circuit: 'parallel',
      modules: [twelve('K1', 12.344, hiccup(3.7), joined), twelve('K2', 12.336, hiccup(3.6), joined)],
      fineMeter: false,
    });
    expect(found('hogging-module')?.value).toBe('undetermined');
    expect(text).not.toMatch(/K[12] hogs|reversed/);
    expect(found('recommended-current')?.value).toBeGreaterThan(2.5);
    expect(found('recommended-current')?.value).toBeLessThanOrEqual(3.5);
  });

  it('joined directly fail at about what one of them holds, near 4 A, and the report says which and why', async () => {
    const { found, text } = await told('sharing', {
      circuit: 'parallel',
      modules: [twelve('K1', 12.344, hiccup(3.7), joined), twelve('K2', 12.336, hiccup(3.6), joined)],
    });
    expect(Number(found('group-current')?.value)).toBeGreaterThan(3.6);
    expect(Number(found('group-current')?.value)).toBeLessThan(5);
    expect(found('group-current')?.note).toMatch(
      /^it fails at about what one of them holds: K1 hogs, carried 3\.\d+ A of [34]\.\d+ A, leaves at its limit, and the rest can't carry it/,
    );
    expect(found('hogging-module')).toMatchObject({ value: 'K1' });
    expect(text).toMatch(/^K1 hogs: it carries .* there are only 1\.0 mΩ of ballast in each\.$/m);
    expect(text).toMatch(/^The group holds [34]\.\d+ ± 0\.\d+ A; it fails at about what one of them holds/m);
  });

  it('with 50 mΩ in each hold 7 A, and nobody hogs', async () => {
    const { found, text } = await told('sharing', {
      circuit: 'parallel',
      modules: [twelve('K1', 12.344, hiccup(3.9), 0.05), twelve('K2', 12.336, hiccup(3.8), 0.05)],
    });
    expect(Number(found('group-current')?.interval?.[0])).toBeGreaterThan(7);
    expect(found('hogging-module')).toMatchObject({ value: 'none' });
    expect(text).toContain('They share the load: ');
    expect(Number(found('recommended-ballast')?.value)).toBeLessThanOrEqual(0.05);
  });

  it('of constant current joined directly: one hogs, and the group still holds', async () => {
    const { found, text } = await told('sharing', {
      circuit: 'parallel',
      modules: [
        twelve('K1', 12.36, constantCurrent(3.9), joined),
        twelve('K2', 12.33, constantCurrent(3.8), joined),
      ],
    });
    expect(Number(found('group-current')?.interval?.[0])).toBeGreaterThan(7);
    expect(found('group-current')?.note).toMatch(
      /^K1 meets its limit first, at 3\.\d+ A when the whole takes 4\.\d+ A/,
    );
    expect(found('hogging-module')).toMatchObject({ value: 'K1' });
    expect(found('hogging-module')?.note).toContain('K1 is at its limit beyond');
    expect(text).toMatch(/^K1 hogs: it carries 9\d % of 4\.\d+ A because .*30 mV above K2/m);
  });

  it('of which the first latches off: it is named as the one that did not come back', async () => {
    const { found } = await told('sharing', {
      circuit: 'parallel',
      modules: [twelve('K1', 12.36, latchOff(3.7), joined), twelve('K2', 12.33, hiccup(3.6), joined)],
    });
    expect(found('group-current')?.note).toContain('K1 did not come back');
  });
});

describe('three of them in series through 50 mΩ each', () => {
  it('read about 36.8 V, hold 3.5 A, and the uppermost 0 V floats at about 24 V', async () => {
    const modules = ['K1', 'K2', 'K3'].map((name) => ({
      ...twelve(name, 12.27, hiccup(3.9), 0.05),
      reverseDiode: true,
    }));
    const { found, text } = await told('stacking', { circuit: 'series', modules });
    expect(found('stack-voltage')?.value).toBeCloseTo(36.8, 1);
    expect(found('group-current')).toMatchObject({ bound: 'least', note: 'nothing dropped up to 3.50 A' });
    expect(found('group-current')?.value).toBeCloseTo(3.5, 1);
    expect(found('float-voltage-of-K3')?.value).toBeCloseTo(24.54, 1);
    expect(found('weakest-module')).toMatchObject({ value: 'none' });
    expect(text).toMatch(/^The 0 V of K3 floats 24\.\d+ ± 0\.\d+ V above that of the string; /m);
  });
});
