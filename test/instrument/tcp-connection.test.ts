import { createServer, type AddressInfo } from 'node:net';
import { describe, expect, it, onTestFinished } from 'vitest';
import { openTcp } from '../../src/instrument/tcp-connection.js';
import { serveTcp } from './fixtures/serve-tcp.js';
import { mute, prompt } from './fixtures/talkers.js';

const bytes = (text: string): Uint8Array => Buffer.from(text, 'latin1');

async function freePort(): Promise<number> {
  const server = createServer();
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const { port } = server.address() as AddressInfo;
  await new Promise((resolve) => server.close(resolve));
  return port;
}

describe('a TCP connection', () => {
  it('carries bytes there and back', async () => {
    const address = await serveTcp(prompt());
    const connection = await openTcp(address);
    onTestFinished(() => connection.close());
    expect(connection.address).toBe(`tcp://127.0.0.1:${address.port}`);
    await connection.write(bytes('MEAS:VOLT?\n'));
    expect(Buffer.from((await connection.receive(1)) ?? []).toString()).toBe('15.1\n');
    expect(await connection.receive(0)).toBeUndefined();
    expect(await connection.receive(0.02)).toBeUndefined();
  });

  it('to a port where nothing listens is refused, and says what to look at', async () => {
    const port = await freePort();
    await expect(openTcp({ kind: 'tcp', host: '127.0.0.1', port })).rejects.toMatchObject({
      code: 'INSTRUMENT_UNREACHABLE',
      exitCode: 69,
      message: `tcp://127.0.0.1:${port}: the connection is refused: nothing listens on this port`,
      advice: expect.stringContaining('switched on') as string,
    });
  });

  it('to a host that does not exist says so', async () => {
    const address = { kind: 'tcp', host: 'no-such-load.invalid', port: 5025 } as const;
    await expect(openTcp(address, { connecting: 2, writing: 1 })).rejects.toMatchObject({
      code: 'INSTRUMENT_UNREACHABLE',
      address: 'tcp://no-such-load.invalid:5025',
    });
  });

  it('that is accepted and then closed is lost, for reading and for writing', async () => {
    const server = createServer((socket) => socket.end());
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    onTestFinished(() => {
      server.close();
    });
    const { port } = server.address() as AddressInfo;
    const connection = await openTcp({ kind: 'tcp', host: '127.0.0.1', port });
    await expect(connection.receive(1)).rejects.toMatchObject({ code: 'CONNECTION_LOST', exitCode: 69 });
    await expect(connection.write(bytes('*IDN?\n'))).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
    await connection.close();
  });

  it('takes for late nothing that came while this program was held up', async () => {
    const address = await serveTcp((message, line) => {
      line.say(message);
      const heldUp = performance.now() + 100;
      while (performance.now() < heldUp);
    });
    const connection = await openTcp(address);
    onTestFinished(() => connection.close());
    await connection.write(bytes('READ?\n'));
    expect(Buffer.from((await connection.receive(0.05)) ?? []).toString()).toBe('READ?');
  });

  it('gives all that was sent before it was lost', async () => {
    const connection = await openTcp(
      await serveTcp((_, line) => {
        line.say('last words');
        line.hangUp();
      }),
    );
    await connection.write(bytes('*IDN?\n'));
    let heard = '';
    const listen = async (): Promise<never> => {
      for (;;) heard += Buffer.from((await connection.receive(1)) ?? []).toString();
    };
    await expect(listen()).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
    expect(heard).toBe('last words');
  });

  it('holds a bounded amount of what nobody takes, and loses none of it', async () => {
    const size = 8 * 1024 * 1024;
    const connection = await openTcp(
      await serveTcp((_, line) => {
        line.say('x'.repeat(size));
      }),
    );
    onTestFinished(() => connection.close());
    await connection.write(bytes('*IDN?\n'));
    await new Promise((resolve) => setTimeout(resolve, 50));
    const first = await connection.receive(1);
    expect(first?.length).toBeLessThan(1024 * 1024);
    let taken = first?.length ?? 0;
    while (taken < size) taken += (await connection.receive(1))?.length ?? Infinity;
    expect(taken).toBe(size);
  });

  it('to an instrument that takes nothing more ends instead of hanging', async () => {
    const server = createServer((socket) => socket.pause());
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    onTestFinished(() => {
      server.close();
    });
    const { port } = server.address() as AddressInfo;
    const connection = await openTcp(
      { kind: 'tcp', host: '127.0.0.1', port },
      { connecting: 1, writing: 0.1 },
    );
    await expect(connection.write(new Uint8Array(64 * 1024 * 1024))).rejects.toMatchObject({
      code: 'CONNECTION_LOST',
      reason: 'it took nothing of what was sent for 0.1 s',
    });
    await connection.close();
  });

  it('delivers the last message even when it is closed with a reply unread', async () => {
    const heard: string[] = [];
    const connection = await openTcp(
      await serveTcp((message, line) => {
        heard.push(message);
        line.say('an answer that nobody reads\n'.repeat(1000));
      }),
    );
    await connection.write(bytes('INP?\n'));
    await new Promise((resolve) => setTimeout(resolve, 20));
    await connection.write(bytes('INP OFF\n'));
    await connection.close();
    await expect.poll(() => heard).toEqual(['INP?', 'INP OFF']);
  });

  it('may be closed twice, and ends the wait of whoever is waiting', async () => {
    const connection = await openTcp(await serveTcp(mute));
    const waiting = expect(connection.receive(5)).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
    await connection.close();
    await connection.close();
    await waiting;
  });
});
