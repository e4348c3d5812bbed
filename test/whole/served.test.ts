import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { railproof } from './railproof.js';
import { serve } from './served.js';

interface JsonFinding {
  readonly name: string;
  readonly value: number | string;
  readonly unit: string | null;
  readonly interval: readonly [number, number] | null;
}

const socat = hasSocat();
const nursery = 'fixtures/benches/nursery.yaml';
const folder = mkdtempSync(join(tmpdir(), 'railproof-served-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe('real-limit on instruments in another process agrees with the run on virtual time', () => {
  let expected: readonly JsonFinding[] = [];

  beforeAll(async () => {
    expected = await realLimit(nursery, 'virtual');
  });

  it('over TCP', { concurrent: true, timeout: 180_000 }, async () => {
    const served = await serve(nursery, join(folder, 'tcp.yaml'), 'tcp');
    try {
      expectAgreement(await realLimit(served.bench, 'tcp'), expected);
    } finally {
      await served.close();
    }
  });

  // Where socat is missing there are no ptys; CI installs it, and there nothing is skipped.
  it.skipIf(!socat && process.env['CI'] === undefined)(
    'over a pseudo-terminal, through the serial port library',
    { concurrent: true, timeout: 180_000 },
    async () => {
      const served = await serve(nursery, join(folder, 'pty.yaml'), 'pty');
      try {
        expectAgreement(await realLimit(served.bench, 'pty'), expected);
      } finally {
        await served.close();
      }
    },
  );
});

async function realLimit(bench: string, name: string): Promise<readonly JsonFinding[]> {
  const { status, stdout, stderr } = await railproof([
    'run',
    'real-limit',
    ...['--bench', bench, '--module', 'fixtures/modules/K1.yaml'],
    ...['--runs', join(folder, name), '--yes', '--json'],
  ]);
  expect(stderr).toContain('The load is off; it was read back.');
  expect(status).toBe(0);
  return (JSON.parse(stdout) as { findings: JsonFinding[] }).findings;
}

/** Each within the root of the sum of squares of the two expanded uncertainties: |E_n| at most 1 (ISO 13528). */
function expectAgreement(found: readonly JsonFinding[], expected: readonly JsonFinding[]): void {
  expect(found.map(({ name, unit }) => ({ name, unit }))).toEqual(
    expected.map(({ name, unit }) => ({ name, unit })),
  );
  for (const [index, finding] of found.entries()) {
    const other = expected[index];
    if (typeof finding.value === 'string' || other === undefined || finding.interval === null) {
      expect(finding.value, finding.name).toEqual(other?.value);
      continue;
    }
    const difference = Math.abs(finding.value - Number(other.value));
    const allowed = Math.hypot(halfWidth(finding), halfWidth(other));
    expect(difference, finding.name).toBeLessThanOrEqual(allowed);
  }
}

function halfWidth({ interval }: JsonFinding): number {
  return interval === null ? 0 : (interval[1] - interval[0]) / 2;
}

function hasSocat(): boolean {
  try {
    execFileSync('socat', ['-V'], { stdio: 'ignore' });
    return true;
  } catch {
    return false;
  }
}
