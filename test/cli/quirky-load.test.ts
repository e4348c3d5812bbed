import { spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { describe, expect, it, onTestFinished, vi } from 'vitest';
import { orderText } from '../../src/bench/watchman-order.js';
import { planDrivers, readBenchDrivers } from '../../src/cli/bench-drivers.js';
import { realClock } from '../../src/clock/real-clock.js';
import type { ConnectionAddress } from '../../src/files/bench.js';
import { formatAddress } from '../../src/files/connection-address.js';
import { readBench } from '../../src/files/read-bench.js';
import { openSerial } from '../../src/instrument/serial-connection.js';
import { withoutSocat } from '../instrument/fixtures/serve-pty.js';
import { type QuirkyInstrument, quirkyInstrument } from '../instrument/quirks/quirky-instrument.js';
import { quirkyLoad } from '../instrument/quirks/quirky-load.js';
import { serveQuirkyPty, serveQuirkyTcp } from '../instrument/quirks/serve-quirky.js';
import { benchFile, railproof } from './at-a-socket.js';

vi.setConfig({ testTimeout: 60_000 });

const wire =
  'wire: { send-end: "\\n", reply-end: "\\r\\n", gap: 10 ms, timeout: 5 s, echo: true, prompt: "> ", serial: { baud: 57600, stop: 2, dtr: on } }';

/** A load that repeats each message and sends a prompt, with its input on, and the bench that it stands on. */
async function atBench(serve: (instrument: QuirkyInstrument) => Promise<ConnectionAddress>) {
  const { knows, state } = quirkyLoad();
  state.input = '1';
  const manners = { echo: '\r\n', prompt: '> ', replyEnd: '\r\n', thinks: 0.005, perByte: 0.0002 } as const;
  const quirky = quirkyInstrument(manners, knows, realClock);
  const address = await serve(quirky);
  const folder = mkdtempSync(join(tmpdir(), 'railproof-quirky-'));
  onTestFinished(() => {
    rmSync(folder, { recursive: true, force: true });
  });
  const shipped = readFileSync(new URL('../../drivers/load-input-scpi.yaml', import.meta.url), 'utf8');
  writeFileSync(join(folder, 'driver.yaml'), shipped.replace(/^wire: .*$/m, wire));
  return { bench: benchFile(folder, formatAddress(address)), address, quirky, state };
}

describe.each<[string, (instrument: QuirkyInstrument) => Promise<ConnectionAddress>]>([
  ['TCP', serveQuirkyTcp],
  ['a pseudo-terminal', serveQuirkyPty],
])('a load with an echo and a prompt over %s', (line, serve) => {
  const on = it.skipIf(line !== 'TCP' && withoutSocat);

  on('is made safe, and read back', async () => {
    const { bench, quirky, state } = await atBench(serve);
    const { status, stdout, stderr } = await railproof('safe', '--bench', bench);
    expect(stdout).toMatch(/is off; it was read back\.\n$/);
    expect([status, stderr, state.input]).toEqual([0, '', '0']);
    expect(quirky.heard.slice(0, 3)).toEqual(['', 'INP OFF', '*IDN?']);
  });

  on('is switched off by the watchman, spoken to as its driver says', async () => {
    const { bench, address, state } = await atBench(serve);
    if (address.kind === 'serial') await dieInTheMiddleOfAMessage(address);
    const file = await readBench(bench);
    const drivers = planDrivers(await readBenchDrivers(file));
    const folder = join(dirname(bench), 'record');
    const watchman = spawn(process.execPath, ['dist/cli/watchman-main.js', String(process.pid)]);
    onTestFinished(() => void watchman.kill('SIGKILL'));
    const said: string[] = [];
    watchman.stderr.on('data', (bytes) => said.push(String(bytes)));
    watchman.stdin.write(`${orderText({ folder, bench: file.value, driver: drivers.load })}\n`);
    await once(watchman.stdout, 'data');
    watchman.stdin.end();
    await once(watchman, 'exit');
    expect(state.input).toBe('0');
    expect(said.join('')).toMatch(/switched the load off .*s later and read it back\./);
    if (address.kind !== 'serial') return;
    const { stdout } = spawnSync('stty', ['-F', address.path, '-a'], { encoding: 'utf8' });
    expect(stdout).toContain('speed 57600 baud');
    expect(stdout).toContain(' cstopb');
    expect(existsSync(folder)).toBe(false);
  });
});

async function dieInTheMiddleOfAMessage(
  address: Extract<ConnectionAddress, { kind: 'serial' }>,
): Promise<void> {
  const connection = await openSerial(address);
  await connection.write(Buffer.from('MEAS:VO'));
  await connection.close();
}
