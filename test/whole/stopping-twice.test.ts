import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import type { ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { type AddressInfo, createServer, type Socket } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { performance } from 'node:perf_hooks';
import { afterAll, describe, expect, it, onTestFinished, vi } from 'vitest';
import { askLoad, journalOf, until } from './at-the-bench.js';
import { muffler } from './muffler.js';
import { ended, start } from './railproof.js';
import { serve } from './served.js';

vi.setConfig({ testTimeout: 60_000 });

const folder = mkdtempSync(join(tmpdir(), 'railproof-twice-'));
let count = 0;

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

const brisk = join(folder, 'brisk.yaml');
writeFileSync(
  brisk,
  'railproof: procedure 1\nname: brisk\ntitle: Brisk\nsteps:\n  - load-ramp: { from: 1 A, to: 3 A, points: 200, dwell: 20 ms }\n',
);

/** The shipped driver with more patience, so that nothing ends of itself before it is asked for twice. */
function patient(name: string, silent: 'load' | 'meter'): string {
  const path = join(folder, `${name}-${count}.yaml`);
  const shipped = readFileSync(`drivers/${name}.yaml`, 'utf8');
  writeFileSync(path, shipped.replace(/timeout: \d s/, silent === 'load' ? 'timeout: 2 s' : 'timeout: 20 s'));
  return path;
}

/** A run with the load at work, and somebody who can make one instrument fall silent. */
async function atWork(lines: 'tcp' | 'pty', silent: 'load' | 'meter') {
  count += 1;
  const served = await serve('fixtures/benches/nursery.yaml', join(folder, `served-${count}.yaml`), 'tcp');
  onTestFinished(() => served.close());
  let text = readFileSync(served.bench, 'utf8');
  const port = Number(new RegExp(`${silent}:.*tcp://127\\.0\\.0\\.1:(\\d+)`).exec(text)?.[1]);
  const between = await muffler(port, lines === 'tcp' ? 'tcp' : { pty: join(folder, `pty-${count}`) });
  text = text.replace(`tcp://127.0.0.1:${port}`, between.address);
  text = text.replace(/driver: (\S+),/g, (_, name: string) => `driver: ${patient(name, silent)},`);
  const bench = join(folder, `bench-${count}.yaml`);
  writeFileSync(bench, text);
  const runs = join(folder, `runs-${count}`);
  const child = start([
    ...['run', brisk, '--bench', bench, '--module', 'fixtures/modules/K1.yaml', '--runs', runs, '--yes'],
  ]);
  onTestFinished(() => void child.kill('SIGKILL'));
  const talk = listen(child);
  const end = ended(child);
  await until(() => /"phase":"ramp"/.test(journalOf(runs)));
  expect(await askLoad(served.bench)).toBe('1');
  await between.mute();
  return { child, end, talk, runs, isOn: () => askLoad(served.bench) };
}

function listen(child: ChildProcess): () => string {
  let talk = '';
  child.stderr?.on('data', (more: Buffer) => {
    talk += more.toString();
  });
  return () => talk;
}

/** The first wish is answered in words, then comes the second; the seconds from there to the load off. */
async function stopTwice(
  { child, talk, isOn }: Awaited<ReturnType<typeof atWork>>,
  [first, second]: readonly [NodeJS.Signals, NodeJS.Signals],
): Promise<number> {
  child.kill(first);
  await until(() => talk().includes('making the bench safe'));
  await new Promise((resolve) => setTimeout(resolve, 150));
  expect(await isOn()).toBe('1');
  const asked = performance.now();
  child.kill(second);
  await until(async () => (await isOn()) === '0', 5);
  return (performance.now() - asked) / 1000;
}

describe('whoever asks twice for an end does not wait for an answer that does not come', () => {
  it.each([
    ['tcp', 'SIGINT', 'SIGINT'],
    ['pty', 'SIGINT', 'SIGINT'],
    ['tcp', 'SIGTERM', 'SIGHUP'],
    ['tcp', 'SIGQUIT', 'SIGTERM'],
  ] as const)('of a meter that is silent on %s: %s, then %s', async (lines, first, second) => {
    const run = await atWork(lines, 'meter');
    const seconds = await stopTwice(run, [first, second]);
    // The question alone would wait for twenty.
    expect(seconds).toBeLessThan(3);
    const { status, stderr } = await run.end;
    expect(stderr).toContain('not waiting any longer');
    expect(stderr.trimEnd().split('\n').at(-1)).toBe('The load is off; it was read back.');
    expect(status).toBe(3);
    expect(journalOf(run.runs).trimEnd().split('\n').at(-1)).toContain('"event":"ended","how":"stopped"');
  });

  it.each(['tcp', 'pty'] as const)(
    'of a load that is silent on %s, and the last words say what to do by hand',
    async (lines) => {
      const run = await atWork(lines, 'load');
      const seconds = await stopTwice(run, ['SIGINT', 'SIGINT']);
      const { status, stderr } = await run.end;
      expect(seconds).toBeLessThan(1.5);
      expect(stderr).toContain('It could not be confirmed that the load is off');
      expect(stderr.trimEnd().split('\n').at(-1)).toMatch(/^THE LOAD MAY STILL BE ON\. /);
      expect(status).toBe(3);
    },
  );
});

/** An instrument that takes every message and says nothing for longer than anybody waits. */
async function lateAtTheDoor(): Promise<{ readonly address: string; heard: () => string }> {
  let heard = '';
  const sockets = new Set<Socket>();
  const server = createServer((socket) => {
    sockets.add(socket);
    socket.on('error', () => socket.destroy());
    socket.on('data', (bytes) => {
      heard += bytes.toString();
    });
  }).listen(0, '127.0.0.1');
  await once(server, 'listening');
  onTestFinished(() => {
    server.close();
    for (const socket of sockets) socket.destroy();
  });
  return { address: `tcp://127.0.0.1:${(server.address() as AddressInfo).port}`, heard: () => heard };
}

describe('whoever asks twice while the bench is still being opened', () => {
  it.each(['load', 'meter'] as const)(
    'does not wait for a %s that keeps its name back; nothing was switched on, and no record is begun',
    async (late) => {
      count += 1;
      const served = await serve('fixtures/benches/nursery.yaml', join(folder, `late-${count}.yaml`), 'tcp');
      onTestFinished(() => served.close());
      const door = await lateAtTheDoor();
      const text = readFileSync(served.bench, 'utf8')
        .replace(new RegExp(`(${late}:.*)tcp://127\\.0\\.0\\.1:\\d+`), `$1${door.address}`)
        .replace(/driver: (\S+),/g, (_, name: string) => `driver: ${patient(name, 'meter')},`);
      const bench = join(folder, `bench-${count}.yaml`);
      writeFileSync(bench, text);
      const runs = join(folder, `runs-${count}`);
      const child = start([
        ...['run', brisk, '--bench', bench, '--module', 'fixtures/modules/K1.yaml', '--runs', runs, '--yes'],
      ]);
      onTestFinished(() => void child.kill('SIGKILL'));
      const talk = listen(child);
      const end = ended(child);
      await until(() => door.heard().includes('*IDN?'));
      child.kill('SIGINT');
      await until(() => talk().includes('making the bench safe'));
      await new Promise((resolve) => setTimeout(resolve, 150));
      const asked = performance.now();
      child.kill('SIGINT');
      const { status, stdout, stderr } = await end;
      expect((performance.now() - asked) / 1000).toBeLessThan(3);
      expect(status).toBe(3);
      expect(stderr).toContain('not waiting any longer');
      expect(stderr.trimEnd().split('\n').at(-1)).toMatch(
        /^stopped with Ctrl-C\. This run switched nothing on,/,
      );
      expect(stdout).toBe('');
      expect(existsSync(runs)).toBe(false);
      expect(door.heard()).not.toMatch(/INP(UT)? (ON|1)/i);
      if (late === 'meter') expect(await askLoad(served.bench)).toBe('0');
    },
  );
});
