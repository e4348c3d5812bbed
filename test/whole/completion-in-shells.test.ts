import { execFileSync, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { withoutSocat } from '../instrument/fixtures/serve-pty.js';
import { until } from './at-the-bench.js';
import { railproof } from './railproof.js';

vi.setConfig({ testTimeout: 60_000 });

const folder = mkdtempSync(join(tmpdir(), 'railproof-shells-'));
const place = join(folder, 'here');

/** Each as it is without what somebody has set up for it. `show` stands for the program, and prints its words. */
const shells = {
  bash: {
    start: 'bash --norc --noprofile -i',
    show: `railproof() { { printf '<%s>' "$@"; echo; } >> ../words; }`,
    ready: '',
  },
  zsh: {
    start: 'zsh -f -i',
    show: `railproof() { { printf '<%s>' "$@"; echo } >> ../words }`,
    ready: 'autoload -Uz compinit && compinit -u -D;',
  },
  fish: {
    start: 'fish --no-config -i',
    show: `function railproof; printf '<%s>' $argv >> ../words; echo >> ../words; end`,
    ready: '',
  },
} as const;
type Shell = keyof typeof shells;

function isMissing(shell: Shell): boolean {
  try {
    execFileSync(shell, ['--version'], { stdio: 'ignore' });
    return withoutSocat;
  } catch {
    return process.env['CI'] === undefined;
  }
}

/** Types lines in a shell on a terminal of its own, and gives the words that the program was called with each time. */
async function typed(shell: Shell, ...lines: readonly string[]): Promise<readonly string[]> {
  const { start, show, ready } = shells[shell];
  const words = join(folder, 'words');
  rmSync(words, { force: true });
  const terminal = spawn('socat', ['-', `EXEC:${start},pty,setsid,ctty,stderr,sane`], {
    cwd: place,
    env: { ...process.env, TERM: 'xterm', HOME: folder, LC_ALL: 'C.UTF-8', PS1: '> ' },
    stdio: ['pipe', 'pipe', 'ignore'],
  });
  let seen = '';
  terminal.stdout.setEncoding('utf8').on('data', (more: string) => {
    seen += more;
  });
  const closed = once(terminal, 'close');
  try {
    terminal.stdin.write(`${ready} source ../completion.${shell}; ${show}; echo re''ady\r`);
    await until(() => seen.includes('ready'));
    for (const line of lines) terminal.stdin.write(`railproof ${line}\r`);
    terminal.stdin.write(`echo do''ne\r`);
    await until(() => seen.includes('done'));
    return readFileSync(words, 'utf8').trimEnd().split('\n');
  } finally {
    terminal.kill();
    await closed;
  }
}

beforeAll(async () => {
  mkdirSync(place);
  for (const name of ['my bench; touch bad.yaml', '$(touch bad).yaml', '`touch bad`.yaml', 'K1.yaml'])
    writeFileSync(join(place, name), '');
  mkdirSync(join(place, 'runs of K1'));
  for (const shell of Object.keys(shells)) {
    const { stdout } = await railproof(['completion', shell]);
    writeFileSync(join(folder, `completion.${shell}`), stdout);
  }
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe.each(Object.keys(shells) as Shell[])('a person at %s', (shell) => {
  it.skipIf(isMissing(shell))(
    'presses Tab, gets words and names of files whole, and nothing in them is performed',
    async () => {
      const words = await typed(
        shell,
        'sche\tbenc\t',
        'run quick\t--dry\t',
        'check my\t',
        'run --bench \\$\\(\t',
        'analyse ru\t',
      );
      expect(words.map((line) => line.replace('/>', '>'))).toEqual([
        '<schema><bench>',
        '<run><quick-look><--dry-run>',
        '<check><my bench; touch bad.yaml>',
        '<run><--bench><$(touch bad).yaml>',
        '<analyse><runs of K1>',
      ]);
      expect(readdirSync(place)).not.toContain('bad');
    },
  );
});
