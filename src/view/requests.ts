import type { IncomingMessage, ServerResponse } from 'node:http';
import { z } from 'zod';
import type { Audience } from './audience.js';
import type { Entry } from './entry.js';
import type { PageFiles } from './page-files.js';
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
    case 'unknown':
      refuse(response, 403, words.unknown);
  }
}

async function answerKnown(
  request: IncomingMessage,
  response: ServerResponse,
  path: string,
  { files, audience, questions, stop }: Desk,
): Promise<void> {
  const { method } = request;
  const file = files.get(path);
  if (path === '/events' || file !== undefined) {
    if (method !== 'GET') refuse(response, 405, 'This can only be read.', { allow: 'GET' });
    else if (file !== undefined) response.writeHead(200, { 'content-type': file.type }).end(file.body);
    else if (audience.isFull) refuse(response, 503, 'Too many pages follow this run.');
    else audience.join(response);
    return;
  }
  if (path !== '/answer' && path !== '/stop') {
    refuse(response, 404, 'There is no such page.');
    return;
  }
  if (method !== 'POST') {
    refuse(response, 405, 'This can only be sent to.', { allow: 'POST' });
    return;
  }
  const { origin, host = '', 'content-type': type = '' } = request.headers;
  if (origin !== `http://${host}`) {
    refuse(response, 403, words.unknown);
    return;
  }
  if (!/^application\/json(;|$)/i.test(type)) {
    refuse(response, 415, 'Only JSON is taken.');
    return;
  }
  if (path === '/stop') {
    // What else is sent with the wish changes nothing of it.
    request.resume();
    stop();
    response.writeHead(202).end();
    return;
  }
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
