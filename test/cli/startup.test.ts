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

/** What a check of a file must have loaded, and what it must not. */
const checks = [
  {
    kind: 'module',
    file: 'fixtures/modules/K1.yaml',
    needs: '/files/read-module.js',
    not: /\/dist\/(steps|analysis|instrument|bench|record|circuit|simulation)\/|\/re2js\//,
  },
  {
    kind: 'tolerance',
    file: 'procedures/tolerances/unchanged.yaml',
    needs: '/analysis/finding-names.js',
    not: /\/dist\/(steps|instrument|bench|record|simulation)\/|\/re2js\//,
  },
  {
    kind: 'procedure',
    file: 'procedures/real-limit.yaml',
    needs: '/steps/index.js',
    not: /\/dist\/(record|simulation|report)\/|\/files\/read-driver\.js|\/cli\/(watchman|connectors)|\/re2js\//,
  },
  {
    kind: 'driver',
    file: 'drivers/load-channel-scpi.yaml',
    needs: '/instrument/dialogue-check.js',
    not: /\/dist\/(steps|analysis|bench|record|circuit|simulation)\//,
  },
  {
    kind: 'bench',
    file: 'fixtures/benches/nursery.yaml',
    needs: '/files/read-driver.js',
    not: /\/dist\/(steps|analysis|record|simulation)\/|\/cli\/(watchman|connectors)/,
  },
  {
    kind: 'stages',
    file: 'fixtures/stages/valve-bench.yaml',
    needs: '/files/read-stages.js',
    not: /\/dist\/(steps|instrument|simulation)\/|\/d3-|\/re2js\//,
  },
] as const;

it.each(checks)('checking a $kind loads nothing that only other kinds need', async ({ file, needs, not }) => {
  const scripts = await loadedBy('check', file);
  expect(scripts.some((url) => url.endsWith(needs))).toBe(true);
  expect(scripts.filter((url) => not.test(url))).toEqual([]);
});

it('checking a module opens one file for each library, not the hundred that it has', async () => {
  const scripts = await loadedBy('check', 'fixtures/modules/K1.yaml');
  expect(scripts.filter((url) => /\/dist\/libraries\//.test(url)).length).toBe(2);
  expect(scripts.filter((url) => /\/node_modules\/(zod|yaml)\//.test(url))).toEqual([]);
});
