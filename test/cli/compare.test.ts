import {
  copyFileSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readHeader } from '../../src/record/run-header.js';
import { railproof } from './in-process.js';

const kept = 'fixtures/runs/20261130T091500Z-K1-real-limit';
const folder = mkdtempSync(join(tmpdir(), 'railproof-compare-'));
const nursery = readFileSync('fixtures/benches/nursery.yaml', 'utf8');

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

function file(name: string, text: string): string {
  const path = join(folder, name);
  writeFileSync(path, text);
  return path;
}

let made = 0;

/** Runs a procedure on the nursery's bench, changed in one place, with these options besides. */
async function run(
  procedure: string,
  bench: { readonly seed?: number; readonly droop?: string },
  ...options: readonly string[]
): Promise<{ status: number; stdout: string; stderr: string; record: string }> {
  made += 1;
  const text = nursery
    .replace('seed: 7', `seed: ${bench.seed ?? 7}`)
    .replace('droop-resistance: 18 mΩ', `droop-resistance: ${bench.droop ?? '18 mΩ'}`);
  const into = join(folder, `runs-${made}`);
  const ended = await railproof(
    'run',
    procedure,
    '--bench',
    file(`bench-${made}.yaml`, text),
    '--module',
    'fixtures/modules/K1.yaml',
    '--runs',
    into,
    ...options,
  );
  let names: readonly string[] = [];
  try {
    names = readdirSync(into);
  } catch {
    // Nothing was begun.
  }
  return { ...ended, record: names[0] === undefined ? '' : join(into, names[0]) };
}

/** A copy of the kept record, its journal changed. */
function copyWith(name: string, change: (journal: string) => string): string {
  const path = join(folder, name);
  mkdirSync(path);
  copyFileSync(join(kept, 'run.json'), join(path, 'run.json'));
  writeFileSync(join(path, 'journal.jsonl'), change(readFileSync(join(kept, 'journal.jsonl'), 'utf8')));
  return path;
}

describe('compare', () => {
  let good: string;
  let bad: string;

  beforeAll(async () => {
    good = (await run('quick-look', { seed: 21 })).record;
    bad = (await run('quick-look', { seed: 22, droop: '36 mΩ' })).record;
  });

  it('of a record with itself finds nothing changed, and its status is 0', async () => {
    const { status, stdout } = await railproof('compare', kept, kept);
    expect(stdout).toContain('Nothing changed beyond its tolerance (8 compared).');
    expect(status).toBe(0);
  });

  it('of a module whose droop doubled says so, and its status is 1', async () => {
    const { status, stdout } = await railproof('compare', good, bad);
    expect(stdout).toMatch(
      /droop-resistance moved from 1[78]\.\d+ mΩ to 3[56]\.\d+ mΩ, by \+1[78]\.\d+ ± 0\.\d+ mΩ \(\+(9\d|10\d) %\); allowed is 20 %\./,
    );
    expect(status).toBe(1);
  });

  it('that asks for a change nobody looked for can not tell, and its status is 2', async () => {
    const { status, stdout } = await railproof('compare', kept, kept, '--tolerance', 'earth-link-removed');
    expect(stdout).toContain("Whether earth-relation is as it should be can't be told.");
    expect(status).toBe(2);
  });

  it('takes a tolerance of one’s own, and prints JSON', async () => {
    const own = file(
      'own.yaml',
      'railproof: tolerance 1\nname: own\ntitle: Own\nfindings: [{ finding: droop-resistance, within: 30 mΩ }]\n',
    );
    const { status, stdout } = await railproof('compare', good, bad, '--tolerance', own, '--json');
    expect(JSON.parse(stdout)).toMatchObject({
      format: 'railproof/compare 1',
      tolerance: { name: 'own' },
      outcome: 'conforms',
    });
    expect(status).toBe(0);
  });

  it('keeps a page over an older one of its kind, and over nothing else', async () => {
    const page = join(folder, 'comparison.html');
    for (const later of [good, bad]) {
      const { stdout, stderr } = await railproof('compare', good, later, '--page', page);
      expect(stdout).not.toContain('comparison.html');
      expect(stderr).toBe(`Comparison: ${page}\n`);
    }
    expect(readFileSync(page, 'utf8')).toMatch(/Not as it should be[^]*droop-resistance moved from 1/);
    const other = file('notes.html', '<p>notes</p>');
    const { status, stdout, stderr } = await railproof('compare', good, bad, '--page', other);
    expect({ status, stdout }).toEqual({ status: 64, stdout: '' });
    expect(stderr).toContain('is no comparison, so it is not written over');
    expect(readFileSync(other, 'utf8')).toBe('<p>notes</p>');
  });

  it('shows no page that is nowhere to be written', async () => {
    const { status, stdout, stderr } = await railproof('compare', good, bad, '--open');
    expect({ status, stdout }).toEqual({ status: 64, stdout: '' });
    expect(stderr).toContain('--page comparison.html --open');
  });

  it('never says that all is well by a record that was cut off or damaged', async () => {
    const cut = copyWith('cut', (journal) => journal.slice(0, -200));
    const damaged = copyWith('damaged', (journal) => journal.replace(/"value":14/, '"value":13'));
    for (const [record, word] of [
      [cut, 'CUT OFF'],
      [damaged, 'DAMAGED RECORD'],
    ] as const) {
      const { status, stdout } = await railproof('compare', kept, record);
      expect(stdout).toContain(word);
      expect(status).not.toBe(0);
    }
    expect((await railproof('compare', cut, kept)).status).toBe(2);
  });

  it('of what is no record, or by no tolerance, is an error', async () => {
    expect((await railproof('compare', kept, join(folder, 'nowhere'))).status).toBe(66);
    const { status, stderr } = await railproof('compare', kept, kept, '--tolerance', 'unchangd');
    expect(stderr).toContain("no tolerance is called 'unchangd'; did you mean 'unchanged'?");
    expect(status).toBe(66);
  });
});

// With a meter of 0.05 % + 3 mV and a load of 0.2 % + 10 mA, as the nursery's drivers promise.
describe('the shipped tolerances', () => {
  it.each([31, 32, 33])('seed %d: pass a good module, and find one whose droop doubled', async (seed) => {
    const good = await run('real-limit', { seed }, '--baseline', kept);
    expect(good.stdout).not.toContain('DOES NOT CONFORM');
    expect(good.status).toBe(0);
    const bad = await run('real-limit', { seed, droop: '36 mΩ' }, '--baseline', kept);
    expect(bad.stdout).toMatch(/DOES NOT CONFORM +droop-resistance +unchanged within 20 % of the baseline/);
    expect(bad.status).toBe(1);
  });
});

describe('run --baseline', () => {
  it('keeps in the record all that it was judged by, so that it says the same later', async () => {
    const { record, stdout } = await run('quick-look', {}, '--baseline', kept, '--json');
    const { header } = readHeader(record);
    expect(header.baseline).toMatchObject({
      run: '20261130T091500Z-K1-real-limit',
      modules: ['K1'],
      tolerance: { name: 'unchanged' },
    });
    expect(header.files.map(({ kind }) => kind)).toContain('tolerance');
    expect(JSON.parse(stdout)).toMatchObject({
      baseline: { run: '20261130T091500Z-K1-real-limit', tolerance: 'unchanged' },
    });
    const again = await railproof('analyse', record, '--json');
    expect(JSON.parse(again.stdout)).toEqual(JSON.parse(stdout));
  });

  it('goes by the tolerance of the procedure, and by another one that is named', async () => {
    const procedure = (criterion: string): string =>
      `railproof: procedure 1\nname: look\ntitle: Look\ntolerance: near.yaml\nsteps: [{ open-circuit: { for: 1 s } }]\ncriteria: [${criterion}]\n`;
    file(
      'near.yaml',
      'railproof: tolerance 1\nname: near\ntitle: Near\nfindings: [{ finding: open-circuit-voltage, within: 1 % }]\n',
    );
    const look = file('look.yaml', procedure(''));
    const own = await run(look, {}, '--baseline', kept);
    expect(own.stdout).toContain('unchanged within 1 % of the baseline');
    const other = await run(look, {}, '--baseline', kept, '--tolerance', 'unchanged');
    expect(other.stdout).toContain('unchanged within 0.5 % of the baseline');
    const share = file(
      'share.yaml',
      procedure('{ finding: open-circuit-voltage, at-least: 98 % of baseline }'),
    );
    expect((await run(share, {}, '--baseline', kept)).stdout).toMatch(
      /conforms +open-circuit-voltage +at least 14\.9 V \(98 % of baseline\)/,
    );
    const without = await run(share, {});
    expect(without.stdout).toContain('no baseline was given: run with --baseline <run>');
    expect(without.status).toBe(2);
  });

  it.each([
    ['that is not there', () => join(folder, 'no-record'), 66, /is no record/],
    [
      'that was cut off',
      () => copyWith('short', (journal) => journal.slice(0, -200)),
      65,
      /can't be a baseline: it was cut off/,
    ],
    [
      'that was changed',
      () => copyWith('edited', (journal) => journal.replace(/"value":14/, '"value":13')),
      65,
      /can't be a baseline: line \d+ of its journal/,
    ],
  ])('by a record %s is not begun', async (_, baseline, status, problem) => {
    const ended = await run('quick-look', {}, '--baseline', baseline());
    expect(ended.stderr).toMatch(problem);
    expect(ended).toMatchObject({ status, record: '' });
  });

  it('needs a baseline for a tolerance', async () => {
    const ended = await run('quick-look', {}, '--tolerance', 'unchanged');
    expect(ended.stderr).toContain('no --baseline that it could hold for');
    expect(ended).toMatchObject({ status: 64, record: '' });
  });
});
