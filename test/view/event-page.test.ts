import { once } from 'node:events';
import { createServer, type ServerResponse } from 'node:http';
import { type AddressInfo, connect, type Socket } from 'node:net';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { EventPage } from '../../src/view/event-page.js';
import { until } from '../whole/at-the-bench.js';

/** In bytes; what a page may leave unread. */
const bound = 2 ** 20;
const event = `data: ${'x'.repeat(2 ** 16)}\n\n`;
const closing: (() => void)[] = [];

afterEach(() => {
  for (const close of closing.splice(0)) close();
});

/** A page whose socket the test reads, or leaves unread. */
async function page() {
  const clock = new VirtualClock(new Date(0));
  const readsAgain = vi.fn<() => void>();
  const server = createServer();
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const reader = connect((server.address() as AddressInfo).port, '127.0.0.1');
  closing.push(() => {
    reader.destroy();
    server.close();
  });
  reader.on('error', () => undefined);
  reader.write('GET /events HTTP/1.1\r\nhost: 127.0.0.1\r\n\r\n');
  const [, response] = (await once(server, 'request')) as [unknown, ServerResponse];
  return { page: new EventPage(response, clock, readsAgain), response, reader, clock, readsAgain };
}

/** Tells it more than its machine takes for it, so that something of it waits in this program. */
async function blocked() {
  const made = await page();
  made.reader.pause();
  do {
    made.page.tell(event);
    await turn();
  } while (made.response.writableLength === 0);
  return made;
}

const turn = (): Promise<unknown> => new Promise((resolve) => setImmediate(resolve));

function readAll(reader: Socket): () => string {
  let text = '';
  reader.on('data', (more: Buffer) => {
    text += more.toString();
  });
  reader.resume();
  return () => text;
}

describe('a page that follows', () => {
  it('is told at once, as a stream of events that is tried again soon after it breaks', async () => {
    const { page: told, reader } = await page();
    const read = readAll(reader);
    told.tell('data: 1\n\n');
    told.tellLatest('data: 2\n\n');
    await until(() => read().includes('data: 2\n\n'));
    expect(read()).toMatch(/^HTTP\/1\.1 200 OK\r\ncontent-type: text\/event-stream; charset=utf-8\r\n/);
    expect(read()).toMatch(/retry: 1000\n\n[^]*data: 1\n\n[^]*data: 2\n\n/);
  });

  it('ends once it has all of it', async () => {
    const { page: told, reader } = await page();
    const read = readAll(reader);
    told.tell('data: the last\n\n');
    await told.end();
    await until(() => read().endsWith('0\r\n\r\n'));
    expect(read()).toContain('data: the last\n\n');
  });
});

describe('a page that does not read', () => {
  it('has nothing heaped up for it of what a newer one replaces', async () => {
    const { page: stuck, response } = await blocked();
    const before = response.writableLength;
    for (let count = 0; count < 10_000; count += 1) stuck.tellLatest(event);
    expect(response.writableLength).toBe(before);
    expect(response.destroyed).toBe(false);
  });

  it('is dropped at the bound where it must miss nothing', async () => {
    const { page: stuck, response } = await blocked();
    let most = 0;
    for (let count = 0; count < 1000; count += 1) {
      stuck.tell(event);
      most = Math.max(most, response.writableLength);
    }
    expect(response.destroyed).toBe(true);
    expect(most).toBeGreaterThan(bound / 2);
    expect(most).toBeLessThanOrEqual(bound);
  });

  it('hears no beats, and is dropped after ten seconds', async () => {
    const { page: stuck, response, clock } = await blocked();
    const before = response.writableLength;
    for (let second = 0; second <= 10; second += 1) {
      stuck.beat(event);
      expect([second, response.destroyed, response.writableLength]).toEqual([second, false, before]);
      await clock.sleep(1);
    }
    stuck.beat(event);
    expect(response.destroyed).toBe(true);
  });

  it('is told the newest once it reads again, and counts as one that reads', async () => {
    const { page: slow, response, reader, clock, readsAgain } = await blocked();
    slow.tellLatest(event);
    expect(readsAgain).not.toHaveBeenCalled();
    const read = readAll(reader);
    await until(() => readsAgain.mock.calls.length > 0);
    await clock.sleep(60);
    slow.beat('data: beat\n\n');
    await until(() => read().includes('data: beat\n\n'));
    expect(response.destroyed).toBe(false);
    expect(readsAgain).toHaveBeenCalledTimes(1);
  });

  it('has what it was told out of this program only once it reads again, or nobody waits for it any more', async () => {
    for (const ends of ['reads', 'goes away']) {
      const { page: slow, reader } = await blocked();
      let out = false;
      const flushed = slow.flushed().then(() => (out = true));
      for (let count = 0; count < 20; count += 1) await turn();
      expect(out).toBe(false);
      if (ends === 'reads') readAll(reader);
      else reader.destroy();
      await flushed;
    }
  });

  it('keeps nobody waiting once it went away', async () => {
    const { page: gone, response, reader } = await blocked();
    const end = gone.end();
    reader.destroy();
    await end;
    gone.tell(event);
    gone.beat(event);
    await gone.end();
    await gone.flushed();
    // A later Node tells of the end before it tells the response that its line is gone.
    await until(() => response.destroyed);
    expect(response.writableLength).toBe(0);
  });
});
