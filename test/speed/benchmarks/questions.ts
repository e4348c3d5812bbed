import { spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { connect } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import type { Duplex } from 'node:stream';
import { fileURLToPath } from 'node:url';
import { SerialPort } from 'serialport';
import type * as realClocks from '../../../src/clock/real-clock.js';
import type * as ptys from '../../../src/simulation/serve-pty.js';
import { built } from '../built.js';
import type { Benchmark, Figure } from '../figure.js';
import { pingPong } from '../ping-pong.js';
import { type Addresses, rampOver } from '../questions-of-a-run.js';
import { median, secondsOf } from '../side-by-side.js';

const { realClock } = await built<typeof realClocks>('clock/real-clock.js');
const { serveOnPty } = await built<typeof ptys>('simulation/serve-pty.js');

/** At each of the four points of a ramp. */
const samples = 500;
const rounds = 5;

export default (async () => {
  const { port, end } = await briskInstrument();
  try {
    return [await overTcp(port), await overPty(port)];
  } finally {
    end();
  }
}) satisfies Benchmark;

function overTcp(port: number): Promise<Figure> {
  const address = `tcp://127.0.0.1:${port}`;
  return inTurns(
    { name: 'questions-over-tcp', what: 'questions of a run over TCP', atLeast: 0.7 },
    { load: address, meter: address },
    { what: 'ping-pong over bare sockets', load: () => socketTo(port), meter: () => socketTo(port) },
  );
}

/** Both go through the package for serial ports, as over TCP both go through the sockets of Node. */
async function overPty(port: number): Promise<Figure> {
  const told = { name: 'questions-over-a-pty', what: 'questions of a run over a pty', atLeast: 0.8 };
  if (spawnSync('socat', ['-V']).error !== undefined)
    return { kind: 'skipped', name: told.name, what: told.what, why: 'socat is not installed' };
  const folder = mkdtempSync(join(tmpdir(), 'railproof-pty-'));
  const load = join(folder, 'load');
  const meter = join(folder, 'meter');
  const served = await Promise.all([load, meter].map((link) => serveOnPty({ port, link, clock: realClock })));
  try {
    return await inTurns(
      told,
      { load: `serial:${load}?baud=115200`, meter: `serial:${meter}?baud=115200` },
      {
        what: 'ping-pong over bare serial ports',
        load: () => portAt(load),
        meter: () => portAt(meter),
      },
    );
  } finally {
    for (const one of served) await one.close();
    rmSync(folder, { recursive: true, force: true });
  }
}

/** Lines to the same instruments with nothing of ours in between. */
interface Floor {
  readonly what: string;
  readonly load: () => Promise<Duplex>;
  readonly meter: () => Promise<Duplex>;
}

async function inTurns(
  { name, what, atLeast }: { readonly name: string; readonly what: string; readonly atLeast: number },
  addresses: Addresses,
  floor: Floor,
): Promise<Figure> {
  const rates: { readonly ours: number; readonly rival: number }[] = [];
  for (let round = -1; round < rounds; round += 1) {
    const { questions, seconds } = await rampOver(addresses, samples);
    const bare = await bareSeconds(floor, questions);
    if (round >= 0) rates.push({ ours: questions / seconds, rival: questions / bare });
  }
  const ours = median(rates.map((one) => one.ours));
  const rival = median(rates.map((one) => one.rival));
  return {
    kind: 'measured',
    ...{ name, what },
    ours: { value: ours, unit: 'questions/s' },
    rival: { value: rival, unit: 'questions/s', what: floor.what },
    ratio: median(rates.map((one) => one.ours / one.rival)),
    bound: { atLeast },
    beside: { microsecondsOfAQuestion: 1e6 / ours, microsecondsOfABareOne: 1e6 / rival },
  };
}

async function bareSeconds(floor: Floor, questions: number): Promise<number> {
  const load = await floor.load();
  const meter = await floor.meter();
  const seconds = await secondsOf(() =>
    pingPong(
      [
        { line: meter, question: 'READ?' },
        { line: load, question: 'MEAS:VOLT?' },
        { line: load, question: 'MEAS:CURR?' },
      ],
      questions,
    ),
  );
  for (const line of [load, meter]) {
    const closed = once(line, 'close');
    // A port of the package is closed only so, and not where what it is made of is destroyed.
    if (line instanceof SerialPort) line.close();
    else line.destroy();
    await closed;
  }
  return seconds;
}

async function briskInstrument(): Promise<{ readonly port: number; readonly end: () => void }> {
  const script = fileURLToPath(new URL('../brisk-instrument.js', import.meta.url));
  const child = spawn(process.execPath, [script], { stdio: ['pipe', 'pipe', 'inherit'] });
  const [line] = (await once(createInterface(child.stdout), 'line')) as [string];
  return {
    port: Number(line),
    end: () => {
      child.stdin.end();
    },
  };
}

async function socketTo(port: number): Promise<Duplex> {
  const socket = connect({ host: '127.0.0.1', port, noDelay: true });
  await once(socket, 'connect');
  return socket;
}

async function portAt(path: string): Promise<Duplex> {
  const port = new SerialPort({ path, baudRate: 115_200 });
  await once(port, 'open');
  return port;
}
