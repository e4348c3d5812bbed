import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import fc from '../property.js';
import { type AView, aView, follow, type Follower, post, send } from './a-view.js';

const json = 'application/json';
const never = new AbortController().signal;
const remark = { heading: 'To tell', text: 'What is seen?', answer: 'text' } as const;

let seen: AView;
let cookie: string;
let origin: string;

beforeAll(async () => {
  seen = await aView();
  cookie = await seen.enter();
  origin = `http://127.0.0.1:${seen.port}`;
});

beforeEach(() => {
  seen.stop.mockClear();
});

afterAll(() => seen.view.close());

describe('whoever comes without the cookie', () => {
  const closed = 'Open the address that the terminal shows; it opens once.\n';

  it.each([
    ['GET', '/'],
    ['GET', '/?token='],
    ['GET', '/?token=wrong'],
    ['HEAD', '/?token=wrong'],
    ['POST', '/?token=wrong'],
    ['GET', '/events'],
    ['GET', '/page/main.js'],
    ['GET', '/there-is-none'],
    ['POST', '/answer'],
    ['POST', '/stop'],
    ['DELETE', '/stop'],
    ['OPTIONS', '*'],
  ])('gets the same nothing for %s %s', async (method, path) => {
    const headers = { origin, 'content-type': json };
    const { status, text } = await send(seen.port, path, { method, headers, body: '{}' });
    expect([status, text]).toEqual([403, method === 'HEAD' ? '' : closed]);
    expect(seen.stop).not.toHaveBeenCalled();
  });

  it('gets it with the cookie of another view, with a part of ours, and with a token for a cookie', async () => {
    const { token } = Object.fromEntries(new URL(seen.view.address).searchParams);
    const [name = '', value = ''] = cookie.split('=');
    const wrong = [`${name}=`, `${name}=${value.slice(0, -1)}`, `other=${value}`, `${name}=${token ?? ''}`];
    for (const each of wrong) {
      expect((await send(seen.port, '/', { headers: { cookie: each } })).status, each).toBe(403);
    }
  });

  it('gets nothing by any path and method', async () => {
    const method = fc.constantFrom('GET', 'HEAD', 'POST', 'PUT', 'DELETE', 'OPTIONS', 'TRACE');
    const query = fc
      .dictionary(fc.constantFrom('token', 'a'), fc.string())
      .map((given) => new URLSearchParams(given).toString());
    await fc.assert(
      fc.asyncProperty(method, fc.webPath(), query, async (by, path, given) => {
        const { status, text } = await send(seen.port, `/${path.slice(1)}?${given}`, { method: by });
        expect(status).toBe(403);
        expect(text).not.toMatch(/K1|listen|everything/);
      }),
      { numRuns: 60 },
    );
  });
});

describe('the address', () => {
  it('opens once, leads to a page without the token, and is shown afresh at the terminal when it comes again', async () => {
    const other = await aView();
    const path = other.view.address.slice(other.view.address.indexOf('/?'));
    const opened = await send(other.port, path);
    expect([opened.status, opened.headers.location, opened.text]).toEqual([303, '/', '']);
    expect(opened.headers['set-cookie']).toEqual([
      expect.stringMatching(
        new RegExp(`^railproof-${other.port}=[\\w-]{32}; HttpOnly; SameSite=Strict; Path=/$`),
      ),
    ]);

    const again = await send(other.port, path);
    expect([again.status, again.headers['set-cookie']]).toEqual([403, undefined]);
    expect(again.text).toContain('was opened before, and opens once');
    expect(again.text).not.toContain('token');
    expect(other.addresses).toHaveLength(1);
    await send(other.port, path);
    expect(other.addresses).toHaveLength(1);

    const fresh = await other.enter(other.addresses[0]);
    expect((await send(other.port, '/', { headers: { cookie: fresh } })).status).toBe(200);
    await other.view.close();
  });

  it('is not used up by a page that is in already', async () => {
    const other = await aView();
    const inside = await other.enter();
    const path = other.view.address.slice(other.view.address.indexOf('/?'));
    const { status, headers } = await send(other.port, path, { headers: { cookie: inside } });
    expect([status, headers.location, other.addresses]).toEqual([303, '/', []]);
    await other.view.close();
  });

  it('says so where it was shown too often', async () => {
    const other = await aView();
    await other.enter();
    for (let times = 0; times < 3; times += 1) {
      await other.enter();
      await other.enter(other.addresses.at(-1));
    }
    const { status, text } = await send(
      other.port,
      other.view.address.slice(other.view.address.indexOf('/?')),
    );
    expect([status, other.addresses.length]).toEqual([403, 3]);
    expect(text).toContain('The terminal shows no more new ones for this run');
    await other.view.close();
  });

  it('differs in token and port for two views at once, whose cookies do not lock each other out', async () => {
    const other = await aView();
    expect(other.port).not.toBe(seen.port);
    expect(new URL(other.view.address).searchParams.get('token')).not.toBe(
      new URL(seen.view.address).searchParams.get('token'),
    );
    const both = `${cookie}; ${await other.enter()}`;
    for (const { port } of [seen, other]) {
      expect((await send(port, '/', { headers: { cookie: both } })).status).toBe(200);
    }
    await other.view.close();
  });
});

describe('a page that is in', () => {
  const get = (path: string, headers: Readonly<Record<string, string>> = {}) =>
    send(seen.port, path, { headers: { cookie, ...headers } });

  it('gets its files, of which nothing is kept and which take nothing from elsewhere', async () => {
    const { status, text, headers } = await get('/page/main.js');
    expect([status, text]).toEqual([200, 'listen()']);
    for (const each of [headers, (await get('/')).headers, (await send(seen.port, '/')).headers]) {
      expect(each).toMatchObject({
        'cache-control': 'no-store',
        'cross-origin-opener-policy': 'same-origin',
        'cross-origin-resource-policy': 'same-origin',
        'referrer-policy': 'no-referrer',
        'x-content-type-options': 'nosniff',
      });
      expect(each['access-control-allow-origin']).toBeUndefined();
      const policy = String(each['content-security-policy']).split('; ');
      expect(policy).toEqual(
        expect.arrayContaining(["default-src 'none'", "script-src 'self'", "frame-ancestors 'none'"]),
      );
      expect(String(policy)).not.toMatch(/unsafe|\*|http|data:/);
    }
  });

  it.each(['127.0.0.1', 'localhost'])('may call this machine %s', async (name) => {
    expect((await get('/', { host: `${name}:${seen.port}` })).status).toBe(200);
  });

  it('gets nothing under another name, by which a page of elsewhere would reach it', async () => {
    const names = ['nursery.example', `nursery.example:${seen.port}`, '127.0.0.1', '127.0.0.1:1'];
    for (const host of names) expect((await get('/', { host })).status, host).toBe(403);
    const path = new URL(seen.view.address).search;
    expect((await send(seen.port, `/${path}`, { headers: { host: 'nursery.example' } })).status).toBe(403);
  });

  it.each([
    '/../package.json',
    '/page/../../cli/main.js',
    '/%2e%2e/%2e%2e/etc/passwd',
    '//etc/passwd',
    '/page/main.js%00',
    '/page/main.js/',
    '/page/',
    '/PAGE/MAIN.JS',
    '/constructor',
    '/__proto__',
  ])('finds nothing at %s', async (path) => {
    const { status, text } = await get(path);
    expect([status, text]).toEqual([404, 'There is no such page.\n']);
  });

  it.each([
    ['POST', '/', 'GET'],
    ['HEAD', '/', 'GET'],
    ['PUT', '/page/main.js', 'GET'],
    ['POST', '/events', 'GET'],
    ['GET', '/answer', 'POST'],
    ['GET', '/stop', 'POST'],
    ['DELETE', '/stop', 'POST'],
  ])('can not %s %s', async (method, path, allow) => {
    const { status, headers } = await send(seen.port, path, { method, headers: { cookie, origin } });
    expect([status, headers.allow]).toEqual([405, allow]);
    expect(seen.stop).not.toHaveBeenCalled();
  });

  it('is followed by four pages at once, so that a browser has lines left to stop it by, and no more, until one of them leaves', async () => {
    const pages: Follower[] = [];
    for (let count = 0; count < 4; count += 1) pages.push(await follow(seen.port, cookie));
    const { status, text } = await get('/events');
    expect([status, text]).toEqual([503, 'Too many pages follow this run.\n']);
    pages.pop()?.breakOff();
    const again = async (): Promise<Follower> => follow(seen.port, cookie).catch(again);
    pages.push(await again());
    for (const page of pages) page.breakOff();
  });
});

describe('what a page sends', () => {
  const stop = (headers: Readonly<Record<string, string>>) =>
    send(seen.port, '/stop', { method: 'POST', headers, body: '{}' });

  it('stops the run', async () => {
    const { status, text } = await post(seen, cookie, '/stop', {});
    expect([status, text]).toEqual([202, '']);
    expect(seen.stop).toHaveBeenCalledTimes(1);
  });

  it('stops it whatever comes along with the wish', async () => {
    expect((await post(seen, cookie, '/stop', 'x'.repeat(100_000))).status).toBe(202);
    expect(seen.stop).toHaveBeenCalledTimes(1);
  });

  it.each([
    ['from nowhere', () => ({})],
    ['from another page', () => ({ origin: 'http://nursery.example' })],
    ['from another port', () => ({ origin: 'http://127.0.0.1:1' })],
    ['from a page without a name', () => ({ origin: 'null' })],
    ['from https', () => ({ origin: origin.replace('http', 'https') })],
    ['from this machine by its other name', () => ({ origin: origin.replace('127.0.0.1', 'localhost') })],
  ])('does nothing %s', async (_, from) => {
    const headers = { cookie, 'content-type': json, ...from() } as Readonly<Record<string, string>>;
    expect((await stop(headers)).status).toBe(403);
    expect(seen.stop).not.toHaveBeenCalled();
  });

  it.each([
    'text/plain',
    'application/x-www-form-urlencoded',
    'multipart/form-data',
    'application/jsonp',
    '',
  ])('does nothing as a form might send it, %j', async (type) => {
    expect((await stop({ cookie, origin, 'content-type': type })).status).toBe(415);
    expect(seen.stop).not.toHaveBeenCalled();
  });

  it('is taken as JSON that says its signs', async () => {
    expect((await stop({ cookie, origin, 'content-type': 'Application/JSON; charset=utf-8' })).status).toBe(
      202,
    );
  });
});

describe('an answer', () => {
  const raw = (body: string) =>
    send(seen.port, '/answer', {
      method: 'POST',
      headers: { cookie, origin, 'content-type': json },
      body,
    });

  it('is taken once, and not for a question that is no longer asked', async () => {
    const asked = seen.view.ask(remark, never);
    const question = seen.view.state.question?.id;
    expect((await post(seen, cookie, '/answer', { question, answer: '' })).status).toBe(422);
    expect((await post(seen, cookie, '/answer', { question, answer: ' hums <b>loudly</b> ' })).status).toBe(
      204,
    );
    expect(await asked).toBe('hums <b>loudly</b>');
    const late = await post(seen, cookie, '/answer', { question, answer: 'quiet' });
    expect([late.status, late.text]).toEqual([409, 'This is no longer asked.\n']);
  });

  it('is refused with the reason where it can be none', async () => {
    const asked = seen.view.ask({ ...remark, answer: 'yes' }, never);
    const question = seen.view.state.question?.id;
    const { status, text } = await post(seen, cookie, '/answer', { question, answer: 'perhaps' });
    expect([status, text]).toEqual([422, 'Answer yes or no.\n']);
    await post(seen, cookie, '/answer', { question, answer: 'no' });
    expect(await asked).toBe('no');
  });

  it.each([
    '',
    'yes',
    '[]',
    'null',
    '{}',
    '{"question":1}',
    '{"question":"1","answer":"yes"}',
    '{"question":1.5,"answer":"yes"}',
    '{"question":1,"answer":true}',
    '{"question":1,"answer":"yes","stop":true}',
    '\u0000',
  ])('is none where it is %s', async (body) => {
    const { status, text } = await raw(body);
    expect([status, text]).toEqual([
      422,
      'That is no answer: it names no question, or is longer than 400 characters.\n',
    ]);
  });

  it('is none where it is longer than anybody types', async () => {
    expect((await raw(JSON.stringify({ question: 1, answer: 'x'.repeat(401) }))).status).toBe(422);
  });

  it('is not read beyond what one needs', async () => {
    expect((await raw(JSON.stringify({ question: 1, answer: 'x'.repeat(5000) }))).status).toBe(413);
  });

  it('may be anything at all without harm to whoever asked', async () => {
    const asked = seen.view.ask({ ...remark, answer: 'done' }, never);
    await fc.assert(
      fc.asyncProperty(fc.oneof(fc.string(), fc.json()), async (body) => {
        expect((await raw(body)).status).toBe(422);
      }),
      { numRuns: 40 },
    );
    const question = seen.view.state.question?.id;
    expect((await post(seen, cookie, '/answer', { question, answer: 'done' })).status).toBe(204);
    expect(await asked).toBe('done');
  });
});
