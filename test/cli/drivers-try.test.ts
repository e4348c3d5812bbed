import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import { formatAddress } from '../../src/files/connection-address.js';
import { parseDriver } from '../../src/files/read-driver.js';
import { withoutSocat } from '../instrument/fixtures/serve-pty.js';
import { type Knows, quirkyInstrument, type Quirks } from '../instrument/quirks/quirky-instrument.js';
import { quirkyLoad } from '../instrument/quirks/quirky-load.js';
import { serveQuirkyPty, serveQuirkyTcp } from '../instrument/quirks/serve-quirky.js';
import { lastLine, railproof } from './at-a-socket.js';

/** Many questions, some of them in vain, to an instrument in real time on a busy machine. */
const patience = 120_000;

const driverText = String.raw`railproof: driver 1
name: load-nursery   # the load of the workshop
role: load
summary: The load of the nursery's workshop
wire: { timeout: 600 ms }
identify: "*IDN?"
errors: { ask: "SYST:ERR?", clear: "^0\\b" }
operations:
  make-safe: ["INP OFF"]
  input-on: ["INP ON"]
  input-off: ["INP OFF"]
  current-mode: ["FUNC CURR"]   # its relays click
  set-current: ["CURR {amps}"]
readings:
  voltage: { ask: "MEAS:VOLT?", unit: V }
  current: { ask: "MEAS:CURR?", unit: A }
  input-state: { ask: "INP?", true-when: "^(1|ON)$" }
`;

async function tried(speaks: Quirks, over: 'tcp' | 'pty') {
  const load = quirkyLoad();
  const instrument = quirkyInstrument(speaks, load.knows, realClock);
  const address = await (over === 'tcp' ? serveQuirkyTcp(instrument) : serveQuirkyPty(instrument));
  const folder = mkdtempSync(join(tmpdir(), 'railproof-trial-'));
  onTestFinished(() => {
    rmSync(folder, { recursive: true, force: true });
  });
  const driver = join(folder, 'load-nursery.yaml');
  writeFileSync(driver, driverText);
  const written = join(folder, 'my-load');
  const connection = formatAddress(address);
  const trial = await railproof(
    ...['drivers', '--try', driver],
    ...['--connection', connection],
    '--write',
    written,
  );
  return { ...trial, instrument, load, driver, written };
}

type Tried = Awaited<ReturnType<typeof tried>>;

const adapted = ({ written }: Tried) => parseDriver(readFileSync(`${written}.yaml`, 'utf8'), 'my-load.yaml');

interface Row {
  readonly name: string;
  readonly speaks: Quirks;
  readonly says: RegExp;
  readonly adapted: object;
  readonly over: readonly string[];
}

const rows: readonly Row[] = [
  {
    name: 'repeats each message and sends a prompt',
    speaks: { echo: '\r\n', prompt: '> ', replyEnd: '\r\n', greets: true },
    says: /^it repeats each message before it answers\nit sends a prompt, "> "$/m,
    adapted: { wire: { echo: true, prompt: '> ', replyEnd: '\n' } },
    over: ['tcp', 'pty'],
  },
  {
    name: 'ends its replies with a return',
    speaks: { replyEnd: '\r' },
    says: /^its replies end in \\r$/m,
    adapted: { wire: { replyEnd: '\r' } },
    over: ['tcp'],
  },
  {
    name: 'hears nothing for 300 ms after a change of mode',
    speaks: { deaf: { after: /^FUNC/, lasting: 0.3 } },
    says: /^ {2}after current-mode +misses what comes too soon; (500 ms|1000 ms) later it hears$/m,
    adapted: { operations: { 'current-mode': [{ text: 'FUNC CURR', rest: 1 }] } },
    over: ['tcp', 'pty'],
  },
  {
    name: 'takes its time',
    speaks: { thinks: 0.13 },
    says: /^ {2}timeout +(1|2) s +and not 600 ms$/m,
    adapted: { role: 'load' },
    over: ['tcp'],
  },
];

describe.each([
  ['tcp', false],
  ['pty', withoutSocat],
] as const)('drivers --try over %s', (over, without) => {
  it.skipIf(without).each(rows.filter((row) => row.over.includes(over)))(
    'says of an instrument that $name what its driver lacks, and writes one that has it',
    async ({ speaks, says, adapted: expected }) => {
      const trial = await tried(speaks, over);
      expect(trial.stdout).toMatch(says);
      expect(adapted(trial)).toMatchObject({ name: 'my-load', ...expected });
      expect(lastLine(trial.stderr)).toBe('The load is off; it was read back.');
      expect(trial.load.state).toMatchObject({ input: '0', CURR: '0' });
      expect(trial.instrument.heard).not.toContain('INP ON');

      const checked = await railproof('check', `${trial.written}.yaml`);
      expect(checked.stdout).toMatch(/and right; all \d+ exchanges of its dialogue too$/m);

      const again = await railproof(
        ...['drivers', '--try', trial.driver],
        ...['--connection', `replay:${trial.written}.jsonl`],
      );
      const withoutWritten = trial.stdout.replace(/^written: .*\n/gm, '');
      expect(again.stdout).toBe(withoutWritten);
      expect(again.status).toBe(trial.status);
    },
    patience,
  );
});

/** Two channels, of which only what is told and asked after a choice is theirs; each has its own voltage. */
function twinLoad(select: RegExp) {
  const inputs = [false, false];
  let at = 0;
  const queue: string[] = [];
  const knows: Knows = (message) => {
    const chosen = select.exec(message)?.[1];
    if (chosen !== undefined) at = Number(chosen) - 1;
    else if (message === 'INP ON' || message === 'INP OFF') inputs[at] = message === 'INP ON';
    else if (message === '*IDN?') return 'NURSERY,TWIN LOAD,K1,1';
    else if (message === 'INP?') return inputs[at] === true ? '1' : '0';
    else if (message === 'MEAS:VOLT?') return `${at + 1}2.5`;
    else if (message === 'MEAS:CURR?') return '0';
    else if (message === 'SYST:ERR?') return queue.shift() ?? '0,"No error"';
    else if (!/^$|^(\*CLS|FUNC|CURR|VOLT)/.test(message)) queue.push('-113,"Undefined header"');
    return undefined;
  };
  return { knows };
}

describe('drivers --try --channel', () => {
  const trying = async (channel: string, select: RegExp) => {
    const instrument = quirkyInstrument({ gap: 0.01 }, twinLoad(select).knows, realClock);
    const connection = formatAddress(await serveQuirkyTcp(instrument, { clients: 1 }));
    const folder = mkdtempSync(join(tmpdir(), 'railproof-channel-'));
    onTestFinished(() => {
      rmSync(folder, { recursive: true, force: true });
    });
    const written = join(folder, 'twin');
    const trial = await railproof(
      ...['drivers', '--try', 'load-channel-scpi', '--channel', channel],
      ...['--connection', connection, '--write', written],
    );
    return { ...trial, instrument, written };
  };

  it(
    'speaks of that channel only, and writes what it answered as that of the channel',
    async () => {
      const { stdout, status, stderr, instrument, written } = await trying('2', /^INST:NSEL ([12])$/);
      expect(stdout).toMatch(/^understood +voltage +[\d.]+ ms +22\.5 V$/m);
      expect(lastLine(stderr)).toBe('The load is off; it was read back.');
      expect(instrument.heard).toContain('INST:NSEL 2');
      expect(instrument.heard).not.toContain('INST:NSEL 1');
      expect(status).toBe(0);
      const { dialogue } = parseDriver(readFileSync(`${written}.yaml`, 'utf8'), 'twin.yaml');
      expect(dialogue).toContainEqual({
        ...{ kind: 'reading', reading: 'voltage', channel: 2, sends: ['INST:NSEL 2', 'MEAS:VOLT?'] },
        heard: { answer: '22.5', is: { kind: 'number', value: 22.5, dimension: 'voltage' } },
      });
      expect((await railproof('check', `${written}.yaml`)).status).toBe(0);
    },
    patience,
  );

  it(
    'goes no further where the choice of the channel is refused',
    async () => {
      const { stdout, status, stderr, instrument } = await trying('2', /^CHAN ([12])$/);
      expect(stdout).toMatch(/^refused +it is off .*its channel was not chosen: -113/m);
      expect(lastLine(stderr)).toMatch(/^THE LOAD MAY STILL BE ON/);
      expect(instrument.heard).not.toContain('CURR 0');
      expect(status).toBe(69);
    },
    patience,
  );
});

describe('drivers --try --write', () => {
  it(
    'gives a pause to an instrument that drops what comes too soon, and keeps the comments',
    async () => {
      const trial = await tried({ gap: 0.01 }, 'tcp');
      expect(adapted(trial).wire.gap).toBeGreaterThanOrEqual(0.01);
      const text = readFileSync(`${trial.written}.yaml`, 'utf8');
      expect(text).toContain('# the load of the workshop');
      expect(text).toContain('# its relays click');
      expect(trial.stdout).toContain('What its driver file should say');
    },
    patience,
  );

  it(
    'writes over nothing, and tries nothing for nothing',
    async () => {
      const { written, driver, instrument } = await tried({}, 'tcp');
      expect(existsSync(`${written}.jsonl`)).toBe(true);
      const before = readFileSync(`${written}.yaml`, 'utf8');
      const heard = instrument.heard.length;
      const { status, stderr } = await railproof(
        ...['drivers', '--try', driver, '--connection', 'tcp://127.0.0.1:9', '--write', written],
      );
      expect(stderr).toMatch(/my-load\.yaml: this file is there already, and is not written over/);
      expect(status).toBe(64);
      expect(readFileSync(`${written}.yaml`, 'utf8')).toBe(before);
      expect(instrument.heard).toHaveLength(heard);
    },
    patience,
  );

  it.each([
    [['--try', 'load-input-scpi'], '--try needs --connection'],
    [['--match', 'tcp://127.0.0.1:9', '--try', 'load-input-scpi'], '--try and --match are two things'],
    [['--write', 'my-load'], '--channel and --write go with --try'],
    [
      ['--try', 'load-input-scpi', '--connection', 'tcp://127.0.0.1:9', '--channel', '2'],
      'load-input-scpi has no channels',
    ],
    [
      ['--try', 'load-channel-scpi', '--connection', 'tcp://127.0.0.1:9', '--channel', '7'],
      'the channels of load-channel-scpi are 1 to 4',
    ],
    [
      ['--try', 'load-input-scpi', '--connection', 'tcp://127.0.0.1:9', '--channel', 'two'],
      '--channel needs the number of a channel',
    ],
  ])('refuses %j', async (options, why) => {
    const { status, stderr } = await railproof('drivers', ...options);
    expect(stderr).toContain(why);
    expect(status).toBe(64);
  });
});
