import { spawn } from 'node:child_process';
import { once } from 'node:events';
import {
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { connect } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it, onTestFinished, vi } from 'vitest';
import { orderText } from '../../src/bench/watchman-order.js';
import { publishedSchema } from '../../src/cli/published-schemas.js';
import { planDrivers, readBenchDrivers } from '../../src/cli/bench-drivers.js';
import { readBench } from '../../src/files/read-bench.js';
import type { Connection } from '../../src/instrument/connection.js';
import { openSerial } from '../../src/instrument/serial-connection.js';
import type { WatchmanReport } from '../../src/record/watchman-report.js';
import { mismatches, validatorOf } from '../json-schema-check.js';
import { askLoad, journalOf, until } from './at-the-bench.js';
import { oneClientAtATime } from './one-client.js';
import { ended, railproof, start } from './railproof.js';
import { serve } from './served.js';
import { watchmenOf } from './watchmen.js';

vi.setConfig({ testTimeout: 60_000 });

const nursery = 'fixtures/benches/nursery.yaml';
const folder = mkdtempSync(join(tmpdir(), 'railproof-watchman-'));
const brisk = join(folder, 'brisk.yaml');
writeFileSync(
  brisk,
  'railproof: procedure 1\nname: brisk\ntitle: Brisk\nsteps:\n  - load-ramp: { from: 1 A, to: 3 A, points: 200, dwell: 100 ms }\n',
);
let count = 0;

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

/** A bench in another process, and names for what a test makes. */
async function atBench(lines: 'tcp' | 'pty' = 'tcp', there = nursery) {
  count += 1;
  const path = (name: string): string => join(folder, `${name}-${count}`);
  const served = await serve(there, path('bench'), lines);
  onTestFinished(() => served.close());
  return { bench: served.bench, path };
}

interface Wanted {
  readonly procedure?: string;
  readonly node?: readonly string[];
}

function startRun(bench: string, runs: string, { procedure = brisk, node = [] }: Wanted = {}) {
  const child = start(
    [
      ...['run', procedure, '--bench', bench, '--module', 'fixtures/modules/K1.yaml'],
      ...['--runs', runs, '--yes'],
    ],
    { node },
  );
  return { child, end: ended(child) };
}

/** In the middle of the ramp. */
function ramping(runs: string): Promise<void> {
  return until(() => journalOf(runs).includes('"phase":"ramp"'));
}

function recordIn(runs: string): string {
  return join(runs, readdirSync(runs)[0] ?? '');
}

function reportIn(runs: string): WatchmanReport {
  const report = JSON.parse(readFileSync(join(recordIn(runs), 'watchman.json'), 'utf8')) as WatchmanReport;
  expect(mismatches(validatorOf(publishedSchema('watchman')), report)).toEqual([]);
  return report;
}

function nobodyWatches(pid: number | undefined): Promise<void> {
  return until(() => watchmenOf(pid).length === 0);
}

describe('a run that can not end by itself is ended by the watchman, and the record tells', () => {
  it('killed', async () => {
    const { bench, path } = await atBench();
    const { child, end } = startRun(bench, path('runs'));
    await ramping(path('runs'));
    child.kill('SIGKILL');
    const { stderr } = await end;
    expect(await askLoad(bench)).toBe('0');
    expect(stderr).toMatch(
      /the program vanished; the watchman switched the load off .* s later and read it back\./,
    );
    await nobodyWatches(child.pid);
    const { stdout } = await railproof(['analyse', recordIn(path('runs'))]);
    expect(stdout).toMatch(
      /CUT OFF: .*\n\nWATCHMAN: the program vanished; the watchman switched the load off/,
    );
    expect(stdout).not.toContain('THE LOAD WAS ON');
    const { stdout: json } = await railproof(['analyse', recordIn(path('runs')), '--json']);
    expect(JSON.parse(json)).toMatchObject({
      ended: 'cut-off',
      watchman: { why: 'runner-vanished', outcome: 'off', reason: null, attempts: 1 },
    });
  });

  it('stopped in mid-ramp, as with Ctrl-Z: it is ended before anybody else reaches for the load', async () => {
    const { bench, path } = await atBench();
    const { child, end } = startRun(bench, path('runs'));
    await ramping(path('runs'));
    child.kill('SIGSTOP');
    const began = performance.now();
    await until(async () => (await askLoad(bench)) === '0');
    expect(performance.now() - began).toBeGreaterThan(3000);
    const { status, stderr } = await end;
    expect(status).toBeNull();
    expect(child.signalCode).toBe('SIGKILL');
    expect(stderr).toContain(
      'the program hung with the load on and was ended; the watchman switched the load off',
    );
    await nobodyWatches(child.pid);
    expect(reportIn(path('runs'))).toMatchObject({ why: 'runner-stopped-beating', outcome: 'off' });
  });

  it('out of memory', async () => {
    const { bench, path } = await atBench();
    const hungry = 'data:text/javascript,process.on("SIGUSR2",()=>{const all=[];for(;;)all.push([...all])})';
    const { child, end } = startRun(bench, path('runs'), {
      node: ['--max-old-space-size=64', '--import', hungry],
    });
    await ramping(path('runs'));
    child.kill('SIGUSR2');
    const { stderr } = await end;
    expect(child.signalCode).toBe('SIGABRT');
    expect(stderr).toMatch(/heap out of memory/);
    expect(await askLoad(bench)).toBe('0');
    await nobodyWatches(child.pid);
    expect(reportIn(path('runs')).outcome).toBe('off');
  });

  it('killed at a bench of serial ports', async () => {
    const { bench, path } = await atBench('pty');
    const { child, end } = startRun(bench, path('runs'));
    await ramping(path('runs'));
    child.kill('SIGKILL');
    await end;
    await nobodyWatches(child.pid);
    expect(reportIn(path('runs'))).toMatchObject({ why: 'runner-vanished', outcome: 'off' });
    expect(await askSerialLoad(bench)).toBe('0');
  });

  it.each(['wait', 'are-turned-away'] as const)(
    'killed at a load that serves one client at a time, where others %s',
    async (others) => {
      const { bench, path } = await atBench();
      const text = readFileSync(bench, 'utf8');
      const direct = Number(/load:.*tcp:\/\/127\.0\.0\.1:(\d+)/.exec(text)?.[1]);
      const narrow = await oneClientAtATime(direct, others);
      writeFileSync(path('narrow'), text.replace(`127.0.0.1:${direct}`, `127.0.0.1:${narrow.port}`));
      const { child, end } = startRun(path('narrow'), path('runs'));
      await ramping(path('runs'));
      expect(narrow.clients()).toBe(1);
      child.kill('SIGKILL');
      await end;
      await nobodyWatches(child.pid);
      expect(await askLoad(bench)).toBe('0');
      const report = reportIn(path('runs'));
      expect(report.outcome).toBe('off');
      expect(report.attempts).toBeGreaterThan(others === 'wait' ? 0 : 1);
    },
  );
});

describe('a run that ends by itself leaves no watchman, and no word of one', () => {
  it('at its end', async () => {
    const { bench, path } = await atBench();
    writeFileSync(
      path('procedure'),
      'railproof: procedure 1\nname: short\ntitle: Short\nsteps:\n  - load-ramp: { from: 1 A, to: 2 A, points: 3 }\n',
    );
    const { child, end } = startRun(bench, path('runs'), { procedure: path('procedure') });
    expect((await end).status).toBe(0);
    expect(watchmenOf(child.pid)).toEqual([]);
    expect(readdirSync(recordIn(path('runs')))).not.toContain('watchman.json');
  });

  it('by a guard', async () => {
    const reversed = join(folder, 'reversed.yaml');
    writeFileSync(
      reversed,
      readFileSync(nursery, 'utf8').replace(
        '  modules:',
        '  faults: [{ at: 12 s, what: reversed }]\n  modules:',
      ),
    );
    const { bench, path } = await atBench('tcp', reversed);
    const { child, end } = startRun(bench, path('runs'));
    expect((await end).status).toBe(3);
    expect(journalOf(path('runs'))).toMatch(/"event":"guard-tripped".*revers/);
    expect(watchmenOf(child.pid)).toEqual([]);
    expect(readdirSync(recordIn(path('runs')))).not.toContain('watchman.json');
  });

  it('with Ctrl-C, which the watchman does not heed', async () => {
    const { bench, path } = await atBench();
    const { child, end } = startRun(bench, path('runs'));
    await ramping(path('runs'));
    const [watchman = 0] = watchmenOf(child.pid);
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.kill(watchman, signal);
    child.kill('SIGINT');
    expect((await end).status).toBe(3);
    expect(watchmenOf(child.pid)).toEqual([]);
    expect(existsSync(join(recordIn(path('runs')), 'watchman.json'))).toBe(false);
    expect(journalOf(path('runs'))).not.toContain('watchman');
  });

  it('before anything was switched on, by what the pre-flight found', async () => {
    const { bench, path } = await atBench();
    await tellLoad(bench, 'INP ON');
    const { child, end } = startRun(bench, path('runs'));
    expect((await end).status).toBe(3);
    expect(watchmenOf(child.pid)).toEqual([]);
    expect(existsSync(join(recordIn(path('runs')), 'watchman.json'))).toBe(false);
  });

  it('before the bench was open', async () => {
    const { bench, path } = await atBench();
    const text = readFileSync(bench, 'utf8').replace(/(meter:[^]*?tcp:\/\/127\.0\.0\.1:)\d+/, '$11');
    writeFileSync(path('broken'), text);
    const { child, end } = startRun(path('broken'), path('runs'));
    expect((await end).status).toBe(69);
    expect(watchmenOf(child.pid)).toEqual([]);
  });
});

describe('a watchman that dies', () => {
  it('is replaced, which is noted, and the other one does the same', async () => {
    const { bench, path } = await atBench();
    const { child, end } = startRun(bench, path('runs'));
    await ramping(path('runs'));
    const [first = 0] = watchmenOf(child.pid);
    process.kill(first, 'SIGKILL');
    await until(() => watchmenOf(child.pid).some((other) => other !== first));
    await until(() => journalOf(path('runs')).includes('another one takes its place'));
    child.kill('SIGKILL');
    const { stderr } = await end;
    expect(stderr).toContain('the watchman is gone (it was ended by SIGKILL); another one takes its place');
    await nobodyWatches(child.pid);
    expect(await askLoad(bench)).toBe('0');
  });

  it('twice is not replaced again: the run ends safely, and says why', async () => {
    const { bench, path } = await atBench();
    const { child, end } = startRun(bench, path('runs'));
    await ramping(path('runs'));
    for (let killed = 0; killed < 2; killed += 1) {
      await until(() => watchmenOf(child.pid).length === 1);
      const [one = 0] = watchmenOf(child.pid);
      process.kill(one, 'SIGKILL');
      await until(() => !watchmenOf(child.pid).includes(one));
    }
    const { status, stderr } = await end;
    expect(status).toBe(3);
    expect(stderr).toMatch(/the watchman.*can't be had: .*it was ended by SIGKILL/);
    expect(stderr).toContain('The load is off; it was read back.');
    expect(journalOf(path('runs'))).toMatch(/"event":"ended","how":"stopped","reason":"the watchman/);
    expect(watchmenOf(child.pid)).toEqual([]);
    expect(await askLoad(bench)).toBe('0');
  });
});

describe('a watchman on its own', () => {
  /** As a runner starts it; its words go into a pipe that is read only where that is wanted. */
  async function startWatchman(bench: string, record: string) {
    const file = await readBench(bench);
    const drivers = planDrivers(await readBenchDrivers(file));
    const child = spawn(process.execPath, ['dist/cli/watchman-main.js', String(process.pid)], {
      stdio: ['pipe', 'pipe', 'pipe'],
      detached: true,
    });
    onTestFinished(() => void child.kill('SIGKILL'));
    child.stdin.write(`${orderText({ folder: record, bench: file.value, driver: drivers.load })}\n`);
    await once(child.stdout, 'data');
    return child;
  }

  it('is heard by a serial load to which somebody had said half a message', async () => {
    const { bench, path } = await atBench('pty');
    mkdirSync(path('record'));
    const watchman = await startWatchman(bench, path('record'));
    const line = await serialLoad(bench);
    await line.write(Buffer.from('INP ON\nCURR 4'));
    await line.close();
    watchman.stdin.end();
    await once(watchman, 'exit');
    const report = JSON.parse(readFileSync(join(path('record'), 'watchman.json'), 'utf8')) as WatchmanReport;
    expect(report).toMatchObject({ outcome: 'off', attempts: 1 });
    expect(await askSerialLoad(bench)).toBe('0');
  });

  it('does what matters though its report can not be written, and though the terminal is frozen', async () => {
    const { bench, path } = await atBench();
    await tellLoad(bench, 'INP ON');
    // Nobody reads the pipe that stands for the terminal, and it is full.
    const frozen = spawn(
      'sh',
      [
        '-c',
        `head -c 1000000 /dev/zero >&2 & exec "$0" dist/cli/watchman-main.js ${process.pid}`,
        process.execPath,
      ],
      { stdio: ['pipe', 'pipe', 'pipe'] },
    );
    onTestFinished(() => void frozen.kill('SIGKILL'));
    const file = await readBench(bench);
    const drivers = planDrivers(await readBenchDrivers(file));
    const order = orderText({ folder: path('nowhere'), bench: file.value, driver: drivers.load });
    frozen.stdin.write(`${order}\n`);
    await once(frozen.stdout, 'data');
    frozen.stdin.end();
    await once(frozen, 'exit');
    expect(await askLoad(bench)).toBe('0');
    expect(existsSync(path('nowhere'))).toBe(false);
  });
});

/** At the load's own panel, so to speak. */
async function tellLoad(bench: string, message: string): Promise<void> {
  const port = Number(/load:.*tcp:\/\/127\.0\.0\.1:(\d+)/.exec(readFileSync(bench, 'utf8'))?.[1]);
  const socket = connect(port, '127.0.0.1');
  socket.write(`${message}\n`);
  await until(async () => (await askLoad(bench)) === (message === 'INP ON' ? '1' : '0'));
  socket.destroy();
}

async function serialLoad(bench: string): Promise<Connection> {
  const { connection } = (await readBench(bench)).value.instruments.load;
  if (connection.kind !== 'serial') throw new Error('the load is not at a serial port');
  return openSerial(connection);
}

async function askSerialLoad(bench: string): Promise<string> {
  const line = await serialLoad(bench);
  try {
    await line.write(Buffer.from('INP?\n'));
    return Buffer.from((await line.receive(20)) ?? [])
      .toString()
      .trim();
  } finally {
    await line.close();
  }
}
