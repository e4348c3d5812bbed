import { spawnSync } from 'node:child_process';
import { chmod, readFile } from 'node:fs/promises';
import { fileURLToPath } from 'node:url';
import { SerialPortMock } from 'serialport';
import { describe, expect, it, onTestFinished } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import { Dialogue } from '../../src/instrument/dialogue.js';
import { openSerial, setControlLines, type SerialAddress } from '../../src/instrument/serial-connection.js';
import { servePty, withoutSocat } from './fixtures/serve-pty.js';
import { prompt } from './fixtures/talkers.js';

const at = (path: string): SerialAddress => ({ kind: 'serial', path });

/** What the system says a port is set to, in one line. */
function settingsOf(path: string): string {
  return spawnSync('stty', ['-F', path, '-a'], { encoding: 'utf8' }).stdout.replace(/\s+/g, ' ');
}

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

  it.skipIf(withoutSocat)('is set to what the address says, else the driver, else as most are', async () => {
    const address = await servePty(prompt());
    const ofDriver = { baud: 19200, stop: 2, flow: 'software' } as const;
    const asked = [
      {
        address: at(address.path),
        ofDriver: {},
        set: ['speed 9600 baud', '-cstopb', '-crtscts', '-ixon', '-ixoff'],
      },
      {
        address: at(address.path),
        ofDriver,
        set: ['speed 19200 baud', ' cstopb', '-crtscts', ' ixon', ' ixoff'],
      },
      {
        address: { ...at(address.path), baud: 57600, flow: 'hardware' as const },
        ofDriver,
        set: ['speed 57600 baud', ' cstopb', ' crtscts', '-ixon', '-ixoff'],
      },
    ];
    for (const { address, ofDriver, set } of asked) {
      const connection = await openSerial(address, ofDriver);
      const found = settingsOf(address.path);
      await connection.close();
      for (const each of set) expect(found).toContain(each);
    }
  });

  it.skipIf(withoutSocat)('says how long what it took is on its way, as its speed has it', async () => {
    const connection = await openSerial(at((await servePty(() => undefined)).path), { baud: 600 });
    const began = performance.now();
    // 11 bytes of 10 bits, and those before them.
    const first = await connection.write(Buffer.from('MEAS:VOLT?\n'));
    expect(first).toBeCloseTo(110 / 600, 9);
    const both = await connection.write(Buffer.from('MEAS:VOLT?\n'));
    expect(both).toBeLessThanOrEqual(220 / 600);
    expect(both).toBeGreaterThan(220 / 600 - (performance.now() - began) / 1000);
    await connection.close();
  });

  it.skipIf(withoutSocat)('is closed once the last message is out', async () => {
    const connection = await openSerial(at((await servePty(() => undefined)).path), { baud: 600 });
    const began = performance.now();
    await connection.write(Buffer.from('INP OFF;:*RST\n'));
    await connection.close();
    // 14 bytes of 10 bits; a timer may be a millisecond early.
    expect(performance.now() - began).toBeGreaterThan(232);
  });

  it.skipIf(withoutSocat)(
    'to a port without control lines is open all the same, and says that it has none',
    async () => {
      const { path } = await servePty(prompt());
      const connection = await openSerial(at(path), { dtr: 'on', rts: 'off' });
      onTestFinished(() => connection.close());
      expect(connection.remark).toMatchObject({ kind: 'no-control-lines', asked: 'dtr=on, rts=off' });
      const told: string[] = [];
      const dialogue = new Dialogue({
        connection,
        wire: { sendEnd: '\n', replyEnd: '\n', gap: 0, timeout: 10 },
        clock: realClock,
        identify: '*IDN?',
        onNotice: (text) => told.push(text),
      });
      expect(await dialogue.ask('MEAS:VOLT?')).toBe('15.1');
      expect(told).toEqual([
        `serial:${path} has no control lines to set (dtr=on, rts=off: Inappropriate ioctl for device, cannot set); an instrument that waits for them will not answer`,
      ]);
    },
  );

  it.skipIf(withoutSocat)('leaves the control lines alone where nothing is said of them', async () => {
    const connection = await openSerial(await servePty(prompt()));
    onTestFinished(() => connection.close());
    expect(connection.remark).toBeUndefined();
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

describe('control lines', () => {
  /** The port that the makers of the package give for tests, and what it was told to set. */
  async function port() {
    SerialPortMock.binding.createPort('/dev/control-lines');
    const opened = new SerialPortMock({ path: '/dev/control-lines', baudRate: 9600, autoOpen: false });
    await new Promise((resolve) => {
      opened.open(resolve);
    });
    onTestFinished(() => {
      opened.close();
    });
    const told: unknown[] = [];
    const lines = opened.port;
    if (lines === undefined) throw new Error('it is not open');
    const set = lines.set.bind(lines);
    lines.set = (flags) => {
      told.push(flags);
      return set(flags);
    };
    return { port: opened, told };
  }

  it.each([
    { asked: { dtr: 'on' }, set: { dtr: true, rts: true } },
    { asked: { dtr: 'off' }, set: { dtr: false, rts: true } },
    { asked: { rts: 'off' }, set: { dtr: true, rts: false } },
    { asked: { dtr: 'off', rts: 'off' }, set: { dtr: false, rts: false } },
  ] as const)('are moved as asked, $asked, and the others left on', async ({ asked, set }) => {
    const { port: opened, told } = await port();
    expect(await setControlLines(opened, asked)).toBeUndefined();
    expect(told).toEqual([expect.objectContaining({ ...set, brk: false })]);
  });

  it('are not touched where nothing is asked', async () => {
    const { port: opened, told } = await port();
    expect(await setControlLines(opened, {})).toBeUndefined();
    expect(told).toEqual([]);
  });
});
