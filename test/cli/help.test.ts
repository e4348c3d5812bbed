import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { helpExample } from '../../src/cli/help-item.js';
import { ended, railproof, start } from '../whole/railproof.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-help-'));
/** As the program itself lists them, so that none is forgotten here. */
const commands = [
  ...(await railproof(['--help'])).stdout
    .replace(/^.*\nCommands:\n|\n\n.*$/gs, '')
    .matchAll(/^ {2}([a-z]+)\b/gm),
]
  .map(([, word = '']) => word)
  .filter((word) => word !== 'help');
/** They need a folder of their own, somebody who answers, or are served until they are stopped. */
const tried = ['run', 'report', 'new', 'simulate'];

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

/** The words of the example that a command's help shows, without what the shell would do with its output. */
async function exampleOf(command: string): Promise<readonly string[]> {
  const { stdout, status } = await railproof([command, '--help']);
  expect(status).toBe(0);
  const line = /\nExample:\n {2}railproof (.*)\n/.exec(stdout)?.[1] ?? '';
  expect(line.startsWith(command)).toBe(true);
  return line.replace(/ > .*$/, '').split(' ');
}

describe('help', () => {
  it('names every command, and the exit statuses', async () => {
    const { stdout } = await railproof(['--help']);
    expect(commands).toEqual(expect.arrayContaining(tried));
    expect(stdout).toMatch(/^ +69 +instrument unreachable or lost/m);
  });

  it.each(commands.filter((command) => !tried.includes(command)))(
    'of %s shows an example that works',
    async (command) => {
      const { status, stdout, stderr } = await railproof(await exampleOf(command));
      expect(stderr).not.toMatch(/error|Usage/);
      expect(stdout).not.toBe('');
      expect(status).toBe(0);
    },
  );

  it.each([
    ['select', ['--group', '--stack', '--supplies', '--ballast', '--imbalance', '--resistor-tolerance']],
    ['combine', ['--load', '--ballast', '--imbalance', '--resistor-tolerance']],
  ])('of %s says what holds where an option is left out', async (command, options) => {
    const { stdout } = await railproof([command, '--help']);
    const said = stdout.replace(/\s+/g, ' ');
    for (const option of options)
      expect(said).toMatch(new RegExp(`${option} <\\w+>(?:(?! --).)* when left out`));
  });

  it('of run shows an example that works', async () => {
    const { status, stdout, stderr } = await railproof([...(await exampleOf('run')), '--runs', folder]);
    expect(stdout).toContain('recommended-current');
    const [, record = '', page = ''] = /^record: (.*)\nreport: (.*), in that folder$/m.exec(stderr) ?? [];
    expect(readFileSync(join(record, page), 'utf8')).toContain('<!doctype html>');
    expect(status).toBe(0);
  });

  it('of report shows an example that works', async () => {
    const example = await exampleOf('report');
    const to = join(folder, 'page.html');
    const { status, stdout } = await railproof([...example.slice(0, -1), to]);
    expect(example.at(-2)).toBe('--to');
    expect(stdout).toBe(`Report: ${to}\n`);
    expect(status).toBe(0);
  });

  it('shows an example on a narrow terminal in lines no wider, which a shell takes for the same command', () => {
    const words = ['select', 'fixtures/runs', '--group', '2', '--supplies', '2', '--sheet', 'sheet.html'];
    const shown = helpExample(`railproof ${words.join(' ')}`, 40);
    for (const line of shown.split('\n')) expect(line.length).toBeLessThanOrEqual(40);
    const pasted = shown.replace('\nExample:\n', '').replace('railproof', `printf '%s\\n'`);
    expect(pasted.trim().split('\n').length).toBeGreaterThan(1);
    expect(execFileSync('sh', ['-c', pasted], { encoding: 'utf8' }).trim().split('\n')).toEqual(words);
    expect(helpExample(`railproof ${words.join(' ')}`, undefined)).toContain(
      `  railproof ${words.join(' ')}\n`,
    );
  });

  it('of new shows an example that asks for somebody who answers', async () => {
    const { status, stderr } = await railproof(await exampleOf('new'));
    expect(stderr).toContain('terminal');
    expect(status).toBe(64);
  });

  it('of simulate shows an example that works, until it is stopped', async () => {
    const child = start(await exampleOf('simulate'));
    let talk = '';
    child.stderr?.on('data', (more: Buffer) => {
      talk += more.toString();
      if (talk.includes('Serving until')) child.kill('SIGINT');
    });
    const { status, stdout } = await ended(child);
    expect(stdout).toMatch(/^railproof: bench 1\n/);
    expect(stdout).not.toContain('simulation:');
    expect(status).toBe(0);
  });

  it('with a wrong word ends with status 64 and says what was wrong', async () => {
    const { status, stderr } = await railproof(['analize', 'x']);
    expect(stderr).toMatch(/unknown command 'analize'/);
    expect(status).toBe(64);
  });

  it('and the package give the same version', async () => {
    const { version } = JSON.parse(readFileSync('package.json', 'utf8')) as { version: string };
    expect((await railproof(['--version'])).stdout).toBe(`${version}\n`);
  });
});
