import { cpSync, mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { parse } from 'csv-parse/sync';
import { railproof } from './in-process.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-runs-csv-'));
const kept = 'fixtures/runs/20261130T091500Z-K1-real-limit';

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

const read = (text: string): Record<string, string>[] =>
  parse(text, { columns: true, record_delimiter: '\r\n' });

interface Analysed {
  readonly findings: readonly {
    readonly name: string;
    readonly value: number | string;
    readonly unit: string | null;
  }[];
}

describe('railproof runs --csv', () => {
  it('gives the findings of every record of a drawer, the same as analyse does', async () => {
    const { status, stdout } = await railproof('runs', 'fixtures/runs', '--csv');
    expect(status).toBe(0);
    const rows = read(stdout);
    expect([...new Set(rows.map((row) => row['record']))]).toEqual(readdirSync('fixtures/runs').sort());
    const { findings } = JSON.parse((await railproof('analyse', kept, '--json')).stdout) as Analysed;
    const ofKept = rows.filter((row) => kept.endsWith(row['record'] ?? ''));
    expect(ofKept.map((row) => [row['finding'], row['unit']])).toEqual(
      findings.map(({ name, unit }) => [name, unit ?? '']),
    );
    findings.forEach(({ value }, at) => {
      const cell = ofKept[at]?.['value'] ?? '';
      if (typeof value === 'string') expect(cell).toBe(value);
      else expect(Math.abs(Number(cell) - value)).toBeLessThanOrEqual(1e-9 * Math.abs(value));
    });
  });

  it('lists a record that can not be read and goes on with the next', async () => {
    mkdirSync(join(folder, '=spoilt'));
    writeFileSync(join(folder, '=spoilt', 'run.json'), '{');
    cpSync(kept, join(folder, 'whole'), { recursive: true });
    const { status, stdout } = await railproof('runs', folder, '--csv');
    const rows = read(stdout);
    expect(status).toBe(0);
    expect(rows[0]).toMatchObject({ record: "'=spoilt", ended: 'unreadable' });
    expect(rows[0]?.['note']).toContain('run.json');
    expect(rows.slice(1).every((row) => row['record'] === 'whole')).toBe(true);
    expect(rows.length).toBeGreaterThan(5);
  });

  it('of an empty folder is its header alone', async () => {
    mkdirSync(join(folder, 'empty'));
    const { stdout } = await railproof('runs', join(folder, 'empty'), '--csv');
    expect(stdout).toMatch(/^record,began,.*,note\r\n$/);
  });

  it('does not go with --json', async () => {
    const { status, stdout } = await railproof('runs', folder, '--csv', '--json');
    expect(status).toBe(64);
    expect(stdout).toBe('');
  });
});
