import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import type { Phase } from '../../src/record/journal-event.js';
import type { Finding } from '../../src/analysis/finding.js';
import { readBench } from '../../src/files/read-bench.js';
import { readModule } from '../../src/files/read-module.js';
import type { SimulatedFault, SimulatedModule } from '../../src/files/simulation-section.js';
import type { Result } from '../../src/report/result.js';
import { runQuietly } from './run-quietly.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-isolation-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

interface Change {
  readonly file?: string;
  readonly seed?: number;
  readonly earth?: SimulatedModule['earth'];
  readonly faults?: readonly SimulatedFault[];
}

/** The shipped procedure on the nursery's K1, with what a test wants to be otherwise. */
async function isolation({
  file = 'nursery-isolation',
  seed,
  earth,
  faults = [],
}: Change = {}): Promise<Result> {
  const { value: bench } = await readBench(`fixtures/benches/${file}.yaml`);
  const { value: module } = await readModule('fixtures/modules/K1.yaml');
  const { simulation } = bench;
  const [k1] = simulation?.modules ?? [];
  if (simulation === undefined || k1 === undefined) throw new Error('the nursery is simulated');
  const modules = [{ ...k1, ...(earth === undefined ? {} : { earth }) }];
  const changed = { ...simulation, modules, faults, ...(seed === undefined ? {} : { seed }) };
  return runQuietly('isolation', { ...bench, simulation: changed }, module, folder);
}

function named({ findings }: Result, name: string): Finding | undefined {
  return findings.find((finding) => finding.name === name);
}

/** When the points of a phase began in a run without a fault; a run with the same seed comes by at the same time. */
function began({ evidence }: Result, phase: Phase): readonly number[] {
  return (evidence.steps[0]?.points ?? []).flatMap((point) => (point.phase === phase ? [point.t] : []));
}

describe('the isolation of the nursery’s K1', { timeout: 60_000 }, () => {
  it.each([
    ['nursery-isolation-bonded', 'bonded', 'does-not-conform'],
    ['nursery-isolation', 'isolated', 'conforms'],
    ['nursery-isolation-leaky', 'leaky', 'does-not-conform'],
  ])('%s: %s', async (file, relation, outcome) => {
    const result = await isolation({ file });
    expect(result.evidence.ended).toMatchObject({ how: 'completed' });
    expect(named(result, 'earth-relation')?.value).toBe(relation);
    expect(result.outcome).toBe(outcome);
  });

  it('true resistances come back within their intervals, in at least 9 of 10 runs', async () => {
    const truths: readonly number[] = [0.5, 4, 150, 4.7e3, 47e3, 680e3, 3.3e6, 22e6];
    let held = 0;
    let all = 0;
    for (let seed = 1; seed <= 5; seed += 1) {
      for (const earth of truths) {
        const [low, high] = named(await isolation({ seed, earth }), 'earth-resistance')?.interval ?? [];
        all += 1;
        if (low !== undefined && high !== undefined && low <= earth && earth <= high) held += 1;
      }
    }
    expect(held / all).toBeGreaterThanOrEqual(0.9);
  });

  it('no seed makes a bond of what is none, nor isolation', async () => {
    for (let seed = 1; seed <= 8; seed += 1) {
      expect(named(await isolation({ seed, earth: 'bonded' }), 'earth-relation')?.value).toBe('bonded');
      expect(named(await isolation({ seed, earth: 'isolated' }), 'earth-relation')?.value).toBe('isolated');
      expect(named(await isolation({ seed, earth: 47e3 }), 'earth-relation')?.value).toBe('leaky');
    }
  });

  it('a lead that breaks at any time is never reported as isolation', async () => {
    const whole = await isolation({ earth: 'bonded' });
    const last = Math.max(...began(whole, 'leads-together'));
    const times = Array.from({ length: 12 }, (_, index) => (last * (index + 0.5)) / 12);
    for (const at of times) {
      const result = await isolation({ earth: 'bonded', faults: [{ at, what: 'lead-broken' }] });
      expect(named(result, 'earth-relation')?.value ?? 'undetermined', `broken at ${at} s`).toBe(
        'undetermined',
      );
      expect(named(result, 'earth-resistance')).toBeUndefined();
      expect(result.evidence.ended).toMatchObject({ how: 'stopped', status: 3 });
      expect(result.outcome).not.toBe('conforms');
    }
  });

  it('says when and how the lead was found broken', async () => {
    const whole = await isolation();
    const [measured] = began(whole, 'earth');
    if (measured === undefined) throw new Error('no earth was measured');
    const result = await isolation({ faults: [{ at: measured, what: 'lead-broken' }] });
    expect(result.evidence.ended?.reason).toContain('held together after the measurement');
    expect(named(result, 'earth-relation')?.note).toContain(
      'held together after the measurement, the leads read open',
    );
  });
});
