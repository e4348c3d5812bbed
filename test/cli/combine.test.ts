import { execFileSync } from 'node:child_process';
import { cpSync, existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { railproof } from './in-process.js';
import { keptOf } from './kept-drawer.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-combine-'));
const [K1, K2, K3, K4] = ['K1', 'K2', 'K3', 'K4'].map((name) => keptOf(name)) as [
  string[],
  string[],
  string[],
  string[],
];
const [limit = ''] = keptOf('K1', 'real-limit');

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

function combine(...args: string[]): ReturnType<typeof railproof> {
  return railproof('combine', ...args);
}

/** A copy of a kept record, its journal changed. */
function copyWith(name: string, change: (journal: string) => string): string {
  const path = join(folder, name);
  cpSync(limit, path, { recursive: true });
  const journal = join(path, 'journal.jsonl');
  writeFileSync(journal, change(readFileSync(journal, 'utf8')));
  return path;
}

/** The first paragraph after the heading, in one line. */
function answerIn(stdout: string): string {
  return stdout.split('\n\n')[1]?.replaceAll('\n', ' ') ?? '';
}

describe('combine --parallel', () => {
  it('chooses a ballast, says what the group feeds, and ends with status 0', async () => {
    const { status, stdout, stderr } = await combine('--parallel', ...K1, ...K2);
    expect(answerIn(stdout)).toMatch(
      /^May be built: K1 and K2 side by side through \d+ mΩ each feed up to [4-7]\.\d\d A continuously\./,
    );
    expect(stdout).toMatch(/^Ballast {3}the least of E12 \(IEC 60063\) for 10 % imbalance$/m);
    expect(stdout).toMatch(/ ± 1 % {2}in series with each module$/m);
    expect(stderr).toBe('');
    expect(status).toBe(0);
  });

  it('takes a ballast, a tolerance and a load as they are given', async () => {
    const wish = ['--ballast', '51 mΩ', '--resistor-tolerance', '5 %', '--load', '6 A'];
    const { status, stdout } = await combine('--parallel', ...K1, ...K2, ...wish);
    expect(stdout).toMatch(/^Ballast {3}as it was given\n {2}resistance {2}51 mΩ ± 5 %/m);
    expect(stdout).toMatch(/^Shares at 6 A {3}the load asked for; 95 %$/m);
    expect(status).toBe(0);
  });

  it('of a load beyond what is recommended never says that it may be built, and ends with status 1', async () => {
    const { status, stdout } = await combine(
      '--parallel',
      ...K1,
      ...K2,
      '--ballast',
      '100 mΩ',
      '--load',
      '8 A',
    );
    expect(answerIn(stdout)).toMatch(/^(MUST NOT BE BUILT|TOO LITTLE): .*8(\.00)? A is asked for/);
    expect(stdout).not.toContain('May be built');
    expect(status).toBe(1);
  });

  it('says what can not be had with such resistors, and ends with status 1', async () => {
    const { status, stdout } = await combine('--parallel', ...K1, ...K2, '--imbalance', '1 %');
    expect(answerIn(stdout)).toMatch(/^MUST NOT BE BUILT: No ballast does what is asked for/);
    expect(stdout).not.toMatch(/^Parts/m);
    expect(status).toBe(1);
  });
});

describe('combine --series', () => {
  it('says what the string feeds, the lowest first, and ends with status 0', async () => {
    const { status, stdout } = await combine('--series', ...K1, ...K3, ...K4);
    expect(answerIn(stdout)).toMatch(
      /^May be built: K1, K3 and K4 in a stack feed up to 3\.\d\d A continuously;/,
    );
    expect(stdout).toMatch(/^ {2}D2 {2}across K3 /m);
    expect(status).toBe(0);
  });

  it('refuses a module whose output is bonded to earth, and ends with status 1', async () => {
    const { status, stdout } = await combine('--series', ...K1, ...K2);
    expect(answerIn(stdout)).toMatch(/^MUST NOT BE BUILT: The output of K2 is bonded to earth/);
    expect(stdout).not.toMatch(/^Parts/m);
    expect(status).toBe(1);
  });

  it('can not tell where nobody proved how an output stands to earth, and ends with status 2', async () => {
    const { status, stdout } = await combine('--series', ...K1, ...keptOf('K3', 'real-limit'));
    expect(answerIn(stdout)).toMatch(/^CANNOT TELL: .*K3.*run isolation/);
    expect(stdout).not.toContain('May be built');
    expect(status).toBe(2);
  });
});

describe('combine --json', () => {
  it.each([
    ['--parallel', 'K2', K2],
    ['--series', 'K3', K3],
  ] as const)('%s prints one object, its numbers with units and records', async (how, name, other) => {
    const { stdout } = await combine(how, ...K1, ...other, '--json');
    expect(stdout).not.toMatch(/NaN|Infinity/);
    expect(JSON.parse(stdout)).toMatchObject({
      format: 'railproof/combination 1',
      arrangement: how.slice(2),
      outcome: 'may-be-built',
      recommended: { unit: 'A' },
      modules: [
        { name: 'K1', usableCurrent: { unit: 'A', from: { record: '20261130T091500Z-K1-real-limit' } } },
        { name },
      ],
    });
  });
});

describe('combine --sheet', () => {
  it('keeps a page that is whole and needs nothing else, and says where it is', async () => {
    const sheet = join(folder, 'group.html');
    const { status, stdout, stderr } = await combine('--parallel', ...K1, ...K2, '--sheet', sheet, '--json');
    expect(stderr).toBe(`Build sheet: ${sheet}\n`);
    expect(JSON.parse(stdout)).toMatchObject({ arrangement: 'parallel' });
    const page = readFileSync(sheet, 'utf8');
    expect(page).toMatch(/^<!doctype html>\n[\s\S]*<\/html>\n$/);
    expect(page).toContain('May be built');
    expect(page).not.toMatch(/(?:src|href)="(?!#)/);
    expect(status).toBe(0);
  });

  it('writes over an older sheet, and over nothing else', async () => {
    const sheet = join(folder, 'again.html');
    writeFileSync(sheet, '<p>the recipes of the canteen</p>');
    const refused = await combine('--series', ...K1, ...K3, '--sheet', sheet);
    expect(refused.stderr).toContain('is no build sheet, so it is not written over');
    expect(refused).toMatchObject({ status: 64, stdout: '' });
    expect(readFileSync(sheet, 'utf8')).toContain('recipes');
    rmSync(sheet);
    await combine('--series', ...K1, ...K3, '--sheet', sheet);
    const { status } = await combine('--series', ...K1, ...K2, '--sheet', sheet);
    expect(status).toBe(1);
    expect(readFileSync(sheet, 'utf8')).toContain('Must not be built');
  });

  it('leaves nothing half written where it can not be written', async () => {
    const sheet = join(folder, 'no-such-folder', 'sheet.html');
    const { status, stderr } = await combine('--series', ...K1, ...K3, '--sheet', sheet);
    expect(stderr).toContain("the build sheet can't be written");
    expect(status).toBe(74);
    expect(existsSync(join(folder, 'no-such-folder'))).toBe(false);
    expect(readdirSync(folder).filter((name) => name.endsWith('.part'))).toEqual([]);
  });

  it('says so, too, where not even the looking for a half written one is possible', async () => {
    const file = join(folder, 'no-folder');
    writeFileSync(file, '');
    const { status, stderr } = await combine('--series', ...K1, ...K3, '--sheet', join(file, 'sheet.html'));
    expect(stderr).toContain("the build sheet can't be written");
    expect(status).toBe(74);
  });

  it('does not wait for a pipe that nobody writes to', async () => {
    const pipe = join(folder, 'pipe.html');
    execFileSync('mkfifo', [pipe]);
    const { status, stderr } = await combine('--series', ...K1, ...K3, '--sheet', pipe);
    expect(stderr).toContain('is no build sheet, so it is not written over');
    expect(status).toBe(64);
  });
});

describe('combine refuses', () => {
  const pair = [...K1, ...K3];
  it.each<[string, readonly string[], RegExp]>([
    [
      'both --parallel and --series',
      ['--parallel', '--series', ...pair],
      /--parallel and --series are two things/,
    ],
    ['neither of them', pair, /nothing says how the modules are to be joined/],
    ['no modules', ['--parallel'], /missing required argument 'run' \(railproof help combine shows/],
    ['one module alone', ['--parallel', ...K1], /needs two modules at least/],
    ['one module in a stack', ['--series', ...K1], /two modules/],
    [
      'a ballast of 0 Ω',
      ['--parallel', ...pair, '--ballast', '0 mΩ'],
      /--ballast is '0 mΩ', which is no resistor/,
    ],
    [
      'a ballast below 0 Ω',
      ['--parallel', ...pair, '--ballast=-5 mΩ'],
      /--ballast is '-5 mΩ', which is no resistor/,
    ],
    [
      'a ballast that is a current',
      ['--parallel', ...pair, '--ballast', '5 A'],
      /--ballast: .*'5 A', which is a current/,
    ],
    [
      'a bare number',
      ['--parallel', ...pair, '--ballast', '51'],
      /--ballast: .*bare number 51.*needs its unit/,
    ],
    ['an imbalance of 0 %', ['--parallel', ...pair, '--imbalance', '0 %'], /--imbalance is '0 %'/],
    ['an imbalance of 100 %', ['--parallel', ...pair, '--imbalance', '100 %'], /--imbalance is '100 %'/],
    [
      'a ballast and an imbalance',
      ['--parallel', ...pair, '--ballast', '51 mΩ', '--imbalance', '5 %'],
      /two wishes/,
    ],
    [
      'a tolerance that no resistor has',
      ['--parallel', ...pair, '--resistor-tolerance', '80 %'],
      /--resistor-tolerance is '80 %'/,
    ],
    ['a load of nothing', ['--series', ...pair, '--load', '0 A'], /--load is '0 A', which is no load/],
    ['a ballast in a stack', ['--series', ...pair, '--ballast', '51 mΩ'], /go with --parallel/],
    ['an imbalance in a stack', ['--series', ...pair, '--imbalance', '5 %'], /go with --parallel/],
    ['a tolerance in a stack', ['--series', ...pair, '--resistor-tolerance', '5 %'], /go with --parallel/],
    ['a sheet that is no page', ['--series', ...pair, '--sheet', 'sheet.pdf'], /its name ends in \.html/],
  ])('%s, with status 64, and writes nothing', async (_, args, problem) => {
    const sheet = join(folder, 'never.html');
    const wanted = args.includes('--sheet') ? args : [...args, '--sheet', sheet];
    const { status, stdout, stderr } = await combine(...wanted);
    expect(stderr.replaceAll('\n', ' ')).toMatch(problem);
    expect(stdout).toBe('');
    expect(status).toBe(64);
    expect(existsSync(sheet)).toBe(false);
  });

  it('a record that is not there, with status 66', async () => {
    const { status, stdout, stderr } = await combine('--parallel', ...K1, join(folder, 'nowhere'));
    expect(stderr).toContain('nowhere');
    expect({ status, stdout }).toEqual({ status: 66, stdout: '' });
  });

  it('a damaged record, with status 65', async () => {
    const damaged = copyWith('damaged', (journal) => journal.replace(/"value":14/, '"value":13'));
    const { status, stdout, stderr } = await combine('--parallel', damaged, ...K3);
    expect(stderr).toMatch(/K1: .*(seal|damaged)/);
    expect({ status, stdout }).toEqual({ status: 65, stdout: '' });
  });

  describe('records', () => {
    let group: string;
    let quick: string;

    beforeAll(async () => {
      const run = async (into: string, ...args: string[]): Promise<string> => {
        await railproof('run', ...args, '--runs', join(folder, into), '--yes');
        return join(folder, into, readdirSync(join(folder, into))[0] ?? '');
      };
      const modules = ['K1', 'K2'].flatMap((name) => ['--module', `fixtures/modules/${name}.yaml`]);
      group = await run('group', 'sharing', '--bench', 'fixtures/benches/group-ballast.yaml', ...modules);
      const quickly = ['quick-look', '--bench', 'fixtures/benches/nursery.yaml'];
      quick = await run('quick', ...quickly, '--module', 'fixtures/modules/K3.yaml');
    });

    it('of a whole group, with status 65', async () => {
      const { status, stderr } = await combine('--parallel', group, ...K3);
      expect(stderr).toMatch(/K1.*K2|group|several modules/s);
      expect(status).toBe(65);
    });

    it('that were made by different procedures, with status 65, and names them', async () => {
      const { status, stderr } = await combine('--parallel', ...K1, quick);
      expect(stderr).toMatch(/quick-look/);
      expect(stderr).toMatch(/real-limit/);
      expect(status).toBe(65);
    });
  });

  it('to build on a record that was cut off as if it were whole', async () => {
    const cut = copyWith('cut', (journal) => journal.slice(0, -200));
    const { stdout } = await combine('--parallel', cut, ...K3, '--ballast', '51 mΩ');
    expect(stdout).toMatch(/CUT OFF/);
    expect(stdout).toMatch(/^About the records|^CANNOT TELL/m);
  });
});
