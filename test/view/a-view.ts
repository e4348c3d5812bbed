import { randomBytes } from 'node:crypto';
import { once } from 'node:events';
import { type IncomingMessage, request } from 'node:http';
import { vi } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import type { PageFiles } from '../../src/view/page-files.js';
import { type LiveView, openLiveView, type ViewOptions } from '../../src/view/server.js';
import { applied, type ViewMessage, type ViewState } from '../../src/view/view-state.js';
import { before } from './page/viewed.js';

/** Few, as what is served of a page is not what these tests are about. */
export const files: PageFiles = new Map([
  ['/', { type: 'text/html; charset=utf-8', body: Buffer.from('<h1>K1</h1>') }],
  ['/page/main.js', { type: 'text/javascript; charset=utf-8', body: Buffer.from('listen()') }],
]);

export interface AView {
  readonly view: LiveView;
  readonly port: number;
  readonly stop: ReturnType<typeof vi.fn<() => void>>;
  /** Those that were made afresh. */
  readonly addresses: readonly string[];
  /** Opens its address; the cookie that a page has from it. */
  enter(address?: string): Promise<string>;
}

/** The view of a run, in which the test is the runner. */
export async function aView(options: Partial<ViewOptions> = {}): Promise<AView> {
  const stop = vi.fn<() => void>();
  const addresses: string[] = [];
  const view = await openLiveView({
    ...{ state: before, files, clock: realClock, random: randomBytes, stop },
    addressed: (address) => addresses.push(address),
    ...options,
  });
  const port = Number(new URL(view.address).port);
  return {
    ...{ view, port, stop, addresses },
    async enter(address = view.address) {
      const { headers } = await send(port, address.slice(address.indexOf('/?')));
      return headers['set-cookie']?.[0]?.split(';')[0] ?? 'none';
    },
  };
}

export interface Sent {
  readonly method?: string;
  readonly headers?: Readonly<Record<string, string>>;
  readonly body?: string;
}

export interface Answer {
  readonly status: number | undefined;
  readonly headers: IncomingMessage['headers'];
  readonly text: string;
}

/** One request on a connection of its own, with whatever headers. */
export async function send(port: number, path: string, sent: Sent = {}): Promise<Answer> {
  const { method = 'GET', headers = {}, body } = sent;
  const asking = request({ host: '127.0.0.1', port, path, method, headers, agent: false });
  asking.end(body);
  const [response] = (await once(asking, 'response')) as [IncomingMessage];
  let text = '';
  for await (const chunk of response.setEncoding('utf8')) text += String(chunk);
  return { status: response.statusCode, headers: response.headers, text };
}

/** What only a page of this view sends. */
export function post(
  view: Pick<AView, 'port'>,
  cookie: string,
  path: string,
  body: unknown,
): Promise<Answer> {
  return send(view.port, path, {
    method: 'POST',
    headers: { cookie, origin: `http://127.0.0.1:${view.port}`, 'content-type': 'application/json' },
    body: JSON.stringify(body),
  });
}

export interface Follower {
  readonly messages: readonly ViewMessage[];
  /** What a page would know by now. */
  readonly state: ViewState | undefined;
  /** Settled with the first message, from the beginning, of which that is so. */
  heard(so: (message: ViewMessage) => boolean): Promise<ViewMessage>;
  /** Settled once the runner has ended the stream, or it broke. */
  readonly over: Promise<unknown>;
  /** As a page that is killed, or a machine that loses its network. */
  breakOff(): void;
}

/** Reads the stream as a page does, if it needs no browser for it. */
export async function follow(port: number, cookie: string): Promise<Follower> {
  const asking = request({ host: '127.0.0.1', port, path: '/events', headers: { cookie }, agent: false });
  asking.on('error', () => undefined);
  asking.end();
  const [response] = (await once(asking, 'response')) as [IncomingMessage];
  if (response.statusCode !== 200) throw new Error(`the stream was refused: ${response.statusCode}`);
  const messages: ViewMessage[] = [];
  const listeners = new Set<(message: ViewMessage) => void>();
  let state: ViewState | undefined;
  let rest = '';
  response.on('error', () => undefined);
  response.setEncoding('utf8').on('data', (more: string) => {
    const events = (rest + more).split('\n\n');
    rest = events.pop() ?? '';
    for (const event of events) {
      if (!event.startsWith('data: ')) continue;
      const message = JSON.parse(event.slice('data: '.length)) as ViewMessage;
      messages.push(message);
      state = message.kind === 'everything' ? message.state : state && applied(state, message);
      for (const listener of listeners) listener(message);
    }
  });
  return {
    messages,
    get state() {
      return state;
    },
    heard: (so) =>
      new Promise((resolve) => {
        const known = messages.find(so);
        if (known !== undefined) resolve(known);
        else
          listeners.add((message) => {
            if (so(message)) resolve(message);
          });
      }),
    over: once(response, 'close'),
    breakOff: () => {
      response.destroy();
    },
  };
}

/** As it comes over a line: what JSON has no word for is left out. */
export function asSent<Value>(value: Value): Value {
  return JSON.parse(JSON.stringify(value)) as Value;
}
