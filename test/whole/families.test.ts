import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { findingNamed } from '../../src/analysis/finding.js';
import { loadPlan } from '../../src/cli/load-plan.js';
import { performPlan } from '../../src/cli/perform-plan.js';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { worldOf } from '../../src/cli/wiring.js';
import type { Result } from '../../src/report/result.js';
import { nobodyWatches } from './run-quietly.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-families-'));
let benches = 0;

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe('a shipped driver', () => {
  const loads = [
    ['load-source-scpi', ''],
    ['load-remote-scpi', ''],
    ['load-short-scpi', ''],
    ['load-channel-scpi', ', channel: 2'],
  ] as const;
  const asLoad = (driver: string, channel: string) => (bench: string) =>
    bench.replace('driver: load-input-scpi', `driver: ${driver}${channel}`);

  it.each(loads)('of a load finds what a module delivers: %s', async (driver, channel) => {
    const result = await performed('quick-look', 'nursery', asLoad(driver, channel));
    expect(result.outcome).toBe('conforms');
    expect(Number(findingNamed(result.findings, 'droop-resistance')?.value)).toBeCloseTo(0.018, 3);
  });

  it.each(loads)('of a load finds how a module limits: %s', async (driver, channel) => {
    const result = await performed('limit-shape', 'nursery-foldback', asLoad(driver, channel));
    expect(result.outcome).toBe('conforms');
    expect(findingNamed(result.findings, 'limit-style')?.value).toBe('foldback');
  });

  it.each(['meter-query-scpi', 'meter-function-scpi'])(
    'of a meter finds whether an output is tied to earth: %s',
    async (driver) => {
      const result = await performed('isolation', 'nursery-isolation', (bench) =>
        bench.replace('driver: meter-read-scpi', `driver: ${driver}`),
      );
      expect(result.outcome).toBe('conforms');
      expect(findingNamed(result.findings, 'earth-relation')?.value).toBe('isolated');
    },
  );

  it('does, too, when it is written for one that repeats, prompts, and ends its lines otherwise', async () => {
    const shipped = readFileSync(new URL('../../drivers/load-input-scpi.yaml', import.meta.url), 'utf8');
    const adapted = shipped
      .replace('reply-end: "\\n"', 'reply-end: "\\r", echo: true, prompt: "> "')
      .replace('name: load-input-scpi', 'name: load-chatty');
    expect(adapted).toContain('reply-end: "\\r", echo: true');
    writeFileSync(join(folder, 'load-chatty.yaml'), adapted);
    const result = await performed('quick-look', 'nursery', asLoad('./load-chatty.yaml', ''));
    expect(result.outcome).toBe('conforms');
  });

  it('of a meter does when it starts a measurement and fetches it, once it is ready', async () => {
    const shipped = readFileSync(new URL('../../drivers/meter-function-scpi.yaml', import.meta.url), 'utf8');
    const adapted = shipped
      .replaceAll('ask: "READ?"', 'ask: [{ send: "INIT", until: ready }, "FETC?"]')
      .replace('prepare:', 'ready: { ask: "*OPC?", when: "^\\\\+?1$" }\nprepare:')
      .replace('name: meter-function-scpi', 'name: meter-fetch');
    writeFileSync(join(folder, 'meter-fetch.yaml'), adapted);
    const result = await performed('quick-look', 'nursery', (bench) =>
      bench.replace('driver: meter-read-scpi', 'driver: ./meter-fetch.yaml'),
    );
    expect(result.outcome).toBe('conforms');
    expect(findingNamed(result.findings, 'open-circuit-voltage')?.value).toBeCloseTo(15.21, 1);
  });
});

/** A shipped procedure on a bench of the fixtures, on which something is spoken to in another way. */
async function performed(
  procedure: string,
  bench: string,
  change: (text: string) => string,
): Promise<Result> {
  const original = readFileSync(new URL(`../../fixtures/benches/${bench}.yaml`, import.meta.url), 'utf8');
  const path = join(folder, `${bench}-${(benches += 1)}.yaml`);
  writeFileSync(path, change(original));
  const loaded = await loadPlan({ procedure, bench: path, modules: ['fixtures/modules/K1.yaml'] });
  const world = await worldOf(loaded.plan.bench, loaded.plan.drivers);
  if (world.simulation === undefined) throw new Error(`${bench} is not simulated`);
  const { understood, safety } = await performPlan(loaded, world, {
    runs: folder,
    operator: simulatedOperator(world.simulation),
    signal: new AbortController().signal,
    hurry: new AbortController().signal,
    watch: nobodyWatches,
  });
  expect(safety).toEqual({ kind: 'confirmed' });
  if (understood.kind === 'error') throw understood.error;
  expect(understood.result.evidence.ended).toMatchObject({ how: 'completed', reason: null });
  return understood.result;
}
