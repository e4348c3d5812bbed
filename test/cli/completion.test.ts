import { execFileSync } from 'node:child_process';
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Command } from 'commander';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { bashScript } from '../../src/cli/completion/bash-script.js';
import { programWords } from '../../src/cli/completion/program-words.js';
import { railproof } from './in-process.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-completion-'));
const script = join(folder, 'completion.bash');
const shippedIn = (place: string): readonly string[] =>
  readdirSync(place)
    .filter((name) => name.endsWith('.yaml'))
    .map((name) => name.replace('.yaml', ''))
    .sort();

/** Says what bash would offer for the last word of each line; each line is a line of typed words, parted by tabs. */
const asks = `source "$1"
compopt() { asked="$*"; }
while IFS= read -r line; do
  IFS=$'\\t' read -r -a COMP_WORDS <<< "$line."
  COMP_CWORD=$(( \${#COMP_WORDS[@]} - 1 ))
  COMP_WORDS[COMP_CWORD]=\${COMP_WORDS[COMP_CWORD]%.}
  asked=
  _railproof
  printf '%s|%s\\n' "\${COMPREPLY[*]}" "$asked"
done
`;

function offered(...lines: readonly (readonly string[])[]): readonly string[] {
  const typed = lines.map((words) => `${['railproof', ...words].join('\t')}\n`).join('');
  const out = execFileSync('bash', ['--norc', '-c', asks, 'bash', script], { input: typed, cwd: folder });
  return out.toString().split('\n').slice(0, -1);
}

const offeredFor = (...words: readonly string[]): string => offered(words)[0] ?? '';

beforeAll(async () => {
  writeFileSync(script, (await railproof('completion', 'bash')).stdout);
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe('the completion of bash', () => {
  it('knows every command and every option that the help knows', async () => {
    const wordsOf = (help: string, section: string): readonly string[] => {
      const lines = new RegExp(`^${section}:\n((?: .*\n)+)`, 'm').exec(help)?.[1] ?? '';
      return [...lines.matchAll(/^ {2}(\S+?),? (?:(--\S+))?/gm)].flatMap(([, first = '', second]) =>
        second === undefined ? [first] : [first, second],
      );
    };
    const commands = wordsOf((await railproof('--help')).stdout, 'Commands');
    expect(commands).toEqual(expect.arrayContaining(['run', 'analyse', 'completion', 'help']));
    expect(offeredFor('')).toBe(`${commands.join(' ')}|`);
    for (const command of commands.filter((name) => name !== 'help')) {
      const options = wordsOf((await railproof(command, '--help')).stdout, 'Options');
      expect(options).toContain('--help');
      expect(new Set(offeredFor(command, '-').split(/[ |]/))).toEqual(new Set([...options, '']));
    }
  });

  it.each<readonly [words: readonly string[], offered: string]>([
    [['sche'], 'schema|'],
    [['schema', 'd'], 'driver drivers dialogue|'],
    [['new', ''], 'bench module procedure|'],
    [['new', 'bench', ''], '|-o default'],
    [['completion', ''], 'bash zsh fish|'],
    [['help', 'sta'], 'stages|'],
    [['run', ''], `${shippedIn('procedures').join(' ')}|`],
    [['run', './'], '|-o default'],
    [['run', '--ben'], '--bench|'],
    [['run', '--bench', ''], '|-o default'],
    [['run', '--bench', '=', 'b'], '|-o default'],
    [['run', '--resume', ''], '|-o dirnames'],
    [['run', '--module', 'K1.yaml', ''], '|-o default'],
    [['run', '--module', 'K1.yaml', 'K2.yaml', '--y'], '--yes|'],
    [['run', '--yes', 'quick'], 'quick-look|'],
    [['compare', 'a', ''], '|-o dirnames'],
    [['compare', '--tolerance', ''], `${shippedIn('procedures/tolerances').join(' ')}|`],
    [['check', 'a.yaml', 'b.yaml', ''], '|-o default'],
    [['drivers', '--try', 'meter-r'], 'meter-read-scpi|'],
    [['select', '--group', ''], '|'],
    [['compare', 'a', 'b', ''], '|'],
    [['check', '--', '-'], '|-o default'],
    [['--'], '--version --help|'],
    [['unheard-of', ''], '|'],
  ])('of %j offers %j', (words, what) => {
    expect(offeredFor(...words)).toBe(what);
  });

  it('performs nothing of what was typed, whatever it was', () => {
    const hostile = [
      '$(touch bad)',
      '`touch bad`',
      '"$(touch bad)',
      "';touch bad;'",
      '*',
      'a[$(touch bad)]',
      '\\',
      '-x;touch bad',
    ];
    const lines = hostile.flatMap((word) => [
      [word],
      [word, ''],
      ['run', word],
      ['run', word, word],
      ['run', '--bench', word, ''],
    ]);
    expect(offered(...lines)).toHaveLength(lines.length);
    expect(readdirSync(folder)).toEqual(['completion.bash']);
  });
});

describe('a script of completion', () => {
  it.each(['bash', 'zsh', 'fish'])('for %s is printed, and says how it was made', async (shell) => {
    const { status, stdout } = await railproof('completion', shell);
    expect(status).toBe(0);
    expect(stdout).toContain(`${shell} completion of railproof: made by 'railproof completion ${shell}'.`);
    expect(stdout.endsWith('\n')).toBe(true);
  });

  it('for another shell is not there, and the nearest is named', async () => {
    const { status, stderr } = await railproof('completion', 'zhs');
    expect(status).toBe(64);
    expect(stderr).toContain("there is no completion for 'zhs'; did you mean 'zsh'?");
  });

  it('is not made of a program with a value that nobody thought of', () => {
    const program = new Command('some').addCommand(new Command('one').option('--of <colour>', ''));
    expect(() => programWords(program, () => undefined)).toThrow(
      'nobody knows what completes one --of colour',
    );
  });

  it('holds words with quotes as they are', () => {
    const quoted = "it's $(touch bad)";
    const program = new Command('railproof').addCommand(new Command('one').argument('<kind>'));
    const words = programWords(program, () => ({ words: [{ word: quoted, about: '' }], paths: 'none' }));
    writeFileSync(join(folder, 'quoted.bash'), bashScript(words));
    const ask =
      'source quoted.bash; COMP_WORDS=(railproof one it); COMP_CWORD=2; _railproof; echo "$COMPREPLY"';
    expect(execFileSync('bash', ['--norc', '-c', ask], { cwd: folder }).toString()).toBe(`${quoted}\n`);
    rmSync(join(folder, 'quoted.bash'));
  });
});
