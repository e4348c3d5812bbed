import type { IncomingMessage, ServerResponse } from 'node:http';
import * as z from '../libraries/zod.js';
import type { Audience } from './audience.js';
import type { Entry } from './entry.js';
import type { PageFile, PageFiles } from './page-files.js';
import type { Questions } from './questions.js';
import { readBody } from './read-body.js';

/** What stands behind the server's door. */
export interface Desk {
  readonly port: number;
  readonly entry: Entry;
  readonly files: PageFiles;
  readonly audience: Audience;
  readonly questions: Questions;
  /** A page wishes the run to end. */
  readonly stop: () => void;
  /** The address that a token makes, for whoever looks at the terminal. */
  readonly tellAfresh: (token: string) => void;
}

const answerSchema = z.strictObject({ question: z.int(), answer: z.string().max(400) });

/** Nothing of what the page shows may come from elsewhere, go elsewhere, or be kept. */
const headers = {
  'cache-control': 'no-store',
  'content-security-policy':
    "default-src 'none'; script-src 'self'; style-src 'self'; img-src 'self'; connect-src 'self'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'",
  'cross-origin-opener-policy': 'same-origin',
  'cross-origin-resource-policy': 'same-origin',
  'referrer-policy': 'no-referrer',
  'x-content-type-options': 'nosniff',
};

const words = {
  unknown: 'Open the address that the terminal shows; it opens once.',
  spent:
    'This address was opened before, and opens once: the page is where that was done. To open it here, take the new address that the terminal shows.',
  usedUp:
    'This address was opened before, and opens once. The terminal shows no more new ones for this run: answer and stop it there, or on a page that is open.',
};

/** Answers one request. Whoever comes without the cookie, or under another name, learns nothing. */
export async function answerRequest(
  request: IncomingMessage,
  response: ServerResponse,
  desk: Desk,
): Promise<void> {
  for (const [name, value] of Object.entries(headers)) response.setHeader(name, value);
  const { host = '' } = request.headers;
  const [path = '', query] = (request.url ?? '').split('?');
  if (host !== `127.0.0.1:${desk.port}` && host !== `localhost:${desk.port}`) {
    refuse(response, 403, words.unknown);
    return;
  }
  const isKnown = sessionsOf(request, desk.port).some((session) => desk.entry.knows(session));
  const token = path === '/' ? new URLSearchParams(query).get('token') : null;
  if (token !== null && request.method === 'GET') {
    if (isKnown) home(response);
    else enter(token, response, desk);
    return;
  }
  if (!isKnown) {
    refuse(response, 403, words.unknown);
    return;
  }
  await answerKnown(request, response, path, desk);
}

function enter(token: string, response: ServerResponse, { entry, port, tellAfresh }: Desk): void {
  const shown = entry.show(token);
  switch (shown.kind) {
    case 'opened':
      response.setHeader(
        'set-cookie',
        `${cookieOf(port)}=${shown.session}; HttpOnly; SameSite=Strict; Path=/`,
      );
      home(response);
      return;
    case 'spent':
      if (shown.fresh !== undefined) tellAfresh(shown.fresh);
      refuse(response, 403, words.spent);
      return;
    case 'used-up':
      refuse(response, 403, words.usedUp);
      return;
    case 'unknown':
      refuse(response, 403, words.unknown);
  }
}

/** One thing that a page may ask for or send. */
interface Way {
  readonly method: 'GET' | 'POST';
  readonly answer: (request: IncomingMessage, response: ServerResponse, desk: Desk) => void | Promise<void>;
}

/** Those beside the files of the page, by their paths. */
const ways: ReadonlyMap<string, Way> = new Map<string, Way>([
  ['/events', { method: 'GET', answer: followed }],
  ['/answer', { method: 'POST', answer: answered }],
  ['/stop', { method: 'POST', answer: stopped }],
]);

const wrongMethod = { GET: 'This can only be read.', POST: 'This can only be sent to.' };

async function answerKnown(
  request: IncomingMessage,
  response: ServerResponse,
  path: string,
  desk: Desk,
): Promise<void> {
  const way = ways.get(path) ?? fileWay(desk.files.get(path));
  if (way === undefined) refuse(response, 404, 'There is no such page.');
  else if (request.method !== way.method)
    refuse(response, 405, wrongMethod[way.method], { allow: way.method });
  else if (way.method === 'GET' || isOurs(request, response)) await way.answer(request, response, desk);
}

function fileWay(file: PageFile | undefined): Way | undefined {
  if (file === undefined) return undefined;
  const { type, body } = file;
  return {
    method: 'GET',
    answer: (_, response) => void response.writeHead(200, { 'content-type': type }).end(body),
  };
}

/** Whether a page of this view sends it, as only such a page can: no form of another one sends JSON. */
function isOurs({ headers }: IncomingMessage, response: ServerResponse): boolean {
  const { origin, host = '', 'content-type': type = '' } = headers;
  if (origin !== `http://${host}`) refuse(response, 403, words.unknown);
  else if (!/^application\/json(;|$)/i.test(type)) refuse(response, 415, 'Only JSON is taken.');
  else return true;
  return false;
}

function followed(_: IncomingMessage, response: ServerResponse, { audience }: Desk): void {
  if (audience.isFull) refuse(response, 503, 'Too many pages follow this run.');
  else audience.join(response);
}

/** What else is sent with the wish changes nothing of it. */
function stopped(request: IncomingMessage, response: ServerResponse, { stop }: Desk): void {
  request.resume();
  stop();
  response.writeHead(202).end();
}

async function answered(
  request: IncomingMessage,
  response: ServerResponse,
  { questions }: Desk,
): Promise<void> {
  const body = await readBody(request);
  if (body.kind === 'gone') response.destroy();
  else if (body.kind === 'too-long') refuse(response, 413, 'That is longer than an answer may be.');
  else takeAnswer(body.text, response, questions);
}

function takeAnswer(text: string, response: ServerResponse, questions: Questions): void {
  const sent = answerSchema.safeParse(jsonOf(text));
  if (!sent.success) {
    refuse(response, 422, 'That is no answer: it names no question, or is longer than 400 characters.');
    return;
  }
  const taken = questions.answer(sent.data.question, sent.data.answer);
  switch (taken.kind) {
    case 'taken':
      response.writeHead(204).end();
      return;
    case 'not-open':
      refuse(response, 409, 'This is no longer asked.');
      return;
    case 'not-taken':
      refuse(response, 422, taken.why);
  }
}

function jsonOf(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}

function home(response: ServerResponse): void {
  response.writeHead(303, { location: '/' }).end();
}

/** The line is closed after it, so that nobody goes on sending what is not read. */
function refuse(
  response: ServerResponse,
  status: number,
  text: string,
  more: Readonly<Record<string, string>> = {},
): void {
  const type = 'text/plain; charset=utf-8';
  response.writeHead(status, { 'content-type': type, connection: 'close', ...more }).end(`${text}\n`);
}

/** Cookies know no ports: each view has a name of its own, or two that run at once would lock each other out. */
function cookieOf(port: number): string {
  return `railproof-${port}`;
}

function sessionsOf({ headers: { cookie = '' } }: IncomingMessage, port: number): readonly string[] {
  const start = `${cookieOf(port)}=`;
  return cookie.split(/; */).flatMap((each) => (each.startsWith(start) ? [each.slice(start.length)] : []));
}
