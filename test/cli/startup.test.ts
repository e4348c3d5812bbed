import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { railproof } from '../whole/railproof.js';

/** The scripts that a command loads, as Node's own record of what ran tells. */
async function loadedBy(...args: readonly string[]): Promise<readonly string[]> {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-startup-'));
  try {
    await railproof(args, { env: { NODE_V8_COVERAGE: folder } });
    return readdirSync(folder).flatMap((name) => {
      const { result } = JSON.parse(readFileSync(join(folder, name), 'utf8')) as {
        readonly result: readonly { readonly url: string }[];
      };
      return result.map(({ url }) => url);
    });
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

const building = /\/arrangement\/|\/report\/|\/cli\/(combine|stages|select|build-)|\/d3-/;

it('asking for the version loads nothing of what builds, draws or reports', async () => {
  const scripts = await loadedBy('--version');
  expect(scripts.some((url) => url.endsWith('/cli/program.js'))).toBe(true);
  expect(scripts.filter((url) => building.test(url))).toEqual([]);
});

it('combining without a sheet loads no charts', async () => {
  const records = readdirSync('fixtures/runs').filter((name) => /-K[13]-/.test(name));
  const scripts = await loadedBy(
    'combine',
    '--series',
    ...records.map((name) => join('fixtures/runs', name)),
  );
  expect(scripts.some((url) => url.endsWith('/arrangement/build-series.js'))).toBe(true);
  expect(scripts.filter((url) => /\/d3-|\/report\/(page|chart|diagram|sheet)\//.test(url))).toEqual([]);
});

it('analysing a record loads no page and no charts of one', async () => {
  const scripts = await loadedBy('analyse', 'fixtures/runs/20261130T091500Z-K1-real-limit');
  expect(scripts.some((url) => url.endsWith('/cli/analyse.js'))).toBe(true);
  expect(scripts.filter((url) => /\/d3-|\/report\/(page|chart|run-page|run-charts)\//.test(url))).toEqual([]);
});

it('checking a module loads nothing of steps, findings, instruments or records', async () => {
  const scripts = await loadedBy('check', 'fixtures/modules/K1.yaml');
  expect(scripts.some((url) => url.endsWith('/files/read-module.js'))).toBe(true);
  expect(
    scripts.filter((url) => /\/dist\/(steps|analysis|instrument|bench|record|circuit)\//.test(url)),
  ).toEqual([]);
});

it('checking a module opens one file for each library, not the hundred that it has', async () => {
  const scripts = await loadedBy('check', 'fixtures/modules/K1.yaml');
  expect(scripts.filter((url) => /\/dist\/libraries\//.test(url)).length).toBe(2);
  expect(scripts.filter((url) => /\/node_modules\/(zod|yaml)\//.test(url))).toEqual([]);
});
