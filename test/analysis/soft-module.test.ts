import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { Finding } from '../../src/analysis/finding.js';
import { randomCase } from '../whole/random-case.js';
import { runQuietly } from '../whole/run-quietly.js';
import { evenly, evidenceOf, headerOf, type Sample } from './evidence-of.js';

/**
 * A transformer and a rectifier behind 250 mΩ: nothing regulates, the voltage sinks by 5 % at 3.04 A, and the
 * limit is far away. There the noise of a reading is worth more current than the resolution of the search.
 */
const resistance = 0.25;
const sagsAt = (0.05 * 15.2) / resistance;

describe('a module that nothing regulates', () => {
  let runs: string;
  const found: (readonly Finding[])[] = [];

  beforeAll(async () => {
    runs = mkdtempSync(join(tmpdir(), 'railproof-soft-'));
    for (let seed = 1; seed <= 8; seed += 1) {
      const { bench, module, truth } = randomCase(seed);
      const { simulation } = bench;
      if (simulation === undefined) throw new Error('the bench is not simulated');
      const soft = {
        ...truth,
        openCircuitVoltage: 15.2,
        droopResistance: resistance,
        noise: 0.003,
        limit: { style: 'hiccup', current: 9, period: 0.8 },
      } as const;
      const onIt = { ...bench, simulation: { ...simulation, modules: [soft] } };
      const rated = { voltage: 15, current: 2.5 };
      found.push((await runQuietly('real-limit', onIt, { ...module, rated }, runs)).findings);
    }
  });

  afterAll(() => {
    rmSync(runs, { recursive: true, force: true });
  });

  it('drops out within the 95 % interval, which counts the scatter of the voltage', () => {
    const dropouts = found.map((findings) => findings.find(({ name }) => name === 'dropout-current'));
    const misses = dropouts.filter((dropout) => {
      const [low, high] = dropout?.interval ?? [NaN, NaN];
      return !(low <= sagsAt && sagsAt <= high);
    });
    expect(misses.length).toBeLessThanOrEqual(1);
    expect(dropouts[0]?.budget.map((line) => line.name)).toContain('scatter of the voltage at the sag');
    expect(dropouts[0]?.note).toMatch(/; the voltage sinks there, it does not break down/);
  });

  it('is not said to have limited, nor its limit to have moved', () => {
    const styles = found.map((findings) => findings.find(({ name }) => name === 'limit-style'));
    expect(new Set(styles.map((style) => style?.value))).toEqual(new Set(['undetermined']));
    expect(styles[0]?.note).toBe('the voltage sags by droop alone: no limit was met yet');
    const notes = found.flatMap((findings) => findings.map(({ note }) => note));
    expect(notes.filter((note) => note.includes('came down'))).toEqual([]);
  });
});

describe('the scatter of the voltage at the sag', () => {
  /** Four readings whose experimental standard deviation is `deviation`. */
  const four = (voltage: number, current: number, deviation: number): readonly Sample[] => {
    const away = (deviation * Math.sqrt(3)) / 2;
    return [away, -away, away, -away].map((off) => ({ meter: voltage + off, current }));
  };
  const held = (current: number) => ({
    set: current,
    samples: four(15.2 - resistance * current, current, 0.003),
  });
  const dropoutAfter = (dropped: number): Finding | undefined => {
    const evidence = evidenceOf(
      [
        { kind: 'load-ramp', points: evenly(0, 3, 16).map(held) },
        {
          kind: 'dropout-search',
          points: [
            { ...held(3), phase: 'start' },
            { set: 3.01, phase: 'halve', outcome: 'dropped', samples: [{ meter: dropped, current: 3.01 }] },
          ],
        },
      ],
      headerOf(),
    );
    return analyse(evidence).find(({ name }) => name === 'dropout-current');
  };
  const lineOf = (finding: Finding | undefined): number | undefined =>
    finding?.budget.find(({ name }) => name === 'scatter of the voltage at the sag')?.uncertainty;

  it('is three standard deviations of a reading, by the resistance there, rectangular', () => {
    expect(lineOf(dropoutAfter(14.44))).toBeCloseTo((3 * 0.003) / resistance / Math.sqrt(3), 6);
  });

  it('does not count where the voltage breaks down', () => {
    expect(lineOf(dropoutAfter(14.4))).toBeUndefined();
    expect(lineOf(dropoutAfter(0.3))).toBeUndefined();
  });
});
