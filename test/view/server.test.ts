import { once } from 'node:events';
import { connect, type Socket } from 'node:net';
import { afterEach, describe, expect, it } from 'vitest';
import type { Told } from '../../src/view/audience.js';
import type { Patience } from '../../src/view/server.js';
import { LiveViewError } from '../../src/view/view-error.js';
import type { ViewedEnd } from '../../src/view/view-state.js';
import { until } from '../whole/at-the-bench.js';
import { asSent, type AView, aView, follow, post, send } from './a-view.js';
import { aBusyRunner } from './busy-runner.js';
import { patience } from '../../src/view/page/silence.js';
import { before, point } from './page/viewed.js';

const ended: ViewedEnd = {
  how: 'completed',
  reason: null,
  answer: ['Load it with up to 3.18 A.'],
  outcome: 'conforms',
  safety: [{ what: 'load', confirmed: true, text: 'The load is off; it was read back.' }],
  record: 'runs/x',
  report: 'runs/x/report.html',
};
const short: Patience = { head: 200, request: 400, idle: 200, look: 50, goodbye: 100 };
const open: AView[] = [];

afterEach(async () => {
  await Promise.all(open.splice(0).map(({ view }) => view.close()));
});

async function seen(options: Parameters<typeof aView>[0] = {}) {
  const made = await aView(options);
  open.push(made);
  return { ...made, cookie: await made.enter() };
}

/** Bytes as they are, from somebody who is no browser. */
async function raw(port: number, bytes: string): Promise<Socket> {
  const socket = connect(port, '127.0.0.1').on('error', () => undefined);
  await once(socket, 'connect');
  socket.write(bytes);
  return socket;
}

/** Broken or ended. */
async function closed(socket: Socket): Promise<void> {
  if (!socket.closed) await new Promise((resolve) => socket.once('close', resolve));
}

describe('those who follow a run', () => {
  it('know the same, whenever they came, and that is what the runner holds', async () => {
    const { view, port, cookie } = await seen();
    const early = await follow(port, cookie);
    const question = { id: 7, heading: 'To do', text: 'Unplug K1.', answer: 'done' } as const;
    const first: readonly Told[] = [
      { kind: 'caution', caution: { name: 'mains', text: 'Look.', by: 'operator' } },
      { kind: 'step', step: 1, elapsed: 1, remaining: 25 },
      { kind: 'question', question },
      { kind: 'notice', notice: { t: 1.5, text: 'found again <b>' } },
    ];
    const then: readonly Told[] = [
      { kind: 'question' },
      { kind: 'input', input: 'on' },
      { kind: 'step', step: 2, elapsed: 2, remaining: 22 },
      { kind: 'figures', figures: { voltage: 15.2, current: null }, elapsed: 3, remaining: 21 },
      { kind: 'point', point: point(1) },
      { kind: 'stopping' },
      { kind: 'input', input: 'off' },
    ];
    for (const message of first) view.show(message);
    await early.heard(({ kind }) => kind === 'notice');
    const late = await follow(port, cookie);
    await late.heard(({ kind }) => kind === 'everything');
    expect(late.state).toEqual(asSent(view.state));
    for (const message of then) view.show(message);
    view.show({ kind: 'ended', ended });
    for (const page of [early, late]) {
      await page.heard(({ kind }) => kind === 'ended');
      expect(page.state).toEqual(asSent(view.state));
      expect(page.messages[0]).toMatchObject({ kind: 'everything' });
    }
    expect(view.state).toMatchObject({ ended, input: 'off', stopping: true, question: undefined });
  });

  it('are told no more figures than can be read, and always the newest', async () => {
    const { view, port, cookie } = await seen();
    const page = await follow(port, cookie);
    await page.heard(({ kind }) => kind === 'everything');
    for (let voltage = 1; voltage <= 5000; voltage += 1) {
      view.show({ kind: 'figures', figures: { voltage }, elapsed: voltage, remaining: 0 });
    }
    await page.heard((message) => message.kind === 'figures' && message.figures.voltage === 5000);
    const told = page.messages.flatMap((each) => (each.kind === 'figures' ? [each.elapsed] : []));
    expect(told[0]).toBe(1);
    expect(told).toEqual(told.toSorted((one, other) => one - other));
    // The first at once, the last when it was time; few between, as all of them came in a moment.
    expect(told.length).toBeLessThan(100);
  });

  it('have figures of a step that is over taken for none of the next', async () => {
    const { view, port, cookie } = await seen();
    const page = await follow(port, cookie);
    for (const voltage of [15.2, 15.1]) {
      view.show({ kind: 'figures', figures: { voltage }, elapsed: 1, remaining: 25 });
    }
    view.show({ kind: 'step', step: 2, elapsed: 2, remaining: 22 });
    view.show({ kind: 'ended', ended });
    await page.heard(({ kind }) => kind === 'ended');
    expect(page.state).toMatchObject({ step: 2, elapsed: 2, figures: {} });
    expect(view.state.figures).toEqual({});
  });

  it('hear a beat each second, with the time that goes on though nothing is read', async () => {
    let elapsed = 0;
    const { view, port, cookie } = await seen({
      times: () => ({ elapsed: (elapsed += 1), remaining: 26 - elapsed }),
    });
    const page = await follow(port, cookie);
    await page.heard((message) => message.kind === 'beat' && (message.elapsed ?? 0) >= 2);
    const { state } = page;
    expect(state?.elapsed).toBeGreaterThanOrEqual(2);
    expect(state?.remaining).toBe(26 - (state?.elapsed ?? 0));

    view.show({ kind: 'ended', ended });
    await page.heard((message) => message.kind === 'beat' && message.elapsed === undefined);
    expect(page.state).toEqual(asSent(view.state));
  });

  it('know how the bench was left before the record keeps the runner silent for longer than they would wait', async () => {
    const runner = await aBusyRunner(before);
    const { port: at, search } = new URL(runner.address);
    const { headers } = await send(Number(at), `/${search}`);
    const page = await follow(Number(at), headers['set-cookie']?.[0]?.split(';')[0] ?? 'none');
    await page.heard(({ kind }) => kind === 'everything');
    runner.workOut(patience + 1, ended);
    await page.heard(({ kind }) => kind === 'working-out');
    const began = performance.now();
    expect(page.state).toMatchObject({ workingOut: { safety: ended.safety, record: 'runs/x' } });
    expect(page.state?.ended).toBeUndefined();
    await page.heard(({ kind }) => kind === 'ended');
    // The first was on its way before the silence began.
    expect((performance.now() - began) / 1000).toBeGreaterThan(patience);
    expect(page.state).toMatchObject({ ended, workingOut: undefined });
    await page.over;
  });

  it('keep nobody waiting for long where one of them reads nothing', async () => {
    const { view, port, cookie } = await seen({ patience: short });
    const head = ['GET /events HTTP/1.1', `host: 127.0.0.1:${port}`, `cookie: ${cookie}`, '', ''];
    const stuck = await raw(port, head.join('\r\n'));
    await once(stuck, 'readable');
    const text = 'x'.repeat(2 ** 16);
    let waited = 0;
    // Until its machine takes no more for it, and so much waits here that the bound on waiting is what ends it.
    for (let t = 0; t < 1000 && waited < 0.9 * short.goodbye; t += 1) {
      view.show({ kind: 'notice', notice: { t, text } });
      const began = performance.now();
      await view.flushed();
      waited = performance.now() - began;
    }
    expect(waited).toBeGreaterThanOrEqual(0.9 * short.goodbye);
    expect(waited).toBeLessThan(20 * short.goodbye);
    stuck.destroy();
  });

  it('are not disturbed by one that breaks off, nor is the run', async () => {
    const { view, port, cookie } = await seen();
    const [one, other] = [await follow(port, cookie), await follow(port, cookie)];
    one.breakOff();
    view.show({ kind: 'input', input: 'on' });
    await other.heard(({ kind }) => kind === 'input');
    expect(view.state.input).toBe('on');
  });
});

describe('the end of a view', () => {
  it('reaches every page, and frees the port', async () => {
    const { view, port, cookie } = await seen();
    const pages = await Promise.all(Array.from({ length: 4 }, () => follow(port, cookie)));
    view.show({ kind: 'ended', ended });
    view.show({ kind: 'input', input: 'on' });
    await view.close();
    for (const page of pages) {
      await page.over;
      expect(page.state).toEqual(asSent({ ...before, ended }));
    }
    await expect(send(port, '/')).rejects.toMatchObject({ code: 'ECONNREFUSED' });
  });

  it('does not wait for pages that do not read, nor for who asks for nothing', async () => {
    const { view, port, cookie } = await seen({ patience: short });
    const stuck = await raw(
      port,
      `GET /events HTTP/1.1\r\nhost: 127.0.0.1:${port}\r\ncookie: ${cookie}\r\n\r\n`,
    );
    const [head] = (await once(stuck, 'data')) as [Buffer];
    expect(head.toString()).toMatch(/^HTTP\/1\.1 200 OK/);
    stuck.pause();
    const idle = await raw(port, '');
    const reads = await follow(port, cookie);
    const text = 'x'.repeat(1000);
    // More than the machine holds for it: 16 MB.
    for (let count = 0; count < 16_000; count += 1) {
      view.show({ kind: 'notice', notice: { t: count, text } });
      if (count % 200 === 0) await reads.heard((each) => each.kind === 'notice' && each.notice.t >= count);
    }
    view.show({ kind: 'ended', ended });
    await view.close();
    await reads.over;
    expect(reads.state?.ended).toEqual(ended);
    expect(reads.messages.filter(({ kind }) => kind === 'notice')).toHaveLength(16_000);
    stuck.resume();
    await Promise.all([stuck, idle].map(closed));
  });
});

describe('over the sockets of a view', () => {
  it('whoever sends too slowly is let go, and the question stays open for others', async () => {
    const { view, port, cookie } = await seen({ patience: short });
    const asked = view.ask(
      { heading: 'To do', text: 'Unplug.', answer: 'done' },
      new AbortController().signal,
    );
    const halfHead = await raw(port, 'GET / HTTP/1.1\r\nhost: ');
    const halfBody = await raw(
      port,
      [
        'POST /answer HTTP/1.1',
        `host: 127.0.0.1:${port}`,
        `origin: http://127.0.0.1:${port}`,
        `cookie: ${cookie}`,
        'content-type: application/json',
        'content-length: 30',
        '',
        '{"question":1,',
      ].join('\r\n'),
    );
    await Promise.all([halfHead, halfBody].map((socket) => closed(socket.resume())));
    expect((await post({ port }, cookie, '/answer', { question: 1, answer: 'done' })).status).toBe(204);
    expect(await asked).toBe('done');
  });

  it.each([
    'no request at all\r\n\r\n',
    '\u0016\u0003\u0001\u0002\u0000\u0001\u0000',
    'GET / HTTP/1.1\r\n\r\n',
    'GET /\u0000 HTTP/1.1\r\nhost: x\r\n\r\n',
    'POST /stop HTTP/1.1\r\nhost: x\r\ncontent-length: -1\r\n\r\n',
    'POST /stop HTTP/1.1\r\nhost: x\r\ntransfer-encoding: chunked\r\ncontent-length: 4\r\n\r\n',
    `GET / HTTP/1.1\r\nhost: x\r\na: ${'a'.repeat(100_000)}\r\n\r\n`,
    'CONNECT 127.0.0.1:22 HTTP/1.1\r\nhost: x\r\n\r\n',
    'GET / HTTP/1.1\r\nhost: x\r\nconnection: upgrade\r\nupgrade: websocket\r\n\r\n',
  ])('nothing that is wrong does any harm, or learns anything (%#)', async (bytes) => {
    const { port, cookie, stop } = await seen({ patience: short });
    const socket = await raw(port, bytes);
    let learned = '';
    socket.on('data', (more: Buffer) => {
      learned += more.toString();
    });
    await closed(socket);
    expect(learned).not.toMatch(/^HTTP\/1\.1 [123]|K1/m);
    expect(stop).not.toHaveBeenCalled();
    expect((await send(port, '/', { headers: { cookie } })).status).toBe(200);
  });

  it('nobody comes from another address of this machine', async () => {
    const { port } = await seen();
    const elsewhere = connect(port, '127.0.0.2');
    const [error] = (await once(elsewhere, 'error')) as [NodeJS.ErrnoException];
    expect(error.code).toBe('ECONNREFUSED');
  });

  it('a crowd finds the door shut, and those inside go on', async () => {
    const { view, port, cookie } = await seen();
    const page = await follow(port, cookie);
    const crowd = Array.from({ length: 300 }, () => connect(port, '127.0.0.1').on('error', () => undefined));
    await until(() => crowd.some(({ closed }) => closed));
    view.show({ kind: 'input', input: 'on' });
    await page.heard(({ kind }) => kind === 'input');
    for (const socket of crowd) socket.destroy();
  });
});

it('a port that is taken is said to be, with what can be done without a view', async () => {
  const { port } = await seen();
  const error: unknown = await aView({ port }).catch((thrown: unknown) => thrown);
  expect(error).toBeInstanceOf(LiveViewError);
  expect(error).toMatchObject({
    code: 'LIVE_VIEW',
    exitCode: 74,
    message: expect.stringContaining('EADDRINUSE') as string,
    advice: expect.stringContaining('run it without --view') as string,
  });
});
