import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { Clock } from '../clock/clock.js';
import { Audience, type Times, type Told } from './audience.js';
import { Entry, type Random } from './entry.js';
import type { PageFiles } from './page-files.js';
import { type Asked, Questions } from './questions.js';
import { answerRequest, type Desk } from './requests.js';
import { LiveViewError } from './view-error.js';
import type { ViewState } from './view-state.js';

/** A run that can be looked at, and answered, from pages on this machine. */
export interface LiveView {
  /** Opens one page, once. */
  readonly address: string;
  readonly state: ViewState;
  show(message: Told): void;
  /** Settled, before long, once all that was shown has left this process for every page that reads. */
  flushed(): Promise<void>;
  /** Settled with the answer that a page gives. @throws the signal's reason once it takes the question away. */
  ask(question: Asked, signal: AbortSignal): Promise<string>;
  /** Waits, though not for long, until every page has all of it, and lets go of them. */
  close(): Promise<void>;
}

export interface ViewOptions {
  /** What is known before the run begins. */
  readonly state: ViewState;
  readonly files: PageFiles;
  /** The machine's own. */
  readonly clock: Clock;
  readonly random: Random;
  /** Those of the run, which go on also while nothing is read. */
  readonly times?: () => Times | undefined;
  /** A page wishes the run to end. */
  readonly stop: () => void;
  /** The address was opened and shown again elsewhere: this is a new one. */
  readonly addressed: (address: string) => void;
  /** 0 lets the system choose. */
  readonly port?: number;
  readonly patience?: Patience;
}

const host = '127.0.0.1';
/** How long what comes over a socket, and who reads there, is waited for; in milliseconds. */
export interface Patience {
  /** Until the head of a request is there, and all of it. */
  readonly head: number;
  readonly request: number;
  readonly idle: number;
  /** How often that is looked at. */
  readonly look: number;
  /** Until every page has read the last of it. */
  readonly goodbye: number;
}

const usualPatience: Patience = { head: 5_000, request: 10_000, idle: 5_000, look: 1_000, goodbye: 2_000 };
/** In milliseconds. */
const beatEvery = 1_000;
/** More than pages need; whatever comes beyond it is not let in. */
const mostConnections = 256;

/**
 * Serves the live view of a run on loopback. Whatever comes over its sockets is bounded in size and time, and none of
 * it can break or delay the run.
 * @throws LiveViewError
 */
export async function openLiveView(options: ViewOptions): Promise<LiveView> {
  const { clock, files, random, stop, patience = usualPatience } = options;
  const entry = new Entry(random);
  const audience = new Audience(options.state, clock);
  const questions = new Questions((question) => {
    audience.show(question === undefined ? { kind: 'question' } : { kind: 'question', question });
  });
  const server = createServer({
    headersTimeout: patience.head,
    requestTimeout: patience.request,
    keepAliveTimeout: patience.idle,
    connectionsCheckingInterval: patience.look,
  });
  server.maxConnections = mostConnections;
  const port = await listening(server, options.port ?? 0);
  const addressOf = (token: string): string => `http://${host}:${port}/?token=${token}`;
  serve(server, {
    ...{ port, entry, files, audience, questions, stop },
    tellAfresh: (token) => {
      options.addressed(addressOf(token));
    },
  });
  const beat = setInterval(() => {
    audience.beat(options.times?.());
  }, beatEvery);
  return {
    address: addressOf(entry.token),
    get state() {
      return audience.state;
    },
    show: (message) => {
      audience.show(message);
    },
    flushed: () => within(patience.goodbye, audience.flushed()),
    ask: (question, signal) => questions.ask(question, signal),
    close: async () => {
      clearInterval(beat);
      const closed = new Promise((resolve) => server.close(resolve));
      await within(patience.goodbye, audience.end());
      server.closeAllConnections();
      await closed;
    },
  };
}

async function listening(server: Server, port: number): Promise<number> {
  await new Promise<void>((resolve, reject) => {
    server.once('error', (error) => {
      reject(new LiveViewError(error));
    });
    server.listen(port, host, resolve);
  });
  return (server.address() as AddressInfo).port;
}

/** What goes wrong with a socket, or with what came over it, ends that socket and nothing else. */
function serve(server: Server, desk: Desk): void {
  server.on('error', () => undefined);
  server.on('clientError', (_error, socket) => socket.destroy());
  server.on('request', (request, response) => {
    request.on('error', () => undefined);
    response.on('error', () => undefined);
    answerRequest(request, response, desk).catch(() => response.destroy());
  });
}

async function within(milliseconds: number, what: Promise<unknown>): Promise<void> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise((resolve) => {
    timer = setTimeout(resolve, milliseconds);
  });
  await Promise.race([what, late]);
  clearTimeout(timer);
}
