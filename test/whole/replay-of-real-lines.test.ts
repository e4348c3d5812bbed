import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { type AddressInfo, connect, createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it, onTestFinished, vi } from 'vitest';
import { nobody } from './instruments.js';
import { railproof } from './railproof.js';
import { serve } from './served.js';
import { noSmallDisks, onSmallDisk } from './small-disk.js';
import { happenings, onlyIn, replayed, shownBy, traced } from './traced.js';

vi.setConfig({ testTimeout: 180_000 });

const folder = mkdtempSync(join(tmpdir(), 'railproof-traced-'));
const fresh = (): string => mkdtempSync(join(folder, 'runs-'));
const module = ['--module', 'fixtures/modules/K1.yaml'];
const nursery = readFileSync('fixtures/benches/nursery.yaml', 'utf8');
const off = 'The load is off; it was read back.';

/** Real time passes: the steps of real-limit, each as short as it may be. */
const shortened = join(folder, 'shortened.yaml');
writeFileSync(
  shortened,
  `railproof: procedure 1
name: real-limit-shortened
title: What one module really delivers, in a hurry
cautions: [mains]
steps:
  - open-circuit: { for: 1 s }
  - load-ramp: { from: 0 A, to: 100 % of rated-current, points: 6, dwell: 50 ms, readings: 3 }
  - dropout-search: { from: 100 % of rated-current, ceiling: 200 % of rated-current, resolution: 200 mA, sag: 5 % }
criteria:
  - { finding: usable-current, at-least: 100 % of rated-current }
`,
);

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

async function served(name: string, lines: 'tcp' | 'pty'): Promise<string> {
  const there = await serve('fixtures/benches/nursery.yaml', join(folder, `${name}-live.yaml`), lines);
  onTestFinished(() => there.close());
  return there.bench;
}

async function goesAgainAsItWent(bench: string): Promise<readonly string[]> {
  const then = await traced(fresh(), [shortened, '--bench', bench, ...module]);
  expect(then.stderr).toContain(off);
  expect(then.status).toBe(0);
  const now = await replayed(then.trace, fresh(), ['--trace']);
  expect(now.stderr).toContain(off);
  expect(now.status).toBe(0);
  const shown = shownBy(now.record);
  expect(shown).toEqual(shownBy(then.record));
  expect(shown.findings.map(({ name }) => name)).toContain('dropout-current');
  for (const post of ['load', 'meter', 'operator']) {
    expect(happenings(join(now.record, 'trace'), post)).toEqual(happenings(then.trace, post));
  }
  return happenings(then.trace, 'meter');
}

describe('a run in real time, traced and replayed, shows the same to the last digit', () => {
  it('over TCP', async () => {
    await goesAgainAsItWent(await served('tcp', 'tcp'));
  });

  // Where socat is missing there are no ptys; CI installs it, and there nothing is skipped.
  it.skipIf(!hasSocat() && process.env['CI'] === undefined)('over a pseudo-terminal', async () => {
    await goesAgainAsItWent(await served('pty', 'pty'));
  });

  it('over a line that is lost and found again, and swallows a question', async () => {
    const bench = await served('gap', 'tcp');
    const text = readFileSync(bench, 'utf8');
    const [meter = ''] = /(?<=meter:.*)tcp:[\d.:/]+/.exec(text) ?? [];
    writeFileSync(bench, text.replace(meter, await badLine(meter)));
    const seen = await goesAgainAsItWent(bench);
    expect(seen.filter((line) => line.includes('"lost":"'))).toHaveLength(2);
  });
});

/** A line to an instrument on which one question is lost, then the line, then the one after it at once. */
async function badLine(to: string): Promise<string> {
  let heard = 0;
  let opened = 0;
  const server = createServer((client) => {
    const upstream = connect(Number(to.split(':').at(-1)), '127.0.0.1');
    const cut = (): void => {
      client.destroy();
      upstream.destroy();
    };
    client.on('error', cut).on('close', cut);
    upstream.on('error', cut).on('close', cut);
    upstream.on('data', (reply) => client.write(reply));
    client.on('data', (message) => {
      heard += 1;
      if (heard === 60) cut();
      else if (heard !== 40) upstream.write(message);
    });
    if (++opened === 2) cut();
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  onTestFinished(() => void server.close());
  return `tcp://127.0.0.1:${(server.address() as AddressInfo).port}`;
}

describe('a bench that could not be opened', () => {
  it('leaves a trace where the records are, which is none, and fails again when it is replayed', async () => {
    const bench = join(folder, 'nobody.yaml');
    const [load, meter] = [await nobody(), await nobody()];
    const live = nursery.replace('simulated:', load).replace('simulated:', meter);
    writeFileSync(bench, live.replace(/simulation:[^]*/, ''));
    const runs = fresh();
    const args = ['real-limit', '--bench', bench, ...module, '--runs', runs, '--yes', '--trace'];
    const { status, stderr } = await railproof(['run', ...args]);
    expect(status).toBe(69);
    const trace = onlyIn(runs);
    expect(stderr).toContain(`trace: ${trace}\n`);
    expect(happenings(trace, 'load')[0]).toMatch(/^\{"t":\d.*,"unreachable":"the connection is refused/);
    const again = await replayedInVain(trace);
    expect(again.status).toBe(69);
    expect(again.stderr).toContain('the connection is refused: nothing listens on this port');
    const listed = await railproof(['runs', runs]);
    expect(listed.stdout).toBe(`No records in ${runs}.\n`);
    expect((await railproof(['analyse', trace])).stderr).toMatch(/is no record: it has no run\.json/);
  });
});

describe.skipIf(noSmallDisks)('a disk that has no room for a trace', () => {
  it.each([
    // Four are free at first, for a moment.
    ['size=4400k', 'less than 4 MiB are free there'],
    // The disk, the folder of the records, the record, its header, its journal and the reserve.
    ['size=64m,nr_inodes=9', 'ENOSPC'],
  ])('does not disturb the run, and says once that there is no trace: %s', async (options, why) => {
    const { status, stderr, kept } = await onSmallDisk(folder, options, (disk) => [
      ...['run', 'real-limit', '--bench', 'fixtures/benches/nursery.yaml', ...module],
      ...['--runs', join(disk, 'runs'), '--trace', '--yes'],
    ]);
    expect(stderr.split('the trace is given up')).toHaveLength(2);
    expect(stderr).toContain(why);
    expect(stderr.trimEnd().split('\n').at(-1)).toBe(off);
    expect(status).toBe(0);
    const record = onlyIn(join(kept, 'runs'));
    expect(existsSync(join(record, 'trace'))).toBe(false);
    expect((await railproof(['analyse', record, '--strict'])).status).toBe(0);
  });
});

/** There is no record, neither then nor now. */
async function replayedInVain(trace: string): Promise<{ status: number | null; stderr: string }> {
  const runs = fresh();
  const ended = await railproof([
    ...['run', join(trace, 'procedure.yaml'), '--bench', join(trace, 'replay.yaml')],
    ...['--module', join(trace, 'module-K1.yaml'), '--runs', runs],
  ]);
  expect(readdirSync(runs)).toEqual([]);
  return ended;
}

function hasSocat(): boolean {
  try {
    execFileSync('socat', ['-V'], { stdio: 'ignore' });
    return true;
  } catch {
    return false;
  }
}
