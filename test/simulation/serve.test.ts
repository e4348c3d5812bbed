import { spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, readdirSync, readFileSync, readlinkSync } from 'node:fs';
import { networkInterfaces } from 'node:os';
import { createServer, connect, type AddressInfo, type Socket } from 'node:net';
import { SerialPort } from 'serialport';
import { afterEach, describe, expect, it } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import type { Bench } from '../../src/files/bench.js';
import type { Simulation } from '../../src/files/simulation-section.js';
import { type ServedBench, type ServeOptions, serveBench } from '../../src/simulation/serve.js';
import { CannotServeError, CannotSimulateError } from '../../src/simulation/simulation-errors.js';
import { groupBench } from '../bench/group-bench.js';
import { hiccup, k1, loadDriver, meterDriver, simulationOf } from './bench-parts.js';

const socatIsMissing = spawnSync('socat', ['-V']).error !== undefined;

function benchOf(simulation?: Simulation): Bench {
  return {
    name: 'test bench',
    instruments: {
      load: { driver: 'load-input-scpi', connection: { kind: 'simulated' } },
      meter: { driver: 'meter-read-scpi', connection: { kind: 'simulated' } },
    },
    leads: { resistance: 0.035, uncertainty: 0.005 },
    voltageFrom: 'meter-at-module',
    limits: { voltage: 60, current: 8, power: 150 },
    ...(simulation === undefined ? {} : { simulation }),
  };
}

let served: ServedBench | undefined;
afterEach(async () => {
  await served?.close();
  served = undefined;
});

async function serve(
  options: Partial<ServeOptions> = {},
  simulation = simulationOf(k1(hiccup)),
): Promise<ServedBench> {
  const drivers = { load: loadDriver, meter: meterDriver };
  served = await serveBench({ bench: benchOf(simulation), drivers, clock: realClock, ...options });
  return served;
}

const portIn = (address: string | undefined): number => Number(/:(\d+)$/.exec(address ?? '')?.[1]);

async function dial(address: string | undefined): Promise<Socket> {
  const socket = connect({ host: '127.0.0.1', port: portIn(address) });
  await once(socket, 'connect');
  return socket;
}

/** For as long as a busy machine may take. */
async function redial<Line>(dialled: () => Promise<Line>): Promise<Line> {
  const end = realClock.now() + 15;
  for (;;) {
    try {
      return await dialled();
    } catch (error) {
      if (realClock.now() > end) throw error;
    }
    await realClock.sleep(0.05);
  }
}

async function line(socket: Socket | SerialPort): Promise<string> {
  let text = '';
  while (!text.includes('\n')) {
    const [bytes] = (await once(socket, 'data')) as [Buffer];
    text += bytes.toString();
  }
  return text.trim();
}

async function ask(socket: Socket | SerialPort, message: string): Promise<string> {
  const answer = line(socket);
  socket.write(`${message}\n`);
  return answer;
}

describe('a bench served on TCP', () => {
  it('shows the module through plain sockets, in real time', async () => {
    const { addresses } = await serve();
    expect(addresses.load).toMatch(/^tcp:\/\/127\.0\.0\.1:\d+$/);
    const load = await dial(addresses.load);
    const meter = await dial(addresses.meter);
    expect(await ask(load, '*IDN?')).toBe('railproof,simulated load,K-bench,1');
    load.write('CURR 4;INP ON\r\n');
    expect(await ask(load, '*OPC?')).toBe('1');
    const before = performance.now();
    expect(Number(await ask(meter, 'READ?'))).toBeCloseTo(15.21 - 0.072, 4);
    // A reading takes the meter 20 ms; timers may fire a little early.
    expect(performance.now() - before).toBeGreaterThan(19);
    load.destroy();
    meter.destroy();
  });

  it('serves several clients of one instrument', async () => {
    const { addresses } = await serve();
    const [one, other] = await Promise.all([dial(addresses.load), dial(addresses.load)]);
    one.write('CURR 2\n');
    expect(await ask(one, '*OPC?')).toBe('1');
    expect(await ask(other, 'CURR?')).toBe('+2.000000E+00');
    one.destroy();
    other.destroy();
  });

  it('answers a client that has already said its last word', async () => {
    const { addresses } = await serve();
    const socket = await dial(addresses.meter);
    const answer = line(socket);
    socket.end('READ?\n');
    expect(Number(await answer)).toBeCloseTo(15.21, 4);
    if (!socket.closed) await once(socket, 'close');
  });

  it('survives a client that sends megabytes without an end, and one that never reads', async () => {
    const { addresses } = await serve();
    const flooding = await dial(addresses.load);
    const chunk = Buffer.alloc(1 << 20, 0x41);
    const before = process.memoryUsage().rss;
    for (let count = 0; count < 24; count++) if (!flooding.write(chunk)) await once(flooding, 'drain');
    expect(process.memoryUsage().rss - before).toBeLessThan(64 << 20);
    expect(await ask(flooding, '\nSYST:ERR?')).toBe('-363,"Input buffer overrun"');
    const deaf = await dial(addresses.load);
    deaf.pause();
    deaf.write('*IDN?\n'.repeat(20_000));
    await realClock.sleep(0.05);
    deaf.resetAndDestroy();
    flooding.destroy();
    const next = await dial(addresses.load);
    expect(await ask(next, '*OPC?')).toBe('1');
    next.destroy();
  });

  it('hangs up when the instrument is lost, and is closed all the same', async () => {
    const { addresses } = await serve(
      {},
      simulationOf(k1(hiccup), { faults: [{ at: 0.15, what: 'meter-lost' }] }),
    );
    const meter = await dial(addresses.meter);
    expect(await ask(meter, '*OPC?')).toBe('1');
    await once(meter, 'close');
    await expect(dial(addresses.meter)).rejects.toThrow('ECONNREFUSED');
    expect(await ask(await dial(addresses.load), '*OPC?')).toBe('1');
  });

  it('hangs up when the instrument is lost for a while, and is back on the same port', async () => {
    const { addresses } = await serve(
      {},
      simulationOf(k1(hiccup), { faults: [{ at: 2, what: 'meter-lost', for: 3 }] }),
    );
    const meter = await dial(addresses.meter);
    await once(meter, 'close');
    await expect(dial(addresses.meter)).rejects.toThrow('ECONNREFUSED');
    const again = await redial(() => dial(addresses.meter));
    expect(Number(await ask(again, 'READ?'))).toBeCloseTo(15.21, 4);
    again.destroy();
  }, 40_000);

  it('is closed also while an instrument is lost', async () => {
    const bench = await serve(
      {},
      simulationOf(k1(hiccup), { faults: [{ at: 0, what: 'meter-lost', for: 60 }] }),
    );
    await expect(bench.close()).resolves.toBeUndefined();
  });

  it('says so when a port is in use, and leaves nothing open', async () => {
    const other = createServer().listen(0, '127.0.0.1');
    await once(other, 'listening');
    const { port } = other.address() as AddressInfo;
    const refused = await serve({ ports: { meter: port } }).catch((error: unknown) => error);
    other.close();
    expect(refused).toBeInstanceOf(CannotServeError);
    expect(refused).toMatchObject({
      message: `cannot serve at tcp://127.0.0.1:${port}: the port is in use`,
      exitCode: 74,
    });
  });

  it('frees its ports when it is closed, twice without harm', async () => {
    const bench = await serve();
    const { addresses } = bench;
    const client = await dial(addresses.load);
    client.on('error', () => undefined);
    await bench.close();
    await bench.close();
    await expect(dial(addresses.load)).rejects.toThrow('ECONNREFUSED');
  });

  it('shows a group through the sockets of a scanner, its meters and a thermometer', async () => {
    const { description, drivers } = await groupBench({ measuredBy: 'meters' });
    const { addresses } = await serve({ bench: description, drivers });
    expect(Object.keys(addresses)).toEqual(['load', 'meter', 'thermometer', 'meter-1', 'meter-2', 'meter-3']);
    const [load, third, thermometer] = await Promise.all([
      dial(addresses.load),
      dial(addresses['meter-3']),
      dial(addresses.thermometer),
    ]);
    expect(await ask(third, '*IDN?')).toBe('railproof,simulated meter,K-bench,4');
    load.write('CURR 6;INP ON\n');
    expect(await ask(load, '*OPC?')).toBe('1');
    await realClock.sleep(0.1);
    expect(Number(await ask(third, 'MEAS:VOLT?'))).toBeCloseTo(0.05 * (2 - 0.04 / 0.068), 3);
    expect(Number(await ask(thermometer, 'MEAS:TEMP?'))).toBeCloseTo(23, 6);
    for (const socket of [load, third, thermometer]) socket.destroy();

    const scanned = await groupBench();
    await served?.close();
    const again = await serve({ bench: scanned.description, drivers: scanned.drivers });
    const [scanner, meter] = await Promise.all([dial(again.addresses.scanner), dial(again.addresses.meter)]);
    expect(Math.abs(Number(await ask(meter, 'READ?')))).toBeLessThan(0.02);
    scanner.write('ROUT:OPEN:ALL;:ROUT:CLOS (@110)\n');
    expect(await ask(scanner, 'ROUT:CLOS:STAT?')).toBe('(@110)');
    expect(Number(await ask(meter, 'READ?'))).toBeCloseTo(12.34, 3);
    for (const socket of [scanner, meter]) socket.destroy();
  });

  it('needs a simulation section', async () => {
    await expect(serve({ bench: benchOf() })).rejects.toThrow(CannotSimulateError);
  });
});

describe.skipIf(socatIsMissing && process.env['CI'] === undefined)('a bench served on ptys', () => {
  const open = async (address: string | undefined): Promise<SerialPort> => {
    const [, path = ''] = /^serial:(.*)\?baud=115200$/.exec(address ?? '') ?? [];
    const port = new SerialPort({ path, baudRate: 115200, autoOpen: false });
    await new Promise<void>((resolve, reject) => {
      port.open((error) => {
        if (error === null) resolve();
        else reject(error);
      });
    });
    return port;
  };
  const shut = (port: SerialPort): Promise<void> =>
    new Promise((resolve) => {
      port.close(() => {
        resolve();
      });
    });

  it('is opened as serial ports, one client after the other, and leaves nothing behind', async () => {
    const bench = await serve({ lines: 'pty' });
    const { addresses } = bench;
    const load = await open(addresses.load);
    expect(await ask(load, '*IDN?')).toBe('railproof,simulated load,K-bench,1');
    load.write('CURR 4;INP ON\n');
    expect(await ask(load, 'INP?')).toBe('1');
    await shut(load);
    const again = await open(addresses.load);
    expect(await ask(again, 'CURR?')).toBe('+4.000000E+00');
    await shut(again);
    const meter = await open(addresses.meter);
    expect(Number(await ask(meter, 'READ?'))).toBeCloseTo(15.21 - 0.072, 4);
    await shut(meter);
    await bench.close();
    expect(existsSync(/^serial:(.*)\?/.exec(addresses.load ?? '')?.[1] ?? '/')).toBe(false);
  });

  it('is away while the instrument is lost, and there again after it', async () => {
    const bench = await serve(
      { lines: 'pty' },
      simulationOf(k1(hiccup), { faults: [{ at: 5, what: 'load-restarted', for: 0.5 }] }),
    );
    const load = await open(bench.addresses.load);
    load.write('CURR 4;INP ON\n');
    expect(await ask(load, 'INP?')).toBe('1');
    if (load.isOpen) await once(load, 'close');
    const again = await redial(() => open(bench.addresses.load));
    expect(await ask(again, 'INP?')).toBe('0');
    expect(await ask(again, 'CURR?')).toBe('+0.000000E+00');
    await shut(again);
  }, 40_000);

  it('has a port for the scanner and the thermometer too', async () => {
    const { description, drivers } = await groupBench();
    const { addresses } = await serve({ bench: description, drivers, lines: 'pty' });
    expect(Object.keys(addresses)).toEqual(['load', 'meter', 'scanner', 'thermometer']);
    const scanner = await open(addresses.scanner);
    scanner.write('ROUT:OPEN:ALL\nROUT:CLOS (@110)\n');
    expect(await ask(scanner, 'ROUT:CLOS:STAT?')).toBe('(@110)');
    const meter = await open(addresses.meter);
    expect(Number(await ask(meter, 'READ?'))).toBeCloseTo(12.34, 3);
    const thermometer = await open(addresses.thermometer);
    expect(Number(await ask(thermometer, 'MEAS:TEMP?'))).toBeCloseTo(23, 6);
    for (const port of [scanner, meter, thermometer]) await shut(port);
  });
});

describe('without socat', () => {
  it('ptys are refused with advice, and nothing stays open', async () => {
    const path = process.env['PATH'];
    process.env['PATH'] = '/nonexistent';
    const refused = await serve({ lines: 'pty' }).catch((error: unknown) => error);
    process.env['PATH'] = path;
    expect(refused).toBeInstanceOf(CannotServeError);
    expect(refused).toMatchObject({ reason: 'socat is not installed' });
    expect((refused as CannotServeError).advice).toContain('apt install socat');
  });
});

/** The addresses at which this process listens, as the system lists them: `0100007F:1A2B`. */
function listeningHere(): readonly string[] {
  const mine = new Set(
    readdirSync('/proc/self/fd').flatMap((file) => {
      try {
        return [/^socket:\[(\d+)\]$/.exec(readlinkSync(`/proc/self/fd/${file}`))?.[1] ?? ''];
      } catch {
        return [];
      }
    }),
  );
  return ['tcp', 'tcp6'].flatMap((protocol) => {
    const path = `/proc/net/${protocol}`;
    if (!existsSync(path)) return [];
    const rows = readFileSync(path, 'utf8')
      .split('\n')
      .map((row) => row.trim().split(/ +/));
    return rows.flatMap(([, local = '', , state, , , , , , inode = '']) =>
      state === '0A' && mine.has(inode) ? [local] : [],
    );
  });
}

function reaches(host: string, port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = connect({ host, port });
    const done = (reached: boolean): void => {
      socket.destroy();
      resolve(reached);
    };
    socket.once('connect', () => {
      done(true);
    });
    socket.once('error', () => {
      done(false);
    });
  });
}

describe.runIf(process.platform === 'linux')('a served bench is for this machine only', () => {
  const lines = socatIsMissing ? (['tcp'] as const) : (['tcp', 'pty'] as const);

  it.each(lines)('on %s every socket listens on the loopback address', async (kind) => {
    const before = new Set(listeningHere());
    await serve({ lines: kind });
    const opened = listeningHere().filter((address) => !before.has(address));
    expect(opened).toHaveLength(2);
    for (const address of opened) expect(address).toMatch(/^0100007F:/);
  });

  it('nobody gets in by another address of it', async () => {
    const { addresses } = await serve();
    const port = portIn(addresses.load);
    const others = Object.values(networkInterfaces())
      .flatMap((interfaces) => interfaces ?? [])
      .filter(({ address }) => address !== '127.0.0.1' && !address.startsWith('fe80:'))
      .map(({ address }) => address);
    expect(await reaches('127.0.0.1', port)).toBe(true);
    for (const other of ['::1', ...others]) expect(await reaches(other, port)).toBe(false);
  });
});
