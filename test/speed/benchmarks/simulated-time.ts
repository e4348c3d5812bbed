import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { railproof } from '../../whole/railproof.js';
import type { Benchmark } from '../figure.js';
import { median, secondsOf } from '../side-by-side.js';

const rounds = 5;

/** The whole command, from its start to its report on the disk, against the time that passes on its bench meanwhile. */
export default (async () => {
  const runs: { readonly ours: number; readonly onTheBench: number }[] = [];
  for (let round = 0; round < rounds; round += 1) {
    const folder = mkdtempSync(join(tmpdir(), 'railproof-speed-'));
    try {
      const ours = await secondsOf(() => realLimit(folder));
      runs.push({ ours, onTheBench: benchSeconds(folder) });
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  }
  return [
    {
      kind: 'measured',
      name: 'real-limit-in-simulated-time',
      what: 'real-limit on the simulated bench',
      ours: { value: median(runs.map(({ ours }) => ours)), unit: 's' },
      rival: { value: median(runs.map(({ onTheBench }) => onTheBench)), unit: 's', what: 'its bench time' },
      ratio: median(runs.map(({ ours, onTheBench }) => ours / onTheBench)),
      bound: { atMost: 0.01 },
    },
  ];
}) satisfies Benchmark;

async function realLimit(runs: string): Promise<void> {
  const bench = ['--bench', 'fixtures/benches/nursery.yaml', '--module', 'fixtures/modules/K1.yaml'];
  const { status, stderr } = await railproof(['run', 'real-limit', ...bench, '--runs', runs, '--yes']);
  if (status !== 0) throw new Error(`the run ended with ${status}: ${stderr}`);
}

/** The time of the last event of the one record there. */
function benchSeconds(runs: string): number {
  const [run = ''] = readdirSync(runs);
  const last =
    readFileSync(join(runs, run, 'journal.jsonl'), 'utf8')
      .trimEnd()
      .split('\n')
      .at(-1) ?? '';
  return (JSON.parse(last) as { readonly t: number }).t;
}
