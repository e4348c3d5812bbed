import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { shipped } from '../../src/cli/shipped.js';
import { vocabulary } from '../../src/cli/vocabulary.js';
import { findingNamed } from '../../src/analysis/finding.js';
import { readProcedure } from '../../src/files/read-procedure.js';
import { runShipped, shown } from './shipped-runs.js';

const names = readdirSync(shipped.procedures)
  .filter((file) => file.endsWith('.yaml'))
  .map((file) => file.replace(/\.yaml$/, ''));
const runs = mkdtempSync(join(tmpdir(), 'railproof-shipped-'));

afterAll(() => {
  rmSync(runs, { recursive: true, force: true });
});

describe('a shipped procedure', () => {
  it('is shown on a bench, each of them', () => {
    expect(Object.keys(shown).sort()).toEqual([...names].sort());
  });

  it.each(names)(
    '%s says what it is for, how the bench is wired, what to mind and what is required',
    async (name) => {
      const { value } = await readProcedure(name, vocabulary, {
        relativeTo: '.',
        shipped: shipped.procedures,
      });
      expect(value.name).toBe(name);
      expect(value.purpose.length).toBeGreaterThan(60);
      expect(value.wiring.length).toBeGreaterThanOrEqual(3);
      expect(value.cautions).toContain('mains');
      expect(value.criteria.length).toBeGreaterThanOrEqual(1);
    },
  );

  it.each(Object.entries(shown))('%s runs to what it is for', async (name, { finds }) => {
    const result = await runShipped(name, runs);
    expect(result.evidence.ended).toMatchObject({ how: 'completed', reason: null });
    expect(result.integrity.kind).toBe('whole');
    for (const finding of finds) {
      expect(findingNamed(result.findings, finding)?.value, finding).not.toBeOneOf([
        undefined,
        'undetermined',
      ]);
    }
    expect(result.outcome).toBe('conforms');
  });
});
