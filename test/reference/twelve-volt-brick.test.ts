import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readBench } from '../../src/files/read-bench.js';
import { readModule } from '../../src/files/read-module.js';
import { resultAsText } from '../../src/report/text.js';
import { plainStyle } from '../../src/report/style.js';
import type { Result } from '../../src/report/result.js';
import { runQuietly } from '../whole/run-quietly.js';

/**
 * Common practice, no published source: a good 12 V brick with a 2.5 A label holds regulation to about
 * 3.5 A, and starts to drop out and to oscillate just beyond.
 */
describe('a good 12 V brick with a 2.5 A label is reported as the trade knows it', () => {
  const runs = mkdtempSync(join(tmpdir(), 'railproof-brick-'));
  let result: Result;

  beforeAll(async () => {
    const bench = await readBench('fixtures/benches/twelve-volt-brick.yaml');
    const module = await readModule('fixtures/modules/W1.yaml');
    result = await runQuietly('real-limit', bench.value, module.value, runs);
  });

  afterAll(() => {
    rmSync(runs, { recursive: true, force: true });
  });

  function valueOf(name: string): unknown {
    return result.findings.find((finding) => finding.name === name)?.value;
  }

  it('it holds regulation to about 3.5 A, well above its label', () => {
    expect(valueOf('usable-current')).toBeGreaterThan(3.4);
    expect(valueOf('usable-current')).toBeLessThan(3.6);
    expect(valueOf('load-regulation')).toBeLessThan(0.01);
  });

  it('it oscillates and drops out just beyond', () => {
    expect(valueOf('unsteady-above-current')).toBeCloseTo(3.5, 1);
    expect(valueOf('dropout-current')).toBeGreaterThan(3.5);
    expect(valueOf('dropout-current')).toBeLessThan(3.75);
  });

  it('it is recommended for its label, not for what it can do', () => {
    expect(valueOf('recommended-current')).toBe(2.5);
  });

  it('the report says so in its first words', () => {
    const text = resultAsText(result, plainStyle);
    expect(text).toMatch(
      /Load it continuously with up to 2\.50 A\.\nIt delivers 3\.\d+ ± 0\.\d+ A; above that its output swings\.\nIt regulates until it drops out at 3\.\d+ ± 0\.\d+ A \(hiccup\)\./,
    );
  });
});
