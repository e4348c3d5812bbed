import { spawnSync } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { Benchmark } from '../figure.js';
import { medianOf } from '../median-of.js';
import { secondsOf } from '../side-by-side.js';

const root = fileURLToPath(new URL('../../..', import.meta.url));
const rounds = 5;

/** The whole command, from its start to its report on the disk, against the time that passes on its bench meanwhile. */
export default {
  name: 'simulated-time',
  async measure() {
    const runs: { readonly ours: number; readonly onTheBench: number }[] = [];
    for (let round = 0; round < rounds; round += 1) {
      const folder = mkdtempSync(join(tmpdir(), 'railproof-speed-'));
      try {
        const ours = await secondsOf(() => {
          realLimit(folder);
        });
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
        ours: { value: medianOf(runs.map(({ ours }) => ours)), unit: 's' },
        rival: {
          value: medianOf(runs.map(({ onTheBench }) => onTheBench)),
          unit: 's',
          what: 'its bench time',
        },
        ratio: medianOf(runs.map(({ ours, onTheBench }) => ours / onTheBench)),
        bound: { atMost: 0.01 },
      },
    ];
  },
} satisfies Benchmark;

function realLimit(runs: string): void {
  const bench = ['--bench', 'fixtures/benches/nursery.yaml', '--module', 'fixtures/modules/K1.yaml'];
  const { status, stderr } = spawnSync(
    process.execPath,
    ['dist/cli/main.js', 'run', 'real-limit', ...bench, '--runs', runs, '--yes'],
    { cwd: root, encoding: 'utf8' },
  );
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
