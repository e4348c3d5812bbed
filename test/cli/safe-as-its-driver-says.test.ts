import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import { realClock } from '../../src/clock/real-clock.js';
import { type Knows, quirkyInstrument } from '../instrument/quirks/quirky-instrument.js';
import { serveQuirkyTcp } from '../instrument/quirks/serve-quirky.js';
import { railproof } from './in-process.js';

/** A bench with nothing but this load. */
async function bench(driver: string, port: number, more = ''): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'railproof-safe-'));
  onTestFinished(() => rm(folder, { recursive: true, force: true }));
  const path = join(folder, 'workshop.yaml');
  await writeFile(
    path,
    [
      ...['railproof: bench 1', 'name: Nursery workshop', 'instruments:', '  load:'],
      ...[
        `    driver: ${driver}`,
        `    connection: tcp://127.0.0.1:${port}`,
        ...(more === '' ? [] : [`    ${more}`]),
      ],
      ...[
        'leads: { resistance: 40 mOhm, uncertainty: 5 mOhm }',
        'voltage-from: load-terminals',
        'limits: { voltage: 40 V, current: 8 A, power: 120 W }',
        '',
      ],
    ].join('\n'),
  );
  return path;
}

/** A load of four channels, all of them on; one is selected at a time. */
function loadOfFour() {
  const inputs = [true, true, true, true];
  let selected = 0;
  const knows: Knows = (message) => {
    const channel = /^INST:NSEL (\d)$/.exec(message)?.[1];
    if (channel !== undefined) selected = Number(channel) - 1;
    if (message === 'INP OFF') inputs[selected] = false;
    return {
      '*IDN?': 'NURSERY,LOAD,K4,1',
      'SYST:ERR?': '0,"No error"',
      'INP?': inputs[selected] === true ? '1' : '0',
    }[message];
  };
  return { inputs, instrument: quirkyInstrument({}, knows, realClock) };
}

describe('railproof safe', () => {
  it('switches off the channel that the bench names, and no other', async () => {
    const { inputs, instrument } = loadOfFour();
    const { port } = await serveQuirkyTcp(instrument);
    const { status, stdout } = await railproof(
      'safe',
      '--bench',
      await bench('load-channel-scpi', port, 'channel: 3'),
    );
    expect([status, stdout]).toEqual([0, `The load at tcp://127.0.0.1:${port} is off; it was read back.\n`]);
    expect(inputs).toEqual([true, true, false, true]);
  });

  it('puts a load in remote before it makes it safe, and leaves it to its panel', async () => {
    const state = { remote: false, input: true };
    const instrument = quirkyInstrument(
      {},
      (message) => {
        if (message === 'SYST:LOC') state.remote = false;
        if (message === 'SYST:REM') state.remote = true;
        if (message === 'INP OFF' && state.remote) state.input = false;
        return {
          '*IDN?': 'NURSERY,LOAD,K5,1',
          'SYST:ERR?': '0,"No error"',
          'INP?': state.input ? '1' : '0',
        }[message];
      },
      realClock,
    );
    const { port } = await serveQuirkyTcp(instrument);
    const { status } = await railproof('safe', '--bench', await bench('load-remote-scpi', port));
    expect(status).toBe(0);
    await expect.poll(() => instrument.heard.at(-1), { timeout: 10_000 }).toBe('SYST:LOC');
    expect(instrument.heard.slice(0, 3)).toEqual(['', 'SYST:REM', 'INP OFF']);
    expect(state).toEqual({ remote: false, input: false });
  });
});

describe('railproof check', () => {
  it.each([
    [
      '',
      /workshop\.yaml:5:5: instruments\.load: the driver load-channel-scpi is for instruments with several/,
    ],
    [
      'channel: 5',
      /workshop\.yaml:7:14: instruments\.load\.channel: found 5; the channels .* go from 1 to 4/,
    ],
  ])('names the line of a bench that says "%s" of a load with four channels', async (more, message) => {
    const { status, stderr } = await railproof('check', await bench('load-channel-scpi', 5025, more));
    expect(status).toBe(65);
    expect(stderr).toMatch(message);
  });
});
