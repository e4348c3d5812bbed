import { chmod, readFile } from 'node:fs/promises';
import { fileURLToPath } from 'node:url';
import { describe, expect, it, onTestFinished } from 'vitest';
import { openSerial, type SerialAddress } from '../../src/instrument/serial-connection.js';
import { servePty, withoutSocat } from './fixtures/serve-pty.js';
import { prompt } from './fixtures/talkers.js';

const at = (path: string): SerialAddress => ({ kind: 'serial', path });

describe('a serial connection', () => {
  it.skipIf(withoutSocat)('carries bytes there and back', async () => {
    const address = await servePty(prompt());
    const connection = await openSerial(address);
    onTestFinished(() => connection.close());
    expect(connection.address).toBe(`serial:${address.path}?baud=9600`);
    await connection.write(Buffer.from('MEAS:VOLT?\n'));
    let heard = '';
    while (!heard.endsWith('\n')) heard += Buffer.from((await connection.receive(1)) ?? []).toString();
    expect(heard).toBe('15.1\n');
    expect(await connection.receive(0.02)).toBeUndefined();
  });

  it.skipIf(withoutSocat)('with other line settings is opened all the same', async () => {
    const address = await servePty(prompt());
    const connection = await openSerial({ ...address, baud: 19200, stop: 2, flow: 'software' });
    expect(connection.address).toBe(`serial:${address.path}?baud=19200&stop=2&flow=software`);
    await connection.close();
    await connection.close();
  });

  it('to a port that is not there says so, and how to find those that are', async () => {
    await expect(openSerial(at('/dev/no-such-port'))).rejects.toMatchObject({
      code: 'INSTRUMENT_UNREACHABLE',
      exitCode: 69,
      reason: 'there is no port /dev/no-such-port',
      advice: expect.stringContaining('railproof ports') as string,
    });
  });

  it('to something that is no port says so', async () => {
    const file = fileURLToPath(import.meta.url);
    await expect(openSerial(at(file))).rejects.toMatchObject({ reason: `${file} is not a serial port` });
  });

  it.skipIf(withoutSocat)('to a port that is in use says so', async () => {
    const address = await servePty(prompt());
    const first = await openSerial(address);
    onTestFinished(() => first.close());
    await expect(openSerial(address)).rejects.toMatchObject({ code: 'PORT_BUSY', exitCode: 69 });
  });

  it.skipIf(withoutSocat)('to a port that this user may not open names the group dialout', async () => {
    const address = await servePty(prompt());
    await expect(openSerial(at('/dev/no-such-port'))).rejects.toThrow();
    await chmod(address.path, 0o000);
    // The superuser may open anything, so as such we step down for the moment.
    const superuser = process.getuid?.() === 0;
    if (superuser) process.seteuid?.(65534);
    const opening = openSerial(address).finally(() => {
      if (superuser) process.seteuid?.(0);
    });
    await expect(opening).rejects.toMatchObject({
      code: 'INSTRUMENT_UNREACHABLE',
      advice: expect.stringContaining('dialout') as string,
    });
  });

  it.skipIf(withoutSocat)('whose cable is pulled is lost, for reading and for writing', async () => {
    const connection = await openSerial(
      await servePty((_, line) => {
        line.hangUp();
      }),
    );
    await connection.write(Buffer.from('*IDN?\n'));
    const used = async (): Promise<never> => {
      for (;;) {
        await connection.receive(0.05);
        await connection.write(Buffer.from('*IDN?\n'));
      }
    };
    await expect(used()).rejects.toMatchObject({ code: 'CONNECTION_LOST', exitCode: 69 });
    await expect(connection.receive(1)).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
    await connection.close();
  });

  it('is made by a package that is loaded only when a port is opened', async () => {
    const source = await readFile(
      new URL('../../src/instrument/serial-connection.ts', import.meta.url),
      'utf8',
    );
    expect(source).toContain("await import('serialport')");
    expect(source).not.toMatch(/^import (?!type ).*'serialport'/m);
  });
});
