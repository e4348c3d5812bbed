import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, it } from 'vitest';
import { railproof } from './railproof.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-pipes-'));
afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

const bench = 'fixtures/benches/nursery.yaml';
const module = 'fixtures/modules/K1.yaml';
const [K1, K2] = ['20261130T091500Z-K1-real-limit', '20261202T034336Z-K2-real-limit'].map(
  (name) => `fixtures/runs/${name}`,
) as [string, string];

/** As a program that reads from us has it: no terminal, and nobody said anything of colours. */
it.each([
  [['run', 'quick-look', '--bench', bench, '--module', module, '--runs', join(folder, 'runs')], 0],
  [['run', 'real-limit', '--bench', bench, '--module', module, '--dry-run'], 0],
  [['run', 'real-limit', '--bench', bench, '--module', 'nowhere.yaml'], 66],
  [['analyse', K1], 0],
  [['compare', K1, K2], 2],
  [['combine', '--parallel', K1, K2], 0],
  [['stages', 'fixtures/stages/valve-bench.yaml'], 0],
  [['select', 'fixtures/runs', '--group', '2'], 0],
  [['check', bench, module], 0],
  [['drivers'], 0],
  [
    [
      'drivers',
      '--try',
      'load-input-scpi',
      '--connection',
      'replay:fixtures/dialogues/load-input-scpi.jsonl',
    ],
    0,
  ],
  [['ports'], 0],
  [['safe', '--bench', bench], 0],
  [['runs', 'fixtures/runs'], 0],
  [['schema', 'procedure'], 0],
  [['--help'], 0],
  [['run', '--what'], 64],
])('no byte of %j steers a terminal', { timeout: 60_000 }, async (args, expected) => {
  const { status, stdout, stderr } = await railproof(args, {
    env: { NO_COLOR: '', TERM: 'xterm-256color', COLORTERM: 'truecolor' },
  });
  expect(stdout + stderr).not.toMatch(/[^\P{Cc}\n]/u);
  expect((stdout + stderr).length).toBeGreaterThan(10);
  expect(status).toBe(expected);
});
