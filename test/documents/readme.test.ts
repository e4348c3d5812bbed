import { execFile } from 'node:child_process';
import { copyFileSync, existsSync, mkdtempSync, readFileSync, rmSync, symlinkSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { program, root } from '../whole/railproof.js';
import { blocksIn, commandsIn, wrongWith } from './commands.js';

const readme = readFileSync('README.md', 'utf8');
const folders: string[] = [];
afterAll(() => {
  for (const folder of folders) rmSync(folder, { recursive: true, force: true });
});

/** A folder of a reader's own, with what comes with the program, and with what the questions of `railproof new` come to. */
function readersFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-readme-'));
  folders.push(folder);
  for (const name of ['fixtures', 'procedures', 'drivers']) symlinkSync(join(root, name), join(folder, name));
  copyFileSync('fixtures/benches/nursery.yaml', join(folder, 'bench.yaml'));
  copyFileSync('fixtures/modules/K1.yaml', join(folder, 'K1.yaml'));
  return folder;
}

/** Pasted into a shell, which finds no program but ours: no browser opens. */
function paste(line: string, folder: string): Promise<{ readonly status: number; readonly stderr: string }> {
  const ours = `railproof() { '${process.execPath}' '${program}' "$@"; }\n${line}\n`;
  const environment = { PATH: folder, NO_COLOR: '1', LC_ALL: 'C.UTF-8' };
  return new Promise((done) => {
    execFile('/bin/bash', ['-c', ours], { cwd: folder, env: environment }, (error, _stdout, stderr) => {
      done({ status: error === null ? 0 : Number(error.code), stderr });
    });
  });
}

const blocks = blocksIn(readme).map((lines) =>
  lines
    .map((line) => line.replace(/^npm ci && npm run build && node dist\/cli\/main\.js/, 'railproof'))
    .filter((line) => line.startsWith('railproof ')),
);

/** At a terminal, or of an instrument at an address that stands for whatever the reader has. */
const asksSomebody = /^railproof new |192\.0\.2\./;

/** Those that end with another status than 0, as the README says that they do. */
const expected: Readonly<Record<string, number>> = {
  'nursery-isolation-leaky': 1,
  'group-hiccup': 1,
  'acceptance --bench fixtures/benches/nursery-isolation-bonded': 1,
};

function statusOf(line: string): number {
  return Object.entries(expected).find(([part]) => line.includes(part))?.[1] ?? 0;
}

/** One line after the other, as they are pasted. */
async function pasteBlock(lines: readonly string[]): Promise<readonly string[]> {
  const folder = readersFolder();
  const pasted = lines.filter((line) => !asksSomebody.test(line));
  for (const line of pasted) {
    const { status, stderr } = await paste(line, folder);
    expect({ line, status, fault: /\berror|fault of ours/i.exec(stderr)?.[0] }).toEqual({
      ...{ line, status: statusOf(line), fault: undefined },
    });
  }
  return pasted;
}

/** Two readers at once are enough for a small machine. */
async function pasteEverySecond(first: number): Promise<readonly string[]> {
  const pasted: string[] = [];
  for (const [index, lines] of blocks.entries())
    if (index % 2 === first) pasted.push(...(await pasteBlock(lines)));
  return pasted;
}

describe('the README', () => {
  it('shows commands that run as they are pasted, and end as it says', { timeout: 900_000 }, async () => {
    const pasted = (await Promise.all([0, 1].map(pasteEverySecond))).flat();
    expect(pasted.length).toBeGreaterThan(15);
    const left = blocks.flat().filter((line) => !pasted.includes(line));
    expect(left.map((line) => line.split(' ')[1]).sort()).toEqual(['drivers', 'drivers', 'new', 'new']);
  });

  it('names no command or option that there is not', async () => {
    const named = commandsIn(readme);
    expect(named.length).toBeGreaterThan(40);
    for (const command of named) expect(await wrongWith(command), command.join(' ')).toBeUndefined();
  });

  it('leads to files and headings that there are', () => {
    const headings = [...readme.matchAll(/^#+ (.+)$/gm)].map(([, heading = '']) =>
      heading
        .toLowerCase()
        .replace(/[^\w\- ]/g, '')
        .replaceAll(' ', '-'),
    );
    const links = [...readme.matchAll(/\]\(([^)]+)\)/g)].map(([, link = '']) => link);
    expect(links.length).toBeGreaterThan(8);
    for (const link of links) {
      const [file = '', anchor] = link.split('#');
      if (file === '') expect(headings).toContain(anchor);
      else expect(existsSync(file), link).toBe(true);
    }
  });
});
