import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { readBench } from '../../src/files/read-bench.js';
import { readModule } from '../../src/files/read-module.js';
import type { FaultName, SimulatedFault } from '../../src/files/simulation-section.js';
import { checkJournal } from '../../src/record/journal-check.js';
import { readJournal } from '../../src/record/journal-reader.js';
import type { Result } from '../../src/report/result.js';
import { differences } from './broken-off.js';
import { runQuietly } from './run-quietly.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-gaps-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

const passing: readonly FaultName[] = [
  'load-lost',
  'meter-lost',
  'meter-silent',
  'load-silent',
  'meter-restarted',
];

/** All that passes, time and again, at distances that have nothing to do with any point. */
const nowAndThen: readonly SimulatedFault[] = Array.from({ length: 40 }, (_, index) => ({
  at: 6 + index * 17.3,
  what: passing[index % passing.length] ?? 'load-lost',
  for: 0.3,
}));

async function performed(procedure: string, bench: string, faults: readonly SimulatedFault[]) {
  const { value: description } = await readBench(`fixtures/benches/${bench}.yaml`);
  const { value: module } = await readModule('fixtures/modules/K1.yaml');
  const { simulation } = description;
  if (simulation === undefined) throw new Error('the nursery is simulated');
  const runs = mkdtempSync(join(folder, 'runs-'));
  const result = await runQuietly(
    procedure,
    { ...description, simulation: { ...simulation, faults } },
    module,
    runs,
  );
  const record = readdirSync(runs, { withFileTypes: true }).find((entry) => entry.isDirectory());
  const journal = join(runs, record?.name ?? '', 'journal.jsonl');
  const outcomes: string[] = [];
  const integrity = checkJournal(journal);
  readJournal(journal, integrity, (event) => {
    if (event.event === 'point-ended') outcomes.push(event.outcome);
  });
  return { result, outcomes, integrity };
}

/** Which of several recoveries was the slowest, and so in which step, is up to chance. */
function stepless(result: Result): Result {
  return { ...result, findings: result.findings.map((finding) => ({ ...finding, step: null })) };
}

describe('a run over lines that drop now and then', { timeout: 120_000 }, () => {
  it.each([
    ['real-limit', 'nursery'],
    ['limit-shape', 'nursery-foldback'],
    ['thermal-soak', 'nursery-soak'],
    ['isolation', 'nursery-isolation-leaky'],
  ])('%s finds on the bench %s what one over good lines finds', async (procedure, bench) => {
    const clean = await performed(procedure, bench, []);
    const disturbed = await performed(procedure, bench, nowAndThen);
    expect(disturbed.result.evidence.ended).toMatchObject({ how: 'completed', status: 0 });
    expect(disturbed.integrity.kind).toBe('whole');
    expect(differences(stepless(clean.result), stepless(disturbed.result))).toEqual([]);
    const interrupted = disturbed.outcomes.filter((outcome) => outcome === 'interrupted').length;
    expect(interrupted).toBeGreaterThan(0);
    // Evidence holds the takes that count, and no other.
    const points = disturbed.result.evidence.steps.flatMap((step) => step.points);
    expect(points).toHaveLength(disturbed.outcomes.length - interrupted);
    expect(points.map(({ outcome }) => outcome)).not.toContain('interrupted');
  });
});
