import { createHash } from 'node:crypto';
import { execFileSync } from 'node:child_process';
import {
  cpSync,
  mkdirSync,
  mkdtempSync,
  readFileSync,
  rmSync,
  symlinkSync,
  truncateSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { basename, join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { sealedEvents, type TimedEvent } from '../../src/record/journal-event.js';
import { newSealer, sealLine } from '../../src/record/seal.js';
import { railproof } from './in-process.js';

const kept = 'fixtures/runs/20261130T091500Z-K1-real-limit';
const folder = mkdtempSync(join(tmpdir(), 'railproof-hostile-'));
/** Clears the screen, begins another line, turns the text around, hides, and rings. */
const nasty = '\u001b[2J\r\n\u009b31m\u202eevil\u200b\u2028\u0007<script>alert(1)</script>';
const hostile = join(folder, `a\u001b[2Jb\n\u202ec`);

interface Header {
  modules: { name: string; description: string; changes: object[] }[];
  bench: { name: string };
  procedure: { title: string };
  instruments: { identity: string; address: string; driver: string }[];
}

/** The kept record with every free text of it made nasty, and sealed again as if it had been made so. */
function makeHostile(): void {
  cpSync(kept, hostile, { recursive: true });
  const header = JSON.parse(readFileSync(join(kept, 'run.json'), 'utf8')) as Header;
  for (const module of header.modules) {
    module.name += nasty;
    module.description = nasty;
    module.changes = [{ date: nasty, what: nasty }];
  }
  header.bench.name = nasty;
  header.procedure.title = nasty;
  for (const instrument of header.instruments) {
    instrument.identity = nasty;
    instrument.address = nasty;
    instrument.driver = nasty;
  }
  const text = JSON.stringify(header);
  writeFileSync(join(hostile, 'run.json'), text);
  const sha256 = createHash('sha256').update(text).digest('hex');
  const seals = newSealer();
  const lines = readFileSync(join(kept, 'journal.jsonl'), 'utf8')
    .trimEnd()
    .split('\n')
    .map((line) => {
      const event = JSON.parse(line, (key, value: unknown) =>
        key === 'seal' ? undefined : value,
      ) as TimedEvent;
      const changed = JSON.stringify(made(event, sha256));
      const written = `${sealedEvents.has(event.event) ? sealLine(seals, changed) : changed}\n`;
      seals.update(written);
      return written;
    });
  writeFileSync(join(hostile, 'journal.jsonl'), lines.join(''));
  writeFileSync(
    join(hostile, 'findings.json'),
    JSON.stringify({
      ended: nasty,
      outcome: nasty,
      findings: [{ name: 'recommended-current', value: 1e308 }],
    }),
  );
}

function made(event: TimedEvent, sha256: string): TimedEvent {
  if (event.event === 'opened') return { ...event, header: sha256, wallClock: nasty };
  if (event.event === 'instrument') return { ...event, identity: nasty, address: nasty, role: nasty };
  if (event.event === 'notice') return { ...event, text: nasty };
  if (event.event === 'step-began') return { ...event, kind: `${event.kind}${nasty}` };
  return event.event === 'ended' ? { ...event, how: 'stopped', reason: nasty } : event;
}

/** Nothing but lines of what can be seen. */
function expectHarmless({ stdout, stderr }: { stdout: string; stderr: string }): void {
  for (const text of [stdout, stderr]) {
    expect(text.replaceAll('\n', '')).not.toMatch(/[\p{Cc}\p{Cf}\p{Cs}\u2028\u2029]/u);
  }
}

beforeAll(makeHostile);
afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe('a record whose texts try to steer the terminal', () => {
  it('is listed in one line, and nothing in it acts', async () => {
    const listed = await railproof('runs', folder);
    expectHarmless(listed);
    expect(listed.status).toBe(0);
    expect(listed.stdout.trimEnd().split('\n')).toHaveLength(2);
    expect(listed.stdout).toContain('a\\u001b[2Jb\\u000a\\u202ec');
  });

  it('is listed for programs with every character as it is', async () => {
    const listed = await railproof('runs', folder, '--json');
    expectHarmless(listed);
    expect(JSON.parse(listed.stdout)).toMatchObject({ runs: [{ run: basename(hostile), ended: nasty }] });
  });

  it('is analysed, and shows what it holds as text', async () => {
    const analysed = await railproof('analyse', hostile);
    expectHarmless(analysed);
    expect(analysed.status).toBe(2);
    expect(analysed.stdout).toContain('journal whole, every seal holds');
    expect(analysed.stdout).toContain('\\u001b[2J\\u000d\\u000a\\u009b31m\\u202eevil\\u200b\\u2028\\u0007');
    expect(analysed.stdout).toContain('<script>alert(1)</script>');
  });

  it('is analysed for programs with every character as it is', async () => {
    const analysed = await railproof('analyse', hostile, '--json');
    expectHarmless(analysed);
    expect(JSON.parse(analysed.stdout)).toMatchObject({ run: basename(hostile), reason: nasty });
  });

  it('is compared, and named in what is wrong with it', async () => {
    expectHarmless(await railproof('compare', kept, hostile));
    expectHarmless(await railproof('compare', hostile, hostile, '--json'));
    truncateSync(join(hostile, 'journal.jsonl'), 3000);
    expectHarmless(await railproof('analyse', hostile));
    expectHarmless(await railproof('analyse', hostile, '--strict'));
  });
});

describe('a name on the command line that tries to steer the terminal', () => {
  it.each([
    ['check', `${nasty}.yaml`],
    ['analyse', nasty],
    ['runs', nasty],
    ['compare', nasty, nasty],
    ['schema', nasty],
    ['drivers', '--try', nasty, '--connection', `tcp://${nasty}`],
    ['simulate', nasty],
    ['safe', '--bench', nasty],
    [nasty],
    ['runs', `--${nasty}`],
    ['run', nasty, '--bench', 'fixtures/benches/nursery.yaml', '--module', 'fixtures/modules/K1.yaml'],
  ])('%j', async (...args) => {
    const refused = await railproof(...args);
    expectHarmless(refused);
    expect(refused.stderr).toContain('\\u001b[2J');
    expect(refused.status).not.toBe(0);
  });

  it('of a file that is right', async () => {
    const path = join(folder, 'K1\u001b[2J.yaml');
    cpSync('fixtures/modules/K1.yaml', path);
    const checked = await railproof('check', path);
    expectHarmless(checked);
    expect(checked.status).toBe(0);
  });

  it('of a folder without records', async () => {
    const empty = join(folder, 'empty', '\u001b[2J');
    mkdirSync(empty, { recursive: true });
    const listed = await railproof('runs', empty);
    expectHarmless(listed);
    expect(listed.stdout).toContain('\\u001b[2J');
  });
});

describe('a folder of records with odd things in it', () => {
  it('is listed all the same', async () => {
    const runs = join(folder, 'odd');
    mkdirSync(runs);
    symlinkSync(runs, join(runs, 'loop'));
    symlinkSync('/nowhere', join(runs, 'broken'));
    symlinkSync('self', join(runs, 'self'));
    writeFileSync(join(runs, 'file'), 'text');
    for (const name of ['huge', 'pipe', 'folder', 'device', 'deep']) {
      mkdirSync(join(runs, name));
      writeFileSync(join(runs, name, 'run.json'), '{}');
    }
    writeFileSync(join(runs, 'huge', 'findings.json'), '');
    truncateSync(join(runs, 'huge', 'findings.json'), 2 ** 30);
    execFileSync('mkfifo', [join(runs, 'pipe', 'findings.json')]);
    mkdirSync(join(runs, 'folder', 'findings.json'));
    symlinkSync('/dev/zero', join(runs, 'device', 'findings.json'));
    writeFileSync(join(runs, 'deep', 'findings.json'), '['.repeat(100_000));
    const listed = await railproof('runs', runs);
    expect(listed.status).toBe(0);
    const lines = listed.stdout.trimEnd().split('\n');
    expect(lines.map((line) => line.trim().split(/ +/).slice(0, 2).join(' '))).toEqual([
      'record ended',
      'deep unreadable',
      'device unreadable',
      'folder unreadable',
      'huge unreadable',
      'pipe unreadable',
    ]);
  });
});

describe('a record with files that no record has', () => {
  const parts = [
    [
      'of a size beyond reason',
      (path: string) => {
        rmSync(path);
        writeFileSync(path, '');
        truncateSync(path, 500 * 2 ** 20);
      },
    ],
    [
      'a pipe that nobody writes to',
      (path: string) => {
        rmSync(path);
        execFileSync('mkfifo', [path]);
      },
    ],
    [
      'a device that never ends',
      (path: string) => {
        rmSync(path);
        symlinkSync('/dev/zero', path);
      },
    ],
    [
      'a folder',
      (path: string) => {
        rmSync(path);
        mkdirSync(path);
      },
    ],
  ] as const;

  it.each(
    ['run.json', 'journal.jsonl'].flatMap((file) => parts.map(([what, spoil]) => ({ file, what, spoil }))),
  )('$file is $what: it is refused, or called damaged, at once', async ({ file, spoil }) => {
    const record = mkdtempSync(join(folder, 'spoilt-'));
    cpSync(kept, record, { recursive: true });
    spoil(join(record, file));
    const before = process.memoryUsage().rss;
    const analysed = await railproof('analyse', record);
    expectHarmless(analysed);
    if (analysed.stdout === '') {
      expect([65, 66]).toContain(analysed.status);
      expect(analysed.stderr.trimEnd().split('\n')).toHaveLength(1);
    } else {
      expect(analysed.stdout).toContain('DAMAGED RECORD');
    }
    expect(process.memoryUsage().rss - before).toBeLessThan(300 * 2 ** 20);
  });
});
