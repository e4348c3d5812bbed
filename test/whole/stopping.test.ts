import { spawn } from 'node:child_process';
import {
  closeSync,
  existsSync,
  mkdtempSync,
  openSync,
  readFileSync,
  readdirSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeEach, describe, expect, it } from 'vitest';
import { askLoad } from './at-the-bench.js';
import { ended, railproof, start } from './railproof.js';
import { serve, type Served } from './served.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-stopping-'));
let served: Served;
let count = 0;

beforeEach(async () => {
  count += 1;
  served = await serve('fixtures/benches/nursery.yaml', join(folder, `bench-${count}.yaml`), 'tcp');
});

afterEach(async () => {
  await served.close();
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe('a run that is stopped in the middle leaves the load off and the record whole', () => {
  const brisk = join(folder, 'brisk.yaml');
  writeFileSync(
    brisk,
    'railproof: procedure 1\nname: brisk\ntitle: Brisk\nsteps:\n  - load-ramp: { from: 1 A, to: 3 A, points: 200, dwell: 100 ms }\n',
  );

  it.each([
    ['SIGINT', /stopped with Ctrl-C/],
    ['SIGTERM', /SIGTERM/],
    ['SIGHUP', /SIGHUP/],
    ['SIGQUIT', /Ctrl-\\/],
  ] as const)('by %s', async (signal, words) => {
    const runs = join(folder, `runs-${count}`);
    const child = start([
      ...['run', brisk, '--bench', served.bench, '--module', 'fixtures/modules/K1.yaml'],
      ...['--runs', runs, '--yes'],
    ]);
    const end = ended(child);
    await energised(runs);
    expect(await askLoad(served.bench)).toBe('1');
    child.kill(signal);
    const { status, stderr } = await end;
    expect(status).toBe(3);
    expect(stderr).toMatch(words);
    expect(stderr).toContain('The load is off; it was read back.');
    expect(await askLoad(served.bench)).toBe('0');
    const journal = readFileSync(join(runs, readdirSync(runs)[0] ?? '', 'journal.jsonl'), 'utf8');
    expect(journal.trimEnd().split('\n').at(-1)).toMatch(
      /"event":"ended","how":"stopped".*"seal":"[0-9a-f]{64}"\}$/,
    );
  });

  it('by an error that nobody foresaw', async () => {
    const runs = join(folder, `runs-${count}`);
    const surprise = 'data:text/javascript,process.on("SIGUSR2",()=>{throw new Error("a surprise")})';
    const child = start(
      [
        ...['run', brisk, '--bench', served.bench, '--module', 'fixtures/modules/K1.yaml'],
        ...['--runs', runs, '--yes'],
      ],
      { node: ['--import', surprise] },
    );
    const end = ended(child);
    await energised(runs);
    child.kill('SIGUSR2');
    const { status, stderr } = await end;
    expect(stderr).toMatch(/a fault of ours, please report it: Error: a surprise/);
    expect(stderr).toContain('The load is off; it was read back.');
    expect(status).toBe(70);
    expect(await askLoad(served.bench)).toBe('0');
    const again = await railproof(['analyse', join(runs, readdirSync(runs)[0] ?? '')]);
    expect(again.stdout).toContain('FAILED: a fault of ours');
    expect(again.status).toBe(70);
  });

  it('by the instruments vanishing: the last words say what to do by hand', async () => {
    const runs = join(folder, `runs-${count}`);
    const child = start([
      ...['run', brisk, '--bench', served.bench, '--module', 'fixtures/modules/K1.yaml'],
      ...['--runs', runs, '--yes'],
    ]);
    const end = ended(child);
    await energised(runs);
    await served.close();
    const { status, stderr } = await end;
    expect(status).toBe(69);
    expect(stderr).toContain('It could not be confirmed that the load is off');
    expect(stderr.trimEnd().split('\n').at(-1)).toMatch(
      /THE LOAD MAY STILL BE ON\. Switch its input off at its front panel/,
    );
  });
});

it('a run on virtual time stops as well', async () => {
  const long = join(folder, 'long.yaml');
  writeFileSync(
    long,
    'railproof: procedure 1\nname: long\ntitle: Long\nsteps:\n  - load-ramp: { to: 4 A, points: 10000, readings: 200 }\n',
  );
  const runs = join(folder, 'runs-long');
  const child = start([
    ...['run', long, '--bench', 'fixtures/benches/nursery.yaml', '--module', 'fixtures/modules/K1.yaml'],
    ...['--runs', runs],
  ]);
  const end = ended(child);
  await energised(runs);
  child.kill('SIGINT');
  const { status, stderr } = await end;
  expect(stderr).toContain('stopped with Ctrl-C');
  expect(status).toBe(3);
});

async function energised(runs: string): Promise<void> {
  for (;;) {
    try {
      const journal = readFileSync(join(runs, readdirSync(runs)[0] ?? '', 'journal.jsonl'), 'utf8');
      if (/"phase":"ramp"/.test(journal)) return;
    } catch {
      // Not there yet.
    }
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}

it.skipIf(!existsSync('/dev/full'))('a result that can not be printed is no success', async () => {
  const full = openSync('/dev/full', 'w');
  try {
    const child = spawn(process.execPath, ['dist/cli/main.js', 'drivers'], {
      stdio: ['ignore', full, 'pipe'],
    });
    const { status, stderr } = await ended(child);
    expect(stderr).toMatch(/the result could not be printed: .*ENOSPC/);
    expect(status).toBe(74);
  } finally {
    closeSync(full);
  }
});
