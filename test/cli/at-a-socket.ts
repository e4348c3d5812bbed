import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { PassThrough } from 'node:stream';
import { onTestFinished } from 'vitest';
import { main } from '../../src/cli/program.js';
import type { Streams } from '../../src/cli/streams.js';
import { serveTcp } from '../instrument/fixtures/serve-tcp.js';
import type { Talker } from '../instrument/fixtures/talkers.js';

/** A load on a socket of its own that works as the standard words say: what it heard, and whether it is on. */
export interface LoadAtSocket {
  readonly heard: string[];
  readonly state: { input: '0' | '1'; readonly queue: string[] };
  readonly bench: string;
  /** The shipped driver with a short patience, and with what a test wants to be otherwise in it. */
  readonly driver: string;
  readonly address: string;
}

type Quirk = (
  message: string,
  load: LoadAtSocket['state'],
) => { readonly answer: string } | 'hang-up' | 'ignore' | undefined;

/** `quirk` answers, hangs up or ignores a message in the place of what a good load does. */
export async function loadAtSocket(
  quirk: Quirk = () => undefined,
  change: (driver: string) => string = (text) => text,
): Promise<LoadAtSocket> {
  const heard: string[] = [];
  const state: LoadAtSocket['state'] = { input: '1', queue: [] };
  const talker: Talker = (message, line) => {
    heard.push(message);
    const odd = quirk(message, state);
    if (odd === 'hang-up') line.hangUp();
    if (odd === 'hang-up' || odd === 'ignore') return;
    const answer = odd?.answer ?? obey(message, state);
    if (answer !== undefined) line.say(`${answer}\n`);
  };
  const { port } = await serveTcp(talker);
  const folder = mkdtempSync(join(tmpdir(), 'railproof-socket-'));
  onTestFinished(() => {
    rmSync(folder, { recursive: true, force: true });
  });
  const driver = join(folder, 'driver.yaml');
  const shipped = readFileSync(new URL('../../drivers/load-input-scpi.yaml', import.meta.url), 'utf8');
  writeFileSync(driver, change(shipped.replace('timeout: 1 s', 'timeout: 300 ms')));
  const address = `tcp://127.0.0.1:${port}`;
  return { heard, state, driver, address, bench: benchFile(folder, address) };
}

export function benchFile(folder: string, address: string): string {
  const bench = join(folder, 'bench.yaml');
  writeFileSync(
    bench,
    [
      'railproof: bench 1',
      'name: nursery bench',
      'instruments:',
      `  load: { driver: ./driver.yaml, connection: '${address}' }`,
      'leads: { resistance: 35 mΩ, uncertainty: 5 mΩ }',
      'voltage-from: load-terminals',
      'limits: { voltage: 60 V, current: 8 A, power: 150 W }',
      '',
    ].join('\n'),
  );
  return bench;
}

function obey(message: string, state: LoadAtSocket['state']): string | undefined {
  const answers: Readonly<Record<string, () => string>> = {
    '*IDN?': () => 'NURSERY,LOAD,K1,1.0',
    'SYST:ERR?': () => state.queue.shift() ?? '0,"No error"',
    'INP?': () => state.input,
    'MEAS:VOLT?': () => '15.21',
    'MEAS:CURR?': () => '0.000',
  };
  if (message === 'INP OFF') state.input = '0';
  if (message === 'INP ON') state.input = '1';
  if (/^(LAMP|DOOR)/.test(message)) state.queue.push('-113,"Undefined header"');
  return answers[message]?.();
}

/** A command in this process, with streams of its own. */
export async function railproof(
  ...args: string[]
): Promise<{ readonly status: number; readonly stdout: string; readonly stderr: string }> {
  const [stdin, stdout, stderr] = [0, 1, 2].map(
    () => new PassThrough({ encoding: 'utf8', highWaterMark: 1 << 24 }),
  );
  const streams = { stdin, stdout, stderr, environment: {} } as unknown as Streams;
  const status = await main(args, streams);
  return { status, stdout: String(stdout?.read() ?? ''), stderr: String(stderr?.read() ?? '') };
}

export const lastLine = (text: string): string => text.trimEnd().split('\n').at(-1) ?? '';
