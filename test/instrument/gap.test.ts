import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import type { Driver } from '../../src/files/driver.js';
import { expression } from '../../src/files/expression.js';
import { ConnectionLostError, InstrumentUnreachableError } from '../../src/instrument/connection-errors.js';
import type { Connection } from '../../src/instrument/connection.js';
import { Instrument } from '../../src/instrument/instrument.js';
import { toyDriver, toyLoad } from './fixtures/toy-load.js';
import { type Arrival, VirtualLine } from './fixtures/virtual-line.js';

/** A line that is there until it is cut, or until it is closed. */
class CuttableLine implements Connection {
  readonly address = 'virtual:';
  readonly #line: VirtualLine;
  #gone: string | undefined;

  constructor(line: VirtualLine) {
    this.#line = line;
  }

  cut(reason = 'the other side hung up'): void {
    this.#gone ??= reason;
  }

  async write(bytes: Uint8Array): Promise<number> {
    if (this.#gone !== undefined) throw this.#lost(this.#gone);
    return this.#line.write(bytes);
  }

  async receive(within: number): Promise<Uint8Array | undefined> {
    if (this.#gone !== undefined) throw this.#lost(this.#gone);
    return this.#line.receive(within);
  }

  close(): Promise<void> {
    this.cut('it was closed here');
    return Promise.resolve();
  }

  #lost(reason: string): ConnectionLostError {
    return new ConnectionLostError({ address: this.address, reason });
  }
}

interface Reached {
  readonly react?: (message: string, at: number) => readonly Arrival[];
}

/** `back` says what is at the address when it is opened again, from 1; undefined is nobody. */
async function reached(
  back: (attempt: number) => Reached | undefined = () => ({}),
  options: { driver?: Partial<Driver>; signal?: AbortSignal } = {},
) {
  const clock = new VirtualClock(new Date(0));
  const load = toyLoad();
  const lines: CuttableLine[] = [];
  const notices: string[] = [];
  const withins: number[] = [];
  const wanted = { now: true };
  let gaps = 0;
  const open = ({ react = load.react }: Reached): CuttableLine => {
    const line = new CuttableLine(new VirtualLine(clock, react));
    lines.push(line);
    return line;
  };
  const instrument = await Instrument.open({
    role: 'load',
    driver: { ...toyDriver, ...options.driver },
    connection: open({}),
    clock,
    wayBack: {
      connect: (within) => {
        withins.push(within);
        const there = back(withins.length);
        return there === undefined
          ? Promise.reject(new InstrumentUnreachableError({ address: 'virtual:', reason: 'nobody' }))
          : Promise.resolve(open(there));
      },
      isWanted: () => wanted.now,
      ...(options.signal && { signal: options.signal }),
      onGap: () => (gaps += 1),
      onNotice: (text) => notices.push(text),
    },
  });
  const cut = (): void => {
    lines.at(-1)?.cut();
  };
  return { instrument, load, clock, lines, notices, withins, wanted, cut, gaps: () => gaps };
}

const answering =
  (changed: Readonly<Record<string, string>>): NonNullable<Reached['react']> =>
  (message, at) => {
    const answer = changed[message] ?? toyLoad().react(message, at)[0]?.bytes;
    return answer === undefined ? [] : [{ at, bytes: Buffer.from(answer) }];
  };

describe('an instrument whose connection drops', () => {
  it('is opened again at once, prepared, told its settings and asked again', async () => {
    const { instrument, load, clock, notices, cut, gaps } = await reached();
    await instrument.perform('current-mode');
    await instrument.perform('set-current', { amps: 2 });
    await instrument.perform('set-current', { amps: 3 });
    load.told.length = 0;
    cut();
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
    expect(load.told.filter((message) => message !== 'SYST:ERR?')).toEqual([
      '*IDN?',
      '*CLS',
      'FUNC CURR',
      'CURR 3',
      'MEAS:VOLT?',
    ]);
    expect(clock.now()).toBeLessThan(0.2);
    expect(notices).toEqual([
      expect.stringMatching(
        /^virtual:: connection lost: the other side hung up; it answers again after \d+ ms$/,
      ),
    ]);
    expect(gaps()).toBe(1);
  });

  it('is not told in one mode what was set in another', async () => {
    const { instrument, load, cut } = await reached();
    await instrument.perform('current-mode');
    await instrument.perform('set-current', { amps: 2 });
    await instrument.perform('voltage-mode');
    await instrument.perform('set-voltage', { volts: 14 });
    await instrument.perform('input-on');
    load.told.length = 0;
    cut();
    await instrument.read('voltage');
    expect(load.told.filter((message) => !message.endsWith('?'))).toEqual(['*CLS', 'FUNC VOLT', 'VOLT 14']);
  });

  it('does over again what it was told as the connection dropped', async () => {
    const { instrument, load, cut } = await reached();
    cut();
    await instrument.perform('set-current', { amps: 1.5 });
    expect(load.state.CURR).toBe('1.5');
  });

  it('is sought after longer and longer pauses, and for some seconds in all', async () => {
    const { instrument, clock, notices, withins, cut } = await reached(() => undefined);
    const began = clock.now();
    cut();
    await expect(instrument.read('voltage')).rejects.toThrow('connection lost: the other side hung up');
    expect(clock.now() - began).toBeCloseTo(3.75, 6);
    // Nor is any one connection waited for any longer than the rest of that.
    expect(withins.map((within) => Number(within.toFixed(2)))).toEqual([5, 4.75, 4.25, 3.25, 1.25]);
    expect(notices.at(-1)).toMatch(/; tried again 5 times in 3\.8 s, in vain: virtual:: nobody$/);
  });

  it('is refused when another one answers', async () => {
    const { instrument, cut } = await reached(() => ({
      react: answering({ '*IDN?': 'NURSERY,LOAD,K2,1.0\n' }),
    }));
    cut();
    await expect(instrument.read('voltage')).rejects.toMatchObject({
      code: 'WRONG_INSTRUMENT',
      identity: 'NURSERY,LOAD,K2,1.0',
    });
  });

  it('is found again also when its first word is garbled', async () => {
    let asked = 0;
    const toy = toyLoad();
    const { instrument, cut } = await reached(() => ({
      react: (message, at) =>
        message === '*IDN?' && ++asked === 1
          ? [{ at, bytes: Buffer.from('NURS~RY,LO\n') }]
          : toy.react(message, at),
    }));
    cut();
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
  });

  it('ends with its own complaint, and is not told the same again', async () => {
    const { instrument, load, gaps } = await reached();
    load.told.length = 0;
    await expect(instrument.perform('protect-power', { watts: 9 })).rejects.toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
    });
    expect(load.told.filter((message) => message === 'POW:PROT 9')).toHaveLength(1);
    expect(gaps()).toBe(0);
  });

  it('keeps those waiting whose turn it is not, and they find it as if nothing had been', async () => {
    const { instrument, cut, gaps } = await reached((attempt) => (attempt < 3 ? undefined : {}));
    cut();
    const [voltage, on] = await Promise.all([instrument.read('voltage'), instrument.flag('input-state')]);
    expect([voltage, on]).toEqual([{ kind: 'value', value: 15.1 }, false]);
    expect(gaps()).toBe(1);
  });
});

describe('an instrument that is sought', () => {
  it('is sought no longer once the run is told to stop', async () => {
    const stop = new AbortController();
    const { instrument, clock, cut } = await reached(
      (attempt) => {
        if (attempt === 2) stop.abort(new Error('enough'));
        return undefined;
      },
      { signal: stop.signal },
    );
    const began = clock.now();
    cut();
    await expect(instrument.read('voltage')).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
    expect(clock.now() - began).toBeCloseTo(0.25, 6);
  });

  it.each(['it is opened again', 'its input is read'])(
    'is not switched on any more where the run is told to stop as %s',
    async (when) => {
      const stop = new AbortController();
      const { instrument, load, cut } = await reached(
        () => {
          if (when === 'it is opened again') stop.abort(new Error('enough'));
          return {};
        },
        { signal: stop.signal },
      );
      instrument.lookFirst(async (session) => {
        await session.flag('input-state');
        stop.abort(new Error('enough'));
        return '';
      });
      cut();
      await expect(instrument.perform('input-on')).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
      expect(load.told).not.toContain('INP ON');
      expect(load.told.includes('INP?')).toBe(when === 'its input is read');
    },
  );

  it('and is wanted no longer has the connection closed that comes too late', async () => {
    const { instrument, lines, wanted, cut } = await reached(() => {
      wanted.now = false;
      return {};
    });
    cut();
    await expect(instrument.read('voltage')).rejects.toMatchObject({ code: 'CONNECTION_LOST' });
    expect(lines).toHaveLength(2);
    await expect(lines[1]?.write(Buffer.from('*IDN?\n'))).rejects.toThrow('it was closed here');
  });

  it('is closed for good when it is closed', async () => {
    const { instrument, withins, gaps } = await reached();
    await instrument.close();
    await expect(instrument.read('voltage')).rejects.toThrow('it was closed here');
    expect([withins, gaps()]).toEqual([[], 0]);
  });
});

describe('an instrument that answers late', () => {
  it('once is asked again on the same connection, and the late answer is not taken for the next', async () => {
    let late = true;
    const toy = toyLoad();
    const { instrument, lines, notices, cut } = await reached(() => ({
      react: (message, at) => {
        if (message !== 'MEAS:VOLT?' || !late) return toy.react(message, at);
        late = false;
        return [{ at: at + 1.4, bytes: Buffer.from('99.9\n') }];
      },
    }));
    cut();
    await instrument.flag('input-state');
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
    expect(lines).toHaveLength(2);
    expect(notices.at(-1)).toMatch(
      /^virtual: did not answer "MEAS:VOLT\?" within 1000 ms; asked again, it answered after 1\.\d s$/,
    );
  });

  it('never is given up after the same connection and a new one', async () => {
    const { instrument, clock, lines, cut } = await reached(() => ({
      react: answering({ 'MEAS:VOLT?': '' }),
    }));
    cut();
    await instrument.flag('input-state');
    const began = clock.now();
    await expect(instrument.read('voltage')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    expect(clock.now() - began).toBeLessThan(10);
    expect(lines.length).toBeGreaterThan(2);
  });

  it('is put in remote, prepared and told its settings again: it may have been off in between', async () => {
    const toy = toyLoad();
    let silent = false;
    const { instrument, cut } = await reached(
      () => ({
        react: (message, at) => {
          const isRemote = message === 'SYST:REM';
          if (isRemote) toy.told.push(message);
          const quiet = isRemote || (silent && message === 'MEAS:VOLT?');
          if (silent && message === 'MEAS:VOLT?') silent = false;
          return quiet ? [] : toy.react(message, at);
        },
      }),
      { driver: { remote: [{ text: 'SYST:REM' }] } },
    );
    cut();
    await instrument.perform('current-mode');
    await instrument.perform('set-current', { amps: 2 });
    silent = true;
    toy.told.length = 0;
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
    expect(toy.told.filter((message) => !/^(SYST:ERR|\*IDN)\?$/.test(message))).toEqual([
      ...['', 'SYST:REM', '*CLS', 'FUNC CURR', 'CURR 2', 'MEAS:VOLT?'],
    ]);
  });
});

describe('an instrument that does not get ready', () => {
  const ready = {
    ask: '*OPC?',
    when: { kind: 'answer', like: expression('^1$') },
    every: 0.1,
    within: 3,
  } as const;
  const operations = { 'set-current': [{ text: 'CURR {amps}', untilReady: true }] } as const;

  it('and says so is not told the same again', async () => {
    const toy = toyLoad({ replies: { '*OPC?': '0' } });
    const { instrument, clock, lines, cut } = await reached(() => ({ react: toy.react }), {
      driver: { ready, operations },
    });
    cut();
    await instrument.flag('input-state');
    const began = clock.now();
    await expect(instrument.perform('set-current', { amps: 2 })).rejects.toMatchObject({
      code: 'NOT_READY',
      answer: '0',
    });
    expect(clock.now() - began).toBeLessThan(3.1);
    expect(lines).toHaveLength(2);
  });

  it('and says nothing is sought as any that is silent, and not for ever', async () => {
    const toy = toyLoad({ replies: { '*OPC?': undefined } });
    const { instrument, clock, lines, cut } = await reached(() => ({ react: toy.react }), {
      driver: { ready, operations },
    });
    cut();
    await instrument.flag('input-state');
    const began = clock.now();
    await expect(instrument.perform('set-current', { amps: 2 })).rejects.toMatchObject({
      code: 'NOT_READY',
      answer: undefined,
    });
    expect(clock.now() - began).toBeLessThan(20);
    expect(lines.length).toBeGreaterThan(2);
  });
});
