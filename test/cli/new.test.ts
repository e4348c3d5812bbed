import {
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { PassThrough } from 'node:stream';
import { describe, expect, it, onTestFinished } from 'vitest';
import { main } from '../../src/cli/program.js';
import { purposes } from '../../src/cli/new-procedure-purposes.js';
import type { Streams } from '../../src/cli/streams.js';
import { vocabulary } from '../../src/cli/vocabulary.js';
import { readBench } from '../../src/files/read-bench.js';
import { readModule } from '../../src/files/read-module.js';
import { readProcedure } from '../../src/files/read-procedure.js';
import { railproof } from './in-process.js';

/**
 * A `railproof` in this process, as at a terminal, and what is typed there: a line each, then the end of the input.
 * What came on the screen is told on one line.
 */
async function atTerminal(args: readonly string[], typed: readonly string[]) {
  const [stdin, stdout, stderr] = [0, 1, 2].map(
    () => new PassThrough({ encoding: 'utf8', highWaterMark: 1 << 24 }),
  );
  Object.assign(stdin ?? {}, { isTTY: true });
  Object.assign(stderr ?? {}, { isTTY: true, columns: 200 });
  stdin?.end(typed.map((line) => `${line}\n`).join(''));
  const environment = { NO_COLOR: '1' };
  const status = await main(args, { stdin, stdout, stderr, environment } as unknown as Streams);
  return {
    status,
    stdout: String(stdout?.read() ?? ''),
    screen: String(stderr?.read() ?? '').replace(/\s+/g, ' '),
  };
}

function folder(): string {
  const made = mkdtempSync(join(tmpdir(), 'railproof-new-'));
  onTestFinished(() => {
    rmSync(made, { recursive: true, force: true });
  });
  return made;
}

const label = ['15 V brick', '15 V', '4 A', '40 degC', 'mains', 'I', ''];

describe('railproof new module', () => {
  it('asks again with the reason where an answer will not do, and writes what was answered', async () => {
    const path = join(folder(), 'K1.yaml');
    const answers = [
      '',
      '15 V brick',
      '15',
      'fifteen',
      '15 V',
      '',
      '4A',
      '',
      'water',
      '1',
      'III',
      '2',
      '500 V',
    ];
    const changes = ['link removed', '2026-13-01', '2026-11-14', 'fan: new', '2026-01-02', ''];
    const { status, stdout, screen } = await atTerminal(['new', 'module', path], [...answers, ...changes]);
    expect(status).toBe(0);
    expect((await readModule(path)).value).toEqual({
      name: 'K1',
      description: '15 V brick',
      rated: { voltage: 15, current: 4 },
      protectionClass: 'II',
      input: 'mains',
      outputIsolation: 500,
      changes: [
        { date: '2026-01-02', what: 'fan: new' },
        { date: '2026-11-14', what: 'link removed' },
      ],
    });
    expect(screen).toContain('found the bare number 15; a voltage needs its unit: 15 V, 200 mV');
    expect(screen).toContain('an answer is needed here; Ctrl-C ends this, and writes nothing');
    expect(screen).toContain('found "water"; a number from 1 to 2 is needed, or mains, dc');
    expect(screen).toContain('a date is needed, year first: 2026-11-14');
    expect(stdout).toContain('K1.yaml: a module file, and right');
    expect(stdout).toMatch(
      /^ {2}railproof run quick-look --bench bench\.yaml --module \S+K1\.yaml --dry-run$/m,
    );
  });

  it('takes no air for that of a label in which nothing stands, nor negative volts, nor a comma', async () => {
    const path = join(folder(), 'K1.yaml');
    const answers = [
      '',
      '',
      '-15 V',
      '12,5 V',
      '12.5 V',
      '4 A',
      '1e9 °C',
      '-300 °C',
      '40 °C',
      'mains',
      'I',
      '',
      '',
    ];
    const { status, screen } = await atTerminal(['new', 'module', path], answers);
    expect(status).toBe(0);
    expect(screen).toContain("found '-15 V'; more than 0 V is needed");
    expect(screen).toContain("found '12,5 V'; the decimal sign is a point: '12.5 V'");
    expect(screen).toContain("found '1e9 °C'; at most 150 °C is needed");
    expect(screen).toContain("found '-300 °C'; at least -50 °C is needed");
    expect((await readModule(path)).value.rated).toEqual({ voltage: 12.5, current: 4, ambient: 40 });
  });

  it('takes no change that is still to come', async () => {
    const path = join(folder(), 'K1.yaml');
    const answers = ['', ...label, 'link removed', '2999-01-01', '2026-01-02', ''];
    const { status, screen } = await atTerminal(['new', 'module', path], answers);
    expect(status).toBe(0);
    expect(screen).toContain('2999-01-01 is still to come; today is 20');
    expect((await readModule(path)).value.changes).toEqual([{ date: '2026-01-02', what: 'link removed' }]);
  });

  it('asks for another name where a folder has that of the module', async () => {
    const here = folder();
    mkdirSync(join(here, 'K1.yaml'));
    const before = process.cwd();
    onTestFinished(() => {
      process.chdir(before);
    });
    process.chdir(here);
    const { status, screen } = await atTerminal(['new', 'module'], ['K1', ...label, '', 'K1-b.yaml']);
    expect(status).toBe(0);
    expect(screen).toContain('K1.yaml is there already, and is no file that could be written over.');
    expect((await readModule('K1-b.yaml')).value.name).toBe('K1');
  });

  it('never takes Enter for what a label says', async () => {
    const path = join(folder(), 'K2.yaml');
    const { status, screen } = await atTerminal(['new', 'module', path], ['', '', '', '', '', '']);
    expect(status).toBe(3);
    expect(screen.split('an answer is needed here')).toHaveLength(5);
    expect(existsSync(path)).toBe(false);
  });

  it.each(Array.from({ length: label.length + 1 }, (_, answered) => answered))(
    'ends with 3 and writes nothing where the input ends after %i answers',
    async (answered) => {
      const here = folder();
      const typed = ['', ...label].slice(0, answered);
      const { status, screen } = await atTerminal(['new', 'module', join(here, 'K1.yaml')], typed);
      expect(status).toBe(3);
      expect(screen).toContain('the input ended; nothing was written. Begin again whenever you like.');
      expect(readdirSync(here)).toEqual([]);
    },
  );

  it('writes over a file only where that is wanted, and else asks for another name', async () => {
    const here = folder();
    const path = join(here, 'K1.yaml');
    writeFileSync(path, 'mine\n');
    const other = join(here, 'K1-again.yaml');
    const refused = await atTerminal(
      ['new', 'module', path],
      ['', join(here, 'no', 'K1.yaml'), other, '', ...label, ''],
    );
    expect(refused.status).toBe(0);
    expect(refused.screen).toContain(`${path} is there already. Write over it? (yes or no)`);
    expect(refused.screen).toContain(`there is no folder ${join(here, 'no')}`);
    expect(readFileSync(path, 'utf8')).toBe('mine\n');
    expect((await readModule(other)).value.name).toBe('K1');
    const wanted = await atTerminal(['new', 'module', path], ['yes', 'K9', ...label, '']);
    expect(wanted.status).toBe(0);
    expect((await readModule(path)).value.name).toBe('K9');
    expect(readdirSync(here).sort()).toEqual(['K1-again.yaml', 'K1.yaml']);
  });
});

describe('railproof new procedure', () => {
  it.each(purposes.map(({ word }, index) => [word, index + 1] as const))(
    'writes one that is right for "%s", and keeps the criteria that nobody changes',
    async (word, number) => {
      const path = join(folder(), 'mine.yaml');
      const { from, criteria } = purposes[number - 1] ?? { criteria: [] };
      const headline = from === undefined ? ['A headline', ''] : [''];
      const typed = [String(number), '', ...headline, ...criteria.map(() => '')];
      const { status, stdout } = await atTerminal(['new', 'procedure', path], typed);
      expect(status).toBe(0);
      expect(stdout).toMatch(
        word === 'share' || word === 'stack' ? /K1\.yaml --module K2\.yaml/ : /K1\.yaml --dry/,
      );
      const shelves = { relativeTo: '.', shipped: 'procedures' };
      const made = (await readProcedure(path, vocabulary, shelves)).value;
      const base = from === undefined ? undefined : (await readProcedure(from, vocabulary, shelves)).value;
      expect(made.name).toBe('mine');
      expect(made.criteria).toEqual(base?.criteria ?? []);
      expect(made.steps.map(({ kind }) => kind)).toEqual(
        base?.steps.map(({ kind }) => kind) ?? ['open-circuit'],
      );
    },
  );

  it('puts the criteria asked for in place of those it had, and refuses what none can be', async () => {
    const path = join(folder(), 'pump-line.yaml');
    const typed = ['limit', 'pump line', '', 'Can it feed a pump?', '3', '3 A', '', '50 mohm'];
    const { status, screen } = await atTerminal(['new', 'procedure', path], typed);
    expect(status).toBe(0);
    expect(screen).toContain("found 'pump line'; a name is needed");
    expect(screen).toContain('found the bare number 3; a current needs its unit');
    const text = readFileSync(path, 'utf8');
    expect(text).toContain(
      '  - { finding: usable-current, at-least: 3 A }\n  - { finding: droop-resistance, at-most: 50 mΩ }\n',
    );
    expect(text).not.toContain('at-least: 100 % of rated-current');
    expect(text).toContain('title: "Can it feed a pump?"');
  });
});

describe('railproof new bench', () => {
  it('makes up a bench to try things on, on which a module of that label runs at once', async () => {
    const here = folder();
    const bench = join(here, 'bench.yaml');
    const module = join(here, 'W1.yaml');
    const made = await atTerminal(
      ['new', 'bench', bench],
      ['try-out', 'simulated', 'W1', '12 V', '2.5 A', 'foldback'],
    );
    expect(made.status).toBe(0);
    expect((await readBench(bench)).value).toMatchObject({
      name: 'try-out',
      simulation: { modules: [{ name: 'W1', limit: { style: 'foldback', current: 3.25 } }] },
    });
    const answers = ['', '', '12 V', '2.5 A', '', 'mains', 'II', '', ''];
    expect((await atTerminal(['new', 'module', module], answers)).status).toBe(0);
    const ran = await railproof(
      ...['run', 'real-limit', '--bench', bench, '--module', module, '--yes', '--json'],
      ...['--runs', join(here, 'runs')],
    );
    expect(ran.status).toBe(0);
    expect(ran.stdout).toContain('"foldback"');
  });

  it('makes up no module that is too much for the load made up with it', async () => {
    const here = folder();
    const bench = join(here, 'bench.yaml');
    const module = join(here, 'W1.yaml');
    const typed = ['', 'simulated', 'W1', '45 V', '15 A', '', ''];
    const { status, screen } = await atTerminal(['new', 'bench', bench], typed);
    expect(status).toBe(0);
    expect(screen).toContain("found '15 A'; at most 2.1 A is needed");
    await atTerminal(['new', 'module', module], ['', '', '45 V', '2.1 A', '', 'mains', 'II', '', '']);
    const files = ['--bench', bench, '--module', module, '--dry-run'];
    for (const procedure of ['quick-look', 'real-limit', 'limit-shape', 'acceptance'])
      expect(await railproof('run', procedure, ...files)).toMatchObject({ status: 0 });
  });

  it('offers no address that it then refuses', async () => {
    const typed = ['', 'real', 'foo'];
    const { screen } = await atTerminal(['new', 'bench', join(folder(), 'bench.yaml')], typed);
    expect(screen).toContain(
      'found "foo"; an address is needed, which begins with tcp:// or with serial: the input ended',
    );
  });
});

describe('railproof new is not begun', () => {
  it('where nobody is at a terminal, and says what to do instead', async () => {
    const { status, stderr } = await railproof('new', 'module');
    expect(status).toBe(64);
    expect(stderr).toBe(
      'this asks questions, and nobody is at a terminal to answer them. Run it in a terminal; or copy ' +
        'fixtures/modules/K1.yaml of the package, change it, and have `railproof check K1.yaml` look whether it is right.\n',
    );
  });

  it.each([
    [['new', 'bnech'], '"bnech" is no kind of file that can be begun here; did you mean \'bench\'?'],
    [['new', 'bench', 'bench'], 'bench: the name of such a file ends in .yaml'],
    [['new', 'bench', 'nowhere/bench.yaml'], 'nowhere/bench.yaml: there is no folder nowhere'],
  ])('%j', async (args, message) => {
    const { status, screen } = await atTerminal(args, []);
    expect(status).toBe(64);
    expect(screen).toContain(message);
    expect(screen).toContain('railproof new bench');
  });

  it('where a folder has that name', async () => {
    const path = join(folder(), 'bench.yaml');
    mkdirSync(path);
    const { status, screen } = await atTerminal(['new', 'bench', path], []);
    expect(status).toBe(64);
    expect(screen).toContain("this is no file, and can't be written over");
  });
});
