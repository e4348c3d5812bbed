import { cpSync, existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { basename, join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { railproof } from './in-process.js';
import { drawer, keptOf } from './kept-drawer.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-select-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

function select(...args: string[]): ReturnType<typeof railproof> {
  return railproof('select', ...args);
}

describe('select', () => {
  it('pairs the bricks of a drawer, says by how much that is the best, and ends with status 0', async () => {
    const { status, stdout, stderr } = await select(drawer, '--group', '2', '--supplies', '2');
    expect(stdout).toMatch(
      /^May be built: K\d ∥ K\d and K\d ∥ K\d each feed up to \d\.\d\d A\s+continuously\.$/m,
    );
    expect(stdout).toMatch(/^Next best {3}/m);
    expect(stdout).toMatch(/The best is (ahead|as good)/);
    expect(stderr).toBe('');
    expect(status).toBe(0);
  });

  it('leaves a bonded module out of every stack, and says so', async () => {
    const { status, stdout } = await select(drawer, '--stack', '3');
    expect(stdout).toMatch(/^May be built: .*K1.* \+ /m);
    expect(stdout).toContain('K2 was left out: its output is bonded to earth');
    expect(status).toBe(0);
  });

  it('says how many are missing, and ends with status 2', async () => {
    const { status, stdout } = await select(drawer, '--group', '2', '--stack', '2', '--supplies', '5');
    expect(stdout).toMatch(/^CANNOT TELL:/m);
    expect(stdout).toContain('20 modules are needed');
    expect(stdout).not.toContain('May be built');
    expect(status).toBe(2);
  });

  it('takes several folders, records too, and leaves out one that can not be read', async () => {
    const [limit = ''] = keptOf('K1', 'real-limit');
    const broken = join(folder, 'broken', basename(limit));
    cpSync(limit, broken, { recursive: true });
    writeFileSync(join(broken, 'run.json'), 'no JSON');
    const { status, stdout } = await select(
      join(folder, 'broken'),
      ...[...keptOf('K2'), ...keptOf('K3')],
      ...['--group', '2', '--json'],
    );
    const { best, leftOut } = JSON.parse(stdout) as { best: object; leftOut: readonly { module: string }[] };
    expect(best).toMatchObject({ supplies: [{ groups: [{ modules: ['K2', 'K3'] }] }] });
    expect(leftOut.map(({ module }) => module)).toContain(basename(limit));
    expect(status).toBe(0);
  });

  it('prints JSON and keeps a sheet', async () => {
    const sheet = join(folder, 'drawer.html');
    const { status, stdout, stderr } = await select(drawer, '--group', '2', '--sheet', sheet, '--json');
    expect(stdout).not.toMatch(/NaN|Infinity/);
    expect(JSON.parse(stdout)).toMatchObject({
      format: 'railproof/selection 1',
      wish: { group: 2, stack: 1, supplies: 1, imbalance: { value: 10, unit: '%' }, tolerance: { value: 1 } },
    });
    expect(stderr).toBe(`Build sheet: ${sheet}\n`);
    expect(readFileSync(sheet, 'utf8')).toMatch(/<\/html>\n$/);
    expect(status).toBe(0);
  });

  it('takes the ballast as it is given', async () => {
    const given = ['--ballast', '150 mΩ', '--resistor-tolerance', '5 %'];
    const { stdout } = await select(drawer, '--group', '2', ...given, '--json');
    expect(JSON.parse(stdout)).toMatchObject({
      wish: { ballast: { value: 0.15, unit: 'Ohm' }, imbalance: null, tolerance: { value: 5, unit: '%' } },
      best: { ballast: { value: 0.15, unit: 'Ohm' } },
    });
  });

  it.each<[string, readonly string[], RegExp]>([
    ['no drawer', ['--group', '2'], /missing required argument 'folder'\n\(railproof help select shows/],
    ['nothing to put together', [drawer], /nothing says what is to be put together/],
    ['groups of none', [drawer, '--group', '0'], /--group is '0'. Give a whole number from 1/],
    ['half a stack', [drawer, '--stack', '1.5'], /--stack is '1.5'/],
    ['supplies in words', [drawer, '--group', '2', '--supplies', 'two'], /--supplies is 'two'/],
    ['a ballast of 0 Ω', [drawer, '--group', '2', '--ballast', '0 Ω'], /--ballast is '0 Ω'/],
    ['an imbalance of 0 %', [drawer, '--group', '2', '--imbalance', '0 %'], /--imbalance is '0 %'/],
  ])('refuses %s, with status 64, and writes nothing', async (_, args, problem) => {
    const sheet = join(folder, 'never.html');
    const { status, stdout, stderr } = await select(...args, '--sheet', sheet);
    expect(stderr).toMatch(problem);
    expect({ status, stdout }).toEqual({ status: 64, stdout: '' });
    expect(existsSync(sheet)).toBe(false);
  });

  it('of a folder that is not there is an error, with status 66', async () => {
    const { status, stderr } = await select(join(folder, 'nowhere'), '--group', '2');
    expect(stderr).toContain('there is no such folder');
    expect(status).toBe(66);
  });
});
