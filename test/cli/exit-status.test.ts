import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { statusOfBuild, statusOfOutcome } from '../../src/cli/exit-status.js';
import { exitStatusList, exitStatusWords } from '../../src/cli/exit-status-words.js';
import { exitCodeOf, exitCodes } from '../../src/errors/railproof-error.js';
import { GuardTrippedError } from '../../src/bench/bench-error.js';
import { RecordWriteError } from '../../src/record/record-error.js';
import { railproof } from './in-process.js';

describe('the exit status', () => {
  it.each([
    ['conforms', 0],
    ['not-judged', 0],
    ['does-not-conform', 1],
    ['undecided', 2],
  ] as const)('of %s is %i', (outcome, status) => {
    expect(statusOfOutcome(outcome)).toBe(status);
  });

  it.each([
    ['may-be-built', 0],
    ['too-little', 1],
    ['must-not-be-built', 1],
    ['cannot-tell', 2],
  ] as const)('of a build that comes to %s is %i', (outcome, status) => {
    expect(statusOfBuild(outcome)).toBe(status);
  });

  it('of an error is its own, and of what nobody foresaw 70', () => {
    expect(exitCodeOf(new GuardTrippedError('over-voltage', 'too much', ''))).toBe(3);
    expect(exitCodeOf(new RecordWriteError('journal.jsonl', new Error('no')))).toBe(74);
    expect(exitCodeOf(new TypeError('ours'))).toBe(70);
    expect(exitCodeOf('a string')).toBe(70);
  });
});

const names = Object.keys(exitCodes) as (keyof typeof exitCodes)[];

describe('the list of exit statuses', () => {
  it('names each of them in the help and in the README, in the same words', async () => {
    const help = (await railproof('help')).stdout.replace(/\s+/g, ' ');
    const line = /^- \*\*Exit status\*\*: (.*)\.$/m.exec(readFileSync('README.md', 'utf8'))?.[1] ?? '';
    const said = names.map((name) => `${exitCodes[name]} ${exitStatusWords[name]}`);
    expect(line.split('; ')).toEqual(said);
    expect(help).toContain(`Exit status: ${said.join(' ')}`);
  });

  it.each([40, 80])('breaks no word at %i columns', (width) => {
    const lines = exitStatusList(width).split('\n');
    expect(lines.filter((line) => line.length > width)).toEqual([]);
    expect(lines.join(' ').replace(/\s+/g, ' ')).toContain(exitStatusWords.doesNotConform);
  });
});

describe('a command that ends', () => {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-status-'));
  const kept = 'fixtures/runs/20261130T091500Z-K1-real-limit';
  const nursery = readFileSync('fixtures/benches/nursery.yaml', 'utf8');
  const simulated = "'simulated:'";
  const bench = (name: string, text: string): string => {
    writeFileSync(join(folder, name), text);
    return join(folder, name);
  };
  const ran = (text: string, ...more: readonly string[]): readonly string[] => [
    ...['run', 'quick-look', '--bench', bench('bench.yaml', text), '--module', 'fixtures/modules/K1.yaml'],
    ...['--runs', join(folder, 'runs'), '--yes', ...more],
  ];
  // What nobody foresaw, 70, can't be asked for from outside: a first test here shows whose status it is.
  const endings: Readonly<Record<Exclude<keyof typeof exitCodes, 'bug'>, () => readonly string[]>> = {
    conforms: () => ['analyse', kept],
    doesNotConform: () => ran(nursery.replace('5.3 A', '3.3 A').replace('5.1 A', '3.1 A')),
    undecided: () => ['compare', kept, 'fixtures/runs/20261202T034336Z-K2-real-limit'],
    stopped: () => ran(nursery.replace('voltage: 60 V', 'voltage: 15.1 V')),
    usage: () => ['analyse'],
    badFile: () => ['check', bench('bad.yaml', 'railproof: bench 9\n')],
    missingFile: () => ['check', join(folder, 'nothing.yaml')],
    instrument: () =>
      ran(nursery.replaceAll(simulated, "'tcp://127.0.0.1:1'").replace(/\nsimulation:.*/s, '\n')),
    inputOutput: () => ran(nursery, '--junit', join(folder, 'no-such-folder', 'junit.xml')),
  };

  afterAll(() => {
    rmSync(folder, { recursive: true, force: true });
  });

  it.each(Object.keys(endings) as (keyof typeof endings)[])(
    '%s has the status of that name',
    async (name) => {
      expect((await railproof(...endings[name]())).status).toBe(exitCodes[name]);
    },
  );
});
