import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import type { ViewMessage } from '../../src/view/view-state.js';
import { follow, type Follower, post, send } from '../view/a-view.js';
import { askLoad, journalOf, until } from './at-the-bench.js';
import { ended, type Ended, railproof, start } from './railproof.js';
import { serve, type Served } from './served.js';

vi.setConfig({ testTimeout: 120_000, hookTimeout: 120_000 });

const procedure = `railproof: procedure 1
name: watched
title: A look at K1
purpose: Shows what a page shows.
wiring: [Load to the module, Nothing else connected]
cautions: [hot-surfaces]
steps:
  - operator: { name: ambient, ask: 'How warm is it at the bench?', answer: temperature }
  - operator: { name: fan, ask: 'Turn the fan away from the module.', answer: done }
  - open-circuit: { for: 1 s }
  - load-ramp: { from: 0 A, to: 100 % of rated-current, points: 801, dwell: 50 ms, readings: 2 }
`;
const folder = mkdtempSync(join(tmpdir(), 'railproof-view-'));
const file = join(folder, 'watched.yaml');
let served: Served;

beforeAll(async () => {
  writeFileSync(file, procedure);
  served = await serve('fixtures/benches/nursery.yaml', join(folder, 'bench.yaml'), 'tcp');
});

afterAll(async () => {
  await served.close();
  rmSync(folder, { recursive: true, force: true });
});

interface Watched {
  readonly child: ChildProcess;
  readonly end: Promise<Ended>;
  readonly address: URL;
  readonly port: number;
  readonly runs: string;
  talk(): string;
}

let count = 0;

/** `railproof run … --view` in a process of its own, without a terminal, and the address that it says. */
async function watched(what: readonly string[], ...options: readonly string[]): Promise<Watched> {
  const runs = join(folder, `runs-${(count += 1)}`);
  const module = ['--module', 'fixtures/modules/K1.yaml'];
  const child = start(['run', ...what, ...module, '--runs', runs, '--view', ...options]);
  const end = ended(child);
  let talk = '';
  child.stderr?.on('data', (more: string) => {
    talk += more;
  });
  const said = (): string | undefined => /live view: (\S+) \(opens once/.exec(talk)?.[1];
  await until(() => said() !== undefined || child.exitCode !== null);
  const opened = said();
  if (opened === undefined) throw new Error(`no view was opened: ${talk}`);
  const address = new URL(opened);
  return { child, end, address, port: Number(address.port), runs, talk: () => talk };
}

async function entered({ address, port }: Watched): Promise<string> {
  const { status, headers } = await send(port, `/${address.search}`);
  expect(status).toBe(303);
  return headers['set-cookie']?.[0]?.split(';')[0] ?? 'none';
}

const bench = (): readonly string[] => [file, '--bench', served.bench];

/** Waits for a question, and answers it; the status that the answer got. */
async function answer(run: Watched, cookie: string, page: Follower, heading: RegExp, given: string) {
  await until(() => heading.test(page.state?.question?.heading ?? ''));
  const { status } = await post(run, cookie, '/answer', {
    question: page.state?.question?.id,
    answer: given,
  });
  return status;
}

/** The wiring, and what the mains, the heat and a change of this module ask for. */
const cautions = [/wired so/, /^Mains/, /^Hot surfaces/, /^Earth link removed/];
const addresses: URL[] = [];

const countOf = (page: Follower, kind: ViewMessage['kind']): number =>
  page.messages.filter((message) => message.kind === kind).length;

describe('a run without a terminal that is watched', () => {
  it('is answered, followed and stopped from pages, and then the load is off', async () => {
    const run = await watched(bench());
    addresses.push(run.address);
    for (const path of ['/', '/events', '/?token=wrong', '/page/main.js']) {
      const { status, text } = await send(run.port, path);
      expect([status, text]).toEqual([403, 'Open the address that the terminal shows; it opens once.\n']);
    }
    const cookie = await entered(run);
    const page = await follow(run.port, cookie);
    for (const caution of cautions) expect(await answer(run, cookie, page, caution, 'yes')).toBe(204);
    expect(await askLoad(served.bench)).toBe('0');

    // What is no temperature is asked again, as at a terminal.
    expect(await answer(run, cookie, page, /ambient$/, 'lukewarm')).toBe(204);
    await until(() => countOf(page, 'notice') > 0);
    expect(page.state?.notices.at(-1)?.text).toContain("found 'lukewarm'");
    expect(await answer(run, cookie, page, /ambient$/, '23.5 degC')).toBe(204);
    expect(await answer(run, cookie, page, /^To do: fan$/, 'done')).toBe(204);
    expect(await post(run, cookie, '/answer', { question: 1, answer: 'yes' })).toMatchObject({ status: 409 });

    await until(() => countOf(page, 'point') >= 3);
    expect(page.state).toMatchObject({ input: 'on', step: 4 });
    expect(page.state?.points.at(-1)).toMatchObject({ phase: 'ramp', outcome: 'held' });
    expect(page.state?.points.at(-1)?.voltage).toBeCloseTo(15.2, 1);
    expect(await askLoad(served.bench)).toBe('1');

    const killed = await onlooker(run.port, cookie);
    killed.kill('SIGKILL');
    const before = countOf(page, 'point');
    await until(() => countOf(page, 'point') >= before + 3);

    expect((await post(run, cookie, '/stop', {})).status).toBe(202);
    await page.heard(({ kind }) => kind === 'ended');
    expect(await askLoad(served.bench)).toBe('0');
    expect(page.state).toMatchObject({ input: 'off', stopping: true, question: undefined });
    const left = {
      how: 'stopped',
      reason: 'stopped in the live view',
      safety: [{ confirmed: true, text: 'The load is off; it was read back.' }],
    };
    expect(page.state?.ended).toMatchObject(left);
    // How the bench was left is told before what was read is worked out.
    expect(page.messages.filter(({ kind }) => kind === 'working-out' || kind === 'ended')).toMatchObject([
      { kind: 'working-out', left },
      { kind: 'ended', ended: left },
    ]);
    const { report = null } = page.state?.ended ?? {};
    expect(readFileSync(report ?? '', 'utf8')).toContain('K1');
    const { status, stderr } = await run.end;
    expect(status).toBe(3);
    expect(stderr).toContain('Answered in the live view: 23.5 degC');
    expect(stderr).toMatch(/The load is off; it was read back\.\n$/);
    expect(journalOf(run.runs).match(/"event":"caution".*"by":"operator"/g)).toHaveLength(cautions.length);
    await page.over;
  });

  it('ends with nothing switched on where a page says no, or is told to end by who started it', async () => {
    const [refused, told] = [await watched(bench()), await watched(bench(), '--yes')];
    addresses.push(refused.address, told.address);
    const cookies = [await entered(refused), await entered(told)] as const;
    const pages = [await follow(refused.port, cookies[0]), await follow(told.port, cookies[1])] as const;
    expect(await answer(refused, cookies[0], pages[0], /wired so/, 'no')).toBe(204);
    await until(() => pages[1].state?.question?.heading === 'To read: ambient');
    told.child.kill('SIGTERM');
    for (const [page, reason] of [
      [pages[0], 'the wiring was not acknowledged'],
      [pages[1], 'stopped by a request to end (SIGTERM)'],
    ] as const) {
      await page.heard(({ kind }) => kind === 'ended');
      expect(page.state?.ended).toMatchObject({ how: 'stopped', reason, safety: [{ confirmed: true }] });
      expect(page.messages.flatMap((each) => (each.kind === 'input' ? [each.input] : []))).not.toContain(
        'on',
      );
    }
    expect([(await refused.end).status, (await told.end).status]).toEqual([3, 3]);
    expect(await askLoad(served.bench)).toBe('0');
  });
});

describe('a run that nobody looks at', () => {
  const short = join(folder, 'short.yaml');
  const simulated = [short, '--bench', 'fixtures/benches/nursery.yaml'];

  it('comes to what it comes to without a view, to the last digit', async () => {
    writeFileSync(
      short,
      procedure
        .replace(/ {2}- operator.*\n/g, '')
        .replace('points: 801, dwell: 50 ms', 'points: 5, dwell: 200 ms'),
    );
    const run = await watched(simulated, '--json');
    addresses.push(run.address);
    const module = ['--module', 'fixtures/modules/K1.yaml'];
    const plain = await railproof([
      'run',
      ...simulated,
      ...module,
      '--runs',
      join(folder, 'plain'),
      '--json',
    ]);
    const { status, stdout, stderr } = await run.end;
    expect(stderr).toContain('so that they can be watched');
    expect(status).toBe(plain.status);
    const { findings } = JSON.parse(stdout) as { readonly findings: readonly object[] };
    expect(findings).toEqual((JSON.parse(plain.stdout) as { readonly findings: readonly object[] }).findings);
    expect(findings.length).toBeGreaterThan(2);
  });

  it('has another port and another token each time', () => {
    expect(addresses).toHaveLength(4);
    for (const part of ['port', 'search'] as const) {
      expect(new Set(addresses.map((address) => address[part])).size, part).toBe(addresses.length);
    }
  });
});

/** Somebody else who follows the run, in a process of its own, once it has heard of it. */
async function onlooker(port: number, cookie: string): Promise<ChildProcess> {
  const reads = `fetch('http://127.0.0.1:${port}/events', { headers: { cookie: '${cookie}' } }).then(async ({ body }) => {
    for await (const _ of body) console.log('heard');
  })`;
  const child = spawn(process.execPath, ['-e', reads], { stdio: ['ignore', 'pipe', 'ignore'] });
  await once(child.stdout, 'data');
  return child;
}
