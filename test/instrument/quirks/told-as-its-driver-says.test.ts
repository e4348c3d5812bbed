import { describe, expect, it, onTestFinished } from 'vitest';
import { realClock } from '../../../src/clock/real-clock.js';
import { driverOfChannel } from '../../../src/files/driver-channel.js';
import type { Driver } from '../../../src/files/driver.js';
import { parseDriver } from '../../../src/files/read-driver.js';
import type { Connection } from '../../../src/instrument/connection.js';
import { Instrument } from '../../../src/instrument/instrument.js';
import { openSerial } from '../../../src/instrument/serial-connection.js';
import { openTcp } from '../../../src/instrument/tcp-connection.js';
import { withoutSocat } from '../fixtures/serve-pty.js';
import { type Knows, type QuirkyInstrument, quirkyInstrument, type Quirks } from './quirky-instrument.js';
import { serveQuirkyPty, serveQuirkyTcp } from './serve-quirky.js';

/** A driver file of a load; what is given takes the place of what stands here. */
function load(parts: Readonly<Record<string, string>> = {}, timeout = '2 s'): Driver {
  const usual: Readonly<Record<string, string>> = {
    errors: 'none',
    'set-current': '["CURR {amps}"]',
    'current-mode': '["FUNC CURR"]',
    voltage: '{ ask: "MEAS:VOLT?", unit: V }',
    ...parts,
  };
  const top = ['remote', 'local', 'errors', 'ready', 'channels', 'settling'];
  return parseDriver(
    [
      ...[
        'railproof: driver 1',
        'name: quirky',
        'role: load',
        'summary: A load with manners',
        'identify: "*IDN?"',
      ],
      `wire: { send-end: "\\n", reply-end: "\\n", gap: 0 ms, timeout: ${timeout}${usual['wire'] ?? ''} }`,
      ...top.flatMap((key) => (usual[key] === undefined ? [] : [`${key}: ${usual[key]}`])),
      'operations:',
      '  make-safe: ["INP OFF"]',
      '  input-on: ["INP ON"]',
      '  input-off: ["INP OFF"]',
      `  current-mode: ${usual['current-mode']}`,
      `  set-current: ${usual['set-current']}`,
      'readings:',
      `  voltage: ${usual['voltage']}`,
      '  current: { ask: "MEAS:CURR?", unit: A }',
      '  input-state: { ask: "INP?", true-when: "^1$" }',
    ].join('\n'),
    'quirky.yaml',
  );
}

const after = (milliseconds: number): Promise<void> =>
  new Promise((resolve) => {
    setTimeout(resolve, milliseconds);
  });

const lines: [string, (instrument: QuirkyInstrument) => Promise<Connection>][] = [
  ['TCP', async (instrument) => openTcp(await serveQuirkyTcp(instrument))],
  ['a pseudo-terminal', async (instrument) => openSerial(await serveQuirkyPty(instrument))],
];

describe.each(lines)('over %s', (line, connect) => {
  const on = it.skipIf(line !== 'TCP' && withoutSocat);

  async function opened(knows: Knows, driver: Driver, quirks: Quirks = { thinks: 0.005 }) {
    const quirky = quirkyInstrument(quirks, knows, realClock);
    const notices: string[] = [];
    const instrument = await Instrument.open({
      ...{ role: 'load', driver, clock: realClock },
      connection: await connect(quirky),
      onNotice: (text) => notices.push(text),
    });
    onTestFinished(() => instrument.close());
    return { instrument, quirky, notices };
  }

  on(
    'a load that heeds nothing before it is in remote is put there first, and left to its panel last',
    async () => {
      const state = { remote: false, input: false };
      const { instrument, quirky } = await opened(
        (message) => {
          if (message === 'SYST:LOC') state.remote = false;
          // Whatever it is asked takes it into remote again.
          else if (message === 'SYST:REM' || message.endsWith('?')) state.remote = true;
          if (message === 'INP ON' && state.remote) state.input = true;
          if (message === 'INP OFF' && state.remote) state.input = false;
          return { '*IDN?': 'NURSERY,LOAD,K1,1', 'INP?': state.input ? '1' : '0' }[message];
        },
        load({ remote: '[{ send: "SYST:REM", rest: 400 ms }]', local: '["SYST:LOC"]' }),
        { thinks: 0.005, deaf: { after: /^SYST:REM$/, lasting: 0.05 } },
      );
      await instrument.perform('input-on');
      expect(await instrument.flag('input-state')).toBe(true);
      await instrument.perform('make-safe');
      expect(await instrument.flag('input-state')).toBe(false);
      await instrument.release();
      await instrument.close();
      await expect.poll(() => quirky.heard.at(-1), { timeout: 10_000 }).toBe('SYST:LOC');
      expect(quirky.heard.slice(0, 3)).toEqual(['', 'SYST:REM', '*IDN?']);
      expect([state, quirky.missed]).toEqual([{ remote: false, input: false }, []]);
    },
  );

  on('so is one that also echoes what it hears, an empty message too, and prompts for the next', async () => {
    const { instrument, quirky, notices } = await opened(
      (message) => ({ '*IDN?': 'NURSERY,LOAD,K1,1', 'MEAS:VOLT?': '15.1' })[message],
      load({ remote: '["SYST:REM"]', local: '["SYST:LOC"]', wire: ', echo: true, prompt: "> "' }),
      { thinks: 0.005, echo: '\r\n', prompt: '> ', replyEnd: '\r\n', greets: true },
    );
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
    await instrument.release();
    await instrument.close();
    await expect.poll(() => quirky.heard.at(-1), { timeout: 10_000 }).toBe('SYST:LOC');
    expect(quirky.heard).toEqual(['', 'SYST:REM', '*IDN?', 'MEAS:VOLT?', 'SYST:LOC']);
    expect(notices).toEqual([]);
  });

  on(
    'of a load with several channels only the one that is meant is spoken to, whoever turns the knob',
    async () => {
      const inputs = [false, false, false, false];
      const knob = { at: 0 };
      const { instrument } = await opened(
        (message) => {
          const channel = /^INST:NSEL (\d)$/.exec(message)?.[1];
          if (channel !== undefined) knob.at = Number(channel) - 1;
          if (message === 'INP ON' || message === 'INP OFF') inputs[knob.at] = message === 'INP ON';
          const answer = { '*IDN?': 'NURSERY,LOAD,K1,1', 'INP?': inputs[knob.at] ? '1' : '0' }[message];
          return message === 'MEAS:VOLT?' ? `${knob.at + 1}5.1` : answer;
        },
        driverOfChannel(load({ channels: '{ select: ["INST:NSEL {channel}"], to: 4 }' }), 3),
      );
      await instrument.perform('input-on');
      expect(await instrument.flag('input-state')).toBe(true);
      knob.at = 0;
      expect(await instrument.flag('input-state')).toBe(true);
      knob.at = 1;
      expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 35.1 });
      expect(inputs).toEqual([false, false, true, false]);
      knob.at = 1;
      await instrument.perform('make-safe');
      expect(await instrument.flag('input-state')).toBe(false);
      expect(inputs).toEqual([false, false, false, false]);
    },
  );

  on(
    'a load that answers *OPC? once it is done is waited for, far beyond the timeout of its line',
    async () => {
      const state = { current: 0, until: 0 };
      const { instrument } = await opened(
        async (message) => {
          const amps = /^CURR (.+)$/.exec(message)?.[1];
          if (amps !== undefined) {
            state.until = realClock.now() + 1.7;
            setTimeout(() => (state.current = Number(amps)), 1600);
          }
          if (message === '*OPC?') await after(1000 * Math.max(0, state.until - realClock.now()));
          return { '*IDN?': 'NURSERY,LOAD,K1,1', '*OPC?': '1', 'MEAS:CURR?': String(state.current) }[message];
        },
        load(
          {
            ready: '{ ask: "*OPC?", when: "^1$", within: 20 s }',
            'set-current': '[{ send: "CURR {amps}", until: ready }]',
          },
          '1 s',
        ),
      );
      await instrument.perform('set-current', { amps: 4 });
      expect(await instrument.read('current')).toEqual({ kind: 'value', value: 4 });
    },
  );

  on('a load that says in its status byte when it has measured is asked until it has', async () => {
    const state = { doneAt: Infinity };
    const { instrument, quirky } = await opened(
      (message) => {
        if (message === 'INIT') state.doneAt = realClock.now() + 0.5;
        const isDone = realClock.now() >= state.doneAt;
        // Fetched too early it answers with what it read before.
        return {
          '*IDN?': 'NURSERY,LOAD,K1,1',
          '*STB?': isDone ? '+16' : '+0',
          'FETC?': isDone ? '15.1' : '0.0',
        }[message];
      },
      load({
        ready: '{ ask: "*STB?", bits-set: 16, every: 50 ms, within: 20 s }',
        voltage: '{ ask: [{ send: "INIT", until: ready }, "FETC?"], unit: V }',
      }),
    );
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
    expect(quirky.heard.filter((message) => message === '*STB?').length).toBeGreaterThan(2);
  });

  on('a load that is never ready ends the act with an error that says what it answered', async () => {
    const { instrument } = await opened(
      (message) => ({ '*IDN?': 'NURSERY,LOAD,K1,1', '*STB?': '4' })[message],
      load({
        ready: '{ ask: "*STB?", bits-clear: 4, every: 50 ms, within: 400 ms }',
        'current-mode': '[{ send: "FUNC CURR", until: ready }]',
      }),
    );
    await expect(instrument.perform('current-mode')).rejects.toMatchObject({
      code: 'NOT_READY',
      told: 'FUNC CURR',
      answer: '4',
    });
  });

  on('a meter whose range must be chosen is set to the one that holds what it reads', async () => {
    const state = { range: 0, atProbes: 1.2345 };
    const { instrument, quirky } = await opened(
      (message) => {
        const range = /^VOLT:RANG (\d+)$/.exec(message)?.[1];
        if (range !== undefined) state.range = Number(range);
        const reading =
          state.atProbes > state.range ? '9.9E37' : state.atProbes.toFixed(state.range > 2 ? 2 : 4);
        return { '*IDN?': 'NURSERY,LOAD,K1,1', 'MEAS:VOLT?': reading }[message];
      },
      load({
        settling: '1 s',
        voltage:
          '{ ask: "MEAS:VOLT?", unit: V, ranges: [{ up-to: 2 V, select: ["VOLT:RANG 2"] }, { up-to: 200 V, select: ["VOLT:RANG 200"] }] }',
      }),
      { thinks: 0.005, deaf: { after: /^VOLT:RANG/, lasting: 0.05 } },
    );
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 1.23 });
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 1.2345 });
    state.atProbes = 15.1;
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
    expect(quirky.heard.filter((message) => message.startsWith('VOLT:RANG'))).toEqual([
      ...['VOLT:RANG 200', 'VOLT:RANG 2', 'VOLT:RANG 200'],
    ]);
    expect(quirky.missed).toEqual([]);
  });

  on('a load that gives out copies of its last mean is never asked before it has a new one', async () => {
    const window = 0.2;
    const knows: Knows = (message) =>
      ({ '*IDN?': 'NURSERY,LOAD,K1,1', 'MEAS:VOLT?': String(Math.floor(realClock.now() / window)) })[message];
    const polled = async (averaging: string, isEnough: (read: readonly unknown[]) => boolean) => {
      const { instrument } = await opened(
        knows,
        load({ voltage: `{ ask: "MEAS:VOLT?", unit: V${averaging} }` }),
      );
      const read: unknown[] = [];
      while (!isEnough(read)) {
        const measured = await instrument.read('voltage');
        read.push(measured.kind === 'value' ? measured.value : measured.kind);
      }
      return read;
    };
    const eight = (read: readonly unknown[]): boolean => read.length === 8;
    const hasCopies = (read: readonly unknown[]): boolean => new Set(read).size < read.length;
    expect(hasCopies(await polled('', hasCopies))).toBe(true);
    expect(hasCopies(await polled(', averaging: 200 ms', eight))).toBe(false);
  });

  on(
    'a load that answers with units and prefixes is read to the last digit, and never guessed at',
    async () => {
      const answers = ['12.031V', '12.031 mV', '+1.2031E1V', '12031 UV', '12.031 kA'];
      const { instrument } = await opened(
        (message) => (message === 'MEAS:VOLT?' ? answers.shift() : { '*IDN?': 'NURSERY,LOAD,K1,1' }[message]),
        load({
          voltage: '{ ask: "MEAS:VOLT?", unit: V, pattern: "^(?<value>[-+0-9.Ee]+) ?(?<unit>[a-zA-Z]+)$" }',
        }),
      );
      const read = [];
      for (let count = 0; count < 4; count++) read.push(await instrument.read('voltage'));
      expect(read).toEqual([12.031, 0.012031, 12.031, 0.012031].map((value) => ({ kind: 'value', value })));
      await expect(instrument.read('voltage')).rejects.toMatchObject({
        code: 'REPLY_NOT_UNDERSTOOD',
        reply: '12.031 kA',
        part: { driver: 'quirky', section: 'readings', name: 'voltage' },
      });
    },
  );

  on('a load without an error queue is asked for its register, in the words of the standard', async () => {
    const state = { register: 128 };
    const { instrument, notices } = await opened(
      (message) => {
        if (message !== '*ESR?') {
          if (message === 'CURR 400') state.register |= 16;
          return { '*IDN?': 'NURSERY,LOAD,K1,1' }[message];
        }
        const { register } = state;
        state.register = 0;
        return String(register);
      },
      load({ errors: '{ ask: "*ESR?", error-bits: 60 }' }),
    );
    await instrument.perform('set-current', { amps: 4 });
    await expect(instrument.perform('set-current', { amps: 400 })).rejects.toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
      entries: [{ number: -200, text: 'Execution error' }],
      after: ['CURR 400'],
    });
    await instrument.perform('set-current', { amps: 4 });
    expect(notices).toEqual([]);
  });

  on(
    'a load that grumbles at what it does may grumble, and one that sulks after an error is cleared',
    async () => {
      const state = { current: 0, sulks: false };
      const queue: string[] = [];
      const { instrument, notices } = await opened(
        (message) => {
          const amps = Number(/^CURR (.+)$/.exec(message)?.[1] ?? NaN);
          if (message === '*CLS') state.sulks = false;
          if (amps > 40) {
            queue.push('-222,"Data out of range"');
            state.sulks = true;
          } else if (amps >= 0 && !state.sulks) {
            queue.push('-221,"Settings conflict"');
            state.current = amps;
          }
          if (message === 'SYST:ERR?') return queue.shift() ?? '0,"No error"';
          return { '*IDN?': 'NURSERY,LOAD,K1,1', 'MEAS:CURR?': String(state.current) }[message];
        },
        load({ errors: '{ ask: "SYST:ERR?", clear: "^0", harmless: "^-221", afterwards: ["*CLS"] }' }),
      );
      await instrument.perform('set-current', { amps: 4 });
      expect(notices).toEqual([
        expect.stringMatching(/reports -221 "Settings conflict", which its driver calls harmless$/),
      ]);
      await expect(instrument.perform('set-current', { amps: 400 })).rejects.toMatchObject({
        code: 'INSTRUMENT_COMPLAINED',
        entries: [{ number: -222 }],
      });
      await instrument.perform('set-current', { amps: 2 });
      expect(await instrument.read('current')).toEqual({ kind: 'value', value: 2 });
    },
  );

  on('a load that drops what comes too soon after a mode change, and says so, is told it again', async () => {
    const state = { current: 0, busyUntil: 0 };
    const queue: string[] = [];
    const { instrument, quirky, notices } = await opened(
      (message) => {
        const amps = /^CURR (.+)$/.exec(message)?.[1];
        // From when the one before was done with: a busy machine makes it no easier.
        if (message === 'FUNC CURR') state.busyUntil = realClock.now() + 0.3;
        if (amps !== undefined && realClock.now() < state.busyUntil)
          queue.push('-363,"Input buffer overrun"');
        else if (amps !== undefined) state.current = Number(amps);
        if (message === 'SYST:ERR?') return queue.shift() ?? '0,"No error"';
        return { '*IDN?': 'NURSERY,LOAD,K1,1', 'MEAS:CURR?': String(state.current) }[message];
      },
      load({
        errors: '{ ask: "SYST:ERR?", clear: "^0", again: "^-363" }',
        'set-current': '["CURR {amps}"]',
      }),
    );
    await instrument.perform('current-mode');
    await instrument.perform('set-current', { amps: 4 });
    expect(await instrument.read('current')).toEqual({ kind: 'value', value: 4 });
    const told = quirky.heard.filter((message) => message === 'CURR 4').length;
    expect(notices).toHaveLength(told - 1);
  });
});
