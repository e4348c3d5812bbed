import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { railproof } from '../cli/in-process.js';
import { tidyUp } from '../run/rehearsal.js';
import { commandsIn, wrongWith } from './commands.js';
import { printedByParts, shownOf } from './printed-by-parts.js';
import { printedByRuns } from './printed-by-runs.js';

tidyUp();

const folder = mkdtempSync(join(tmpdir(), 'railproof-troubleshooting-'));
afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

interface Entry {
  readonly heading: string;
  /** What is quoted in a block, and what in the middle of a sentence. */
  readonly quoted: readonly string[];
}

const page = readFileSync('TROUBLESHOOTING.md', 'utf8');
const entries = entriesOf(page);

function entriesOf(markdown: string): readonly Entry[] {
  return markdown.split(/^#{1,3} /m).flatMap((section) => {
    const [heading = '', ...rest] = section.split('\n');
    const text = rest.join('\n');
    const blocks = [...text.matchAll(/^```text\n([^]*?)\n```$/gm)].map(([, block = '']) => block);
    const inside = text.replace(/^```[^]*?^```$/gm, '');
    const emphasised = [...inside.matchAll(/(?<![*\w])\*(?!\*)([^*\n]+)\*(?![*\w])/g)].flatMap(
      ([, words = '']) => words.split('…').map((part) => part.trim()),
    );
    const quoted = [...blocks, ...emphasised];
    return quoted.length === 0 ? [] : [{ heading, quoted }];
  });
}

async function printedUnder(heading: string): Promise<string> {
  const byParts = printedByParts[heading];
  const byRuns = printedByRuns[heading];
  const printed = [
    byParts === undefined ? '' : await shownOf(byParts, folder),
    byRuns === undefined ? '' : await byRuns(folder),
  ];
  return printed.join('\n').replace(/\s+/g, ' ').toLowerCase();
}

/** The keys and words of all formats, and the names of what is shipped. */
function knownWords(): ReadonlySet<string> {
  const named = ['procedures', 'drivers', 'procedures/tolerances'].flatMap((shelf) =>
    readdirSync(shelf).map((file) => file.replace(/\.yaml$/, '')),
  );
  const known = new Set(named);
  for (const file of readdirSync('schemas').filter((name) => name.endsWith('.json')))
    JSON.parse(readFileSync(join('schemas', file), 'utf8'), (key, value: unknown) => {
      known.add(key);
      if (typeof value === 'string') known.add(value);
      return value;
    });
  return known;
}

describe('the page for what puzzles at the bench', () => {
  it.each(entries)(
    'quotes under "$heading" what is really printed',
    { timeout: 180_000 },
    async ({ heading, quoted }) => {
      const printed = await printedUnder(heading);
      for (const words of quoted) expect(printed).toContain(words.replace(/\s+/g, ' ').toLowerCase());
    },
  );

  it('names no key, finding or word of a file that there is not', () => {
    const known = knownWords();
    const others = ['yes', 'analyse'];
    const words = [...page.matchAll(/(?<!`)`([a-z][a-z\d-]*)`(?!`)/g)].map(([, word = '']) => word);
    expect(words.length).toBeGreaterThan(15);
    expect(words.filter((word) => !known.has(word) && !others.includes(word))).toEqual([]);
  });

  it('has each entry that is held to what is printed, and a link to each', () => {
    const headings = entries.map(({ heading }) => heading);
    for (const heading of [...Object.keys(printedByParts), ...Object.keys(printedByRuns)])
      expect(headings).toContain(heading);
    expect(entries.length).toBeGreaterThan(60);
    const anchors = new Set(
      [...page.matchAll(/^#{1,3} (.+)$/gm)].map(([, heading = '']) => anchorOf(heading)),
    );
    const linked = [...page.matchAll(/\]\(#([^)]+)\)/g)].map(([, anchor = '']) => anchor);
    for (const anchor of linked) expect(anchors).toContain(anchor);
    const [, contents = ''] = /^(- \*\*The bench[^]*?)^## /m.exec(page) ?? [];
    for (const heading of [...page.matchAll(/^### (.+)$/gm)].map(([, each = '']) => each))
      expect(contents).toContain(`(#${anchorOf(heading)})`);
  });

  it('is where the help says that it is, and comes with the package', async () => {
    const { stdout } = await railproof('--help');
    const [, named = ''] = /^ {2}(\/.*TROUBLESHOOTING\.md)$/m.exec(stdout) ?? [];
    expect(readFileSync(named, 'utf8')).toBe(page);
    const { files } = JSON.parse(readFileSync('package.json', 'utf8')) as { files: readonly string[] };
    expect(files).toContain('TROUBLESHOOTING.md');
  });

  it('names no command or option that there is not', async () => {
    const named = commandsIn(page);
    expect(named.length).toBeGreaterThan(15);
    for (const command of named) expect(await wrongWith(command), command.join(' ')).toBeUndefined();
  });

  it('speaks of every code of an error, or says that its message is enough', () => {
    const [, byCode = ''] = /^### By code$([^]*)/m.exec(page) ?? [];
    const spoken = [...byCode.matchAll(/`([A-Z_]+)`/g)].map(([, code]) => code).sort();
    const codes = readdirSync('src', { recursive: true, encoding: 'utf8' })
      .filter((file) => file.endsWith('.ts'))
      .flatMap((file) => [
        ...readFileSync(join('src', file), 'utf8').matchAll(/readonly code = '([A-Z_]+)'/g),
      ])
      .map(([, code]) => code)
      .sort();
    expect(codes.length).toBeGreaterThan(60);
    expect(spoken).toEqual(codes);
  });
});

/** As places that show Markdown make it of a heading. */
function anchorOf(heading: string): string {
  return heading
    .toLowerCase()
    .replace(/[^\w\- ]/g, '')
    .replaceAll(' ', '-');
}
