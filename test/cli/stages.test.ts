import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { railproof } from './in-process.js';

const example = 'fixtures/stages/valve-bench.yaml';
const folder = mkdtempSync(join(tmpdir(), 'railproof-stages-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

/** The example, elsewhere and changed, its records where they were. */
function changed(name: string, change: (text: string) => string): string {
  const path = join(folder, `${name}.yaml`);
  const text = readFileSync(example, 'utf8').replaceAll('../runs/', `${resolve('fixtures/runs')}/`);
  writeFileSync(path, change(text));
  return path;
}

describe('stages', () => {
  it('says what a staged supply feeds and where it is switched over, and ends with status 0', async () => {
    const { status, stdout, stderr } = await railproof('stages', example);
    expect(stdout).toMatch(
      /^May be built: valve-bench gives from 0 V to 32 V and feeds at least \d\.\d\d A at\s/m,
    );
    expect(stdout).toMatch(/^ {2}pair → two +1?\d(\.\d+)? V /m);
    expect(stdout).toMatch(/^ {2}two → three +2\d(\.\d+)? V /m);
    expect(stderr).toBe('');
    expect(status).toBe(0);
  });

  it('refuses a switching that shorts a module on the way, says how, and ends with status 1', async () => {
    const bridging = changed('bridging', (text) =>
      text.replaceAll('driven: link }', 'driven: link, bridges: true }'),
    );
    const { status, stdout } = await railproof('stages', bridging);
    expect(stdout).toMatch(/^MUST NOT BE BUILT:/m);
    expect(stdout).toMatch(/FORBIDDEN when S\d/);
    expect(stdout).not.toMatch(/May be built|^Parts/m);
    expect(status).toBe(1);
  });

  it('prints JSON and keeps a sheet', async () => {
    const sheet = join(folder, 'valves.html');
    const { status, stdout, stderr } = await railproof('stages', example, '--json', '--sheet', sheet);
    expect(stdout).not.toMatch(/NaN|Infinity/);
    expect(JSON.parse(stdout)).toMatchObject({
      format: 'railproof/staged-supply 1',
      outcome: 'may-be-built',
    });
    expect(stderr).toBe(`Build sheet: ${sheet}\n`);
    expect(readFileSync(sheet, 'utf8')).toMatch(/<\/html>\n$/);
    expect(status).toBe(0);
  });

  it.each<[string, (text: string) => string, number, RegExp]>([
    [
      'with a mistake',
      (text) => text.replace('hysteresis: 1 V', 'hysteresis: 1'),
      65,
      /with-a-mistake\.yaml:\d+:\d+: hysteresis: .*needs its unit/,
    ],
    [
      'of which a record is missing',
      (text) => text.replace('W1-real-limit', 'W1-real-limits'),
      66,
      /W1-real-limits/,
    ],
    [
      'of which a record is of another module',
      (text) => text.replace('20261202T034349Z-W2-real-limit', '20261130T091500Z-K1-real-limit'),
      65,
      /W2: 20261130T091500Z-K1-real-limit is a record of K1/,
    ],
  ])('refuses a file %s', async (what, change, status, problem) => {
    const sheet = join(folder, 'never.html');
    const file = changed(what.replaceAll(' ', '-'), change);
    const ended = await railproof('stages', file, '--sheet', sheet);
    expect(ended.stderr).toMatch(problem);
    expect(ended).toMatchObject({ status, stdout: '' });
    expect(existsSync(sheet)).toBe(false);
  });

  it('of a file that is not there is an error, with status 66', async () => {
    expect((await railproof('stages', join(folder, 'nowhere.yaml'))).status).toBe(66);
  });
});

describe('check of a stages file', () => {
  it('looks for its records too', async () => {
    const { status, stdout } = await railproof('check', example);
    expect(stdout).toBe(`${example}: a stages file, and right; the 6 records of its modules are there too\n`);
    expect(status).toBe(0);
    const missing = changed('missing', (text) => text.replace('W3-isolation', 'W3-isolations'));
    const ended = await railproof('check', missing);
    expect(ended.stderr).toContain('W3-isolations');
    expect(ended.status).toBe(66);
  });
});

it('the stages file that the README shows is right, and comes to the same as the one it links to', async () => {
  const shown =
    /```yaml\n(railproof: stages 1\n[\s\S]*?)```/.exec(readFileSync('README.md', 'utf8'))?.[1] ?? '';
  const copied = changed('readme', () => shown.replaceAll('../runs/', `${resolve('fixtures/runs')}/`));
  const [ours, linked] = [await railproof('stages', copied), await railproof('stages', example)];
  expect(ours.stderr).toBe('');
  expect(ours.stdout).toBe(linked.stdout);
});
