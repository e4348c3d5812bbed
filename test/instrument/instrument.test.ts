import { describe, expect, it } from 'vitest';
import { expression } from '../../src/files/expression.js';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import type { Driver, DriverReading } from '../../src/files/driver.js';
import { Instrument } from '../../src/instrument/instrument.js';
import { toyDriver, toyLoad } from './fixtures/toy-load.js';
import { VirtualLine } from './fixtures/virtual-line.js';

async function opened(
  options: {
    driver?: Partial<Driver>;
    replies?: Record<string, string | undefined>;
    stale?: string[];
    first?: 'make-safe';
  } = {},
) {
  const load = toyLoad({ ...(options.replies && { replies: options.replies }) });
  load.queue.push(...(options.stale ?? []));
  const clock = new VirtualClock(new Date(0));
  const notices: string[] = [];
  const instrument = await Instrument.open({
    role: 'load',
    driver: { ...toyDriver, ...options.driver },
    connection: new VirtualLine(clock, load.react),
    clock,
    onNotice: (text) => notices.push(text),
    ...(options.first && { first: options.first }),
  });
  return { instrument, load, clock, notices };
}

describe('opening an instrument', () => {
  it('asks who it is, empties the error queue and prepares it; nothing is switched', async () => {
    const { instrument, load } = await opened();
    expect(instrument.identity).toBe('NURSERY,LOAD,K1,1.0');
    expect(instrument).toMatchObject({ role: 'load', driver: { name: 'toy-load' }, address: 'virtual:' });
    expect(load.told).toEqual(['*IDN?', 'SYST:ERR?', '*CLS', 'SYST:ERR?']);
  });

  it('tells of errors from before and does not hold them against it', async () => {
    const { notices } = await opened({ stale: ['-222,"Data out of range"', '-113,"Undefined header"'] });
    expect(notices).toEqual([
      'virtual: had an error from before: -222 "Data out of range"',
      'virtual: had an error from before: -113 "Undefined header"',
    ]);
  });

  it('fails when the error queue does not get clear', async () => {
    await expect(opened({ replies: { 'SYST:ERR?': '-350,"Queue overflow"' } })).rejects.toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
      message:
        'virtual: reports -350 "Queue overflow", -350 "Queue overflow", -350 "Queue overflow", and 61 more',
    });
  });

  it.each([
    ['another instrument', 'NURSERY,METER,K2,1.0'],
    ['nothing', ''],
    ['bytes that nobody can read', '\x00\xff\x1b'],
    ['a number', '15.1'],
  ])('refuses what answers with %s', async (_, identity) => {
    await expect(
      opened({ driver: { identity: expression('LOAD') }, replies: { '*IDN?': identity } }),
    ).rejects.toMatchObject({ code: 'WRONG_INSTRUMENT', exitCode: 69, role: 'load', driver: 'toy-load' });
  });

  it('takes no echo that its driver does not tell of for a name, and later for an answer', async () => {
    const toy = toyLoad();
    const clock = new VirtualClock(new Date(0));
    // It does nothing that it is told, and repeats it all, a moment later.
    const connection = new VirtualLine(clock, (message, at) => [
      { at: at + 0.005, bytes: Buffer.from(`${message}\r\n`) },
      ...(message.endsWith('?') ? toy.react(message, at + 0.005) : []),
    ]);
    const driver: Driver = { ...toyDriver, errors: 'none' };
    await expect(Instrument.open({ role: 'load', driver, connection, clock })).rejects.toMatchObject({
      code: 'WRONG_INSTRUMENT',
      identity: '*IDN?',
      advice: expect.stringContaining('echo: true') as string,
    });
  });

  it('takes any name where the driver asks for none', async () => {
    const { instrument } = await opened({ replies: { '*IDN?': ' SHED,GREEN BOX,0,0 ' } });
    expect(instrument.identity).toBe('SHED,GREEN BOX,0,0');
  });

  it('tells what makes safe before anything is asked, where that is wanted first', async () => {
    const { instrument, load } = await opened({ first: 'make-safe' });
    expect(load.told).toEqual(['', 'INP OFF', '*IDN?', 'SYST:ERR?', '*CLS', 'SYST:ERR?']);
    expect(await instrument.flag('input-state')).toBe(false);
  });

  it.each([
    ['whose error queue does not get clear', { replies: { 'SYST:ERR?': '-350,"Queue overflow"' } }],
    ['whose error queue cannot be read', { replies: { 'SYST:ERR?': 'E5' } }],
    ['that does not answer about errors', { replies: { 'SYST:ERR?': undefined } }],
    ['that refuses what prepares it', { driver: { prepare: [{ text: 'SENS:SOMETHING' }] } }],
  ])('to make it safe is no matter of complaints: one %s can still be asked', async (_, change) => {
    const { instrument, load } = await opened({ ...change, first: 'make-safe' });
    expect(load.told.slice(0, 2)).toEqual(['', 'INP OFF']);
    expect(await instrument.flag('input-state')).toBe(false);
  });

  it('to make it safe has told it so also when nobody answers', async () => {
    const load = toyLoad({ replies: { '*IDN?': undefined } });
    const clock = new VirtualClock(new Date(0));
    const connection = new VirtualLine(clock, load.react);
    const opening = Instrument.open({
      role: 'load',
      driver: toyDriver,
      connection,
      clock,
      first: 'make-safe',
    });
    await expect(opening).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    expect(load.told).toEqual(['', 'INP OFF', '*IDN?']);
  });

  it('does not take the late answer to an earlier program for the identity', async () => {
    const load = toyLoad();
    const clock = new VirtualClock(new Date(0));
    let first = true;
    const connection = new VirtualLine(clock, (message, at) => {
      const late = first ? [{ at: at + 0.005, bytes: Buffer.from('15.1\n') }] : [];
      first = false;
      return [...late, ...load.react(message, at)];
    });
    const instrument = await Instrument.open({ role: 'load', driver: toyDriver, connection, clock });
    expect(instrument.identity).toBe('NURSERY,LOAD,K1,1.0');
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
  });

  it('fails when what prepares it is refused, and says which message', async () => {
    await expect(
      opened({ driver: { prepare: [{ text: '*CLS' }, { text: 'SENS:SOMETHING' }] } }),
    ).rejects.toMatchObject({
      message: 'virtual: reports -113 "Undefined header" after "*CLS", "SENS:SOMETHING"',
    });
  });

  it('fails when it is silent', async () => {
    await expect(opened({ replies: { '*IDN?': undefined } })).rejects.toMatchObject({
      code: 'INSTRUMENT_SILENT',
    });
  });
});

describe('an instrument that must be put in remote', () => {
  const driver: Partial<Driver> = {
    remote: [{ text: 'SYST:REM' }],
    local: [{ text: 'SYST:LOC' }],
    errors: 'none',
  };

  it('is told so before anything else, and over a line on which somebody may have died in mid-message', async () => {
    const { load } = await opened({ driver });
    expect(load.told).toEqual(['', 'SYST:REM', '*IDN?', '*CLS']);
  });

  it('is told so even before what makes it safe, which it would not heed', async () => {
    const { load } = await opened({ driver, first: 'make-safe' });
    expect(load.told).toEqual(['', 'SYST:REM', 'INP OFF', '*IDN?', '*CLS']);
  });

  it('is handed back last of all, with nothing asked after that', async () => {
    const { instrument, load } = await opened({ driver: { local: [{ text: 'SYST:LOC' }] } });
    load.told.length = 0;
    await instrument.release();
    expect(load.told).toEqual(['INP OFF', 'SYST:ERR?', 'SYST:LOC']);
  });

  it('is handed back also when it refuses what is told it before', async () => {
    const { instrument, load } = await opened({
      driver: { local: [{ text: 'SYST:LOC' }], release: [{ text: 'NONSENSE' }] },
    });
    load.told.length = 0;
    await expect(instrument.release()).rejects.toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
      part: { section: 'release', index: 0 },
    });
    expect(load.told.slice(-1)).toEqual(['SYST:LOC']);
  });

  it('is handed back when it does not open', async () => {
    const load = toyLoad({ replies: { '*IDN?': undefined } });
    const clock = new VirtualClock(new Date(0));
    const connection = new VirtualLine(clock, load.react);
    const opening = Instrument.open({
      ...{ role: 'load', connection, clock },
      driver: { ...toyDriver, ...driver },
    });
    await expect(opening).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    expect(load.told).toEqual(['', 'SYST:REM', '*IDN?', 'SYST:LOC']);
  });

  it('can be left as it is, with its panel working again', async () => {
    const { instrument, load } = await opened({ driver });
    load.told.length = 0;
    await instrument.leave();
    expect(load.told).toEqual(['SYST:LOC']);
  });

  it('may take its time to get there before it says who it is', async () => {
    const clock = new VirtualClock(new Date(0));
    const load = toyLoad();
    const connection = new VirtualLine(clock, (message, at) =>
      load
        .react(message, at)
        .map(({ bytes, at: then }) => ({ bytes, at: message === '*IDN?' ? at + 4 : then })),
    );
    const ready = {
      ask: '*OPC?',
      when: { kind: 'answer', like: expression('1') },
      every: 0.1,
      within: 5,
    } as const;
    const opening = Instrument.open({
      ...{ role: 'load', connection, clock },
      driver: { ...toyDriver, ...driver, ready, remote: [{ text: 'SYST:REM', untilReady: true }] },
    });
    await expect(opening).resolves.toMatchObject({ identity: 'NURSERY,LOAD,K1,1.0' });
  });
});

describe('an instrument', () => {
  it('does what its driver says, with the values as plain decimals', async () => {
    const { instrument, load } = await opened();
    await instrument.perform('set-current', { amps: 0.1 + 0.2 });
    await instrument.perform('input-on');
    expect(load.state).toMatchObject({ CURR: '0.3', input: '1' });
    expect(await instrument.flag('input-state')).toBe(true);
    expect(await instrument.read('current')).toEqual({ kind: 'value', value: 0.3 });
    await instrument.release();
    expect(await instrument.flag('input-state')).toBe(false);
  });

  it('is asked about errors after each operation, and its complaint names the messages', async () => {
    const { instrument, load } = await opened();
    await expect(instrument.perform('protect-power', { watts: 200 })).rejects.toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
      entries: [
        { number: -113, text: 'Undefined header' },
        { number: -113, text: 'Undefined header' },
      ],
      after: ['POW:PROT 200', 'POW:PROT:STAT ON'],
    });
    expect(load.queue).toEqual([]);
    await instrument.perform('input-off');
  });

  it('without an error queue is not asked', async () => {
    const { instrument, load } = await opened({ driver: { errors: 'none' } });
    await instrument.perform('input-off');
    expect(load.told).toEqual(['*IDN?', '*CLS', 'INP OFF']);
  });

  it('does one thing at a time, also when several are wanted at once', async () => {
    const { instrument, load } = await opened();
    load.told.length = 0;
    const [voltage, , on] = await Promise.all([
      instrument.read('voltage'),
      instrument.perform('input-on'),
      instrument.flag('input-state'),
    ]);
    expect([voltage, on]).toEqual([{ kind: 'value', value: 15.1 }, true]);
    expect(load.told).toEqual(['MEAS:VOLT?', 'INP ON', 'SYST:ERR?', 'INP?']);
  });

  it('whose voltage makes no sense is asked who it is before the next question', async () => {
    const { instrument, load } = await opened({ replies: { 'MEAS:VOLT?': '15.1V' } });
    await expect(instrument.read('voltage')).rejects.toMatchObject({
      code: 'REPLY_NOT_UNDERSTOOD',
      message: 'virtual: answered "MEAS:VOLT?" with "15.1V" where a bare number was expected',
    });
    load.told.length = 0;
    await instrument.read('current');
    expect(load.told).toEqual(['*IDN?', 'MEAS:CURR?']);
  });

  it('never says "off" with a reply that makes no sense', async () => {
    const { instrument } = await opened({ replies: { 'INP?': 'ERR' } });
    await expect(instrument.flag('input-state')).rejects.toMatchObject({ code: 'REPLY_NOT_UNDERSTOOD' });
  });

  it('is sent what a reading asks for, and the last message is the one answered', async () => {
    const { instrument, load } = await opened({
      driver: {
        readings: {
          voltage: {
            kind: 'number',
            ask: [{ text: 'FUNC VOLT' }, { text: 'MEAS:VOLT?' }],
            dimension: 'voltage',
            factor: 1,
          },
        },
      },
    });
    await instrument.read('voltage');
    expect(load.told.slice(-2)).toEqual(['FUNC VOLT', 'MEAS:VOLT?']);
  });

  it('is not waited for until its mean is new once the run must stop', async () => {
    const clock = new VirtualClock(new Date(0));
    const stop = new AbortController();
    const voltage = { ...toyDriver.readings['voltage'], averaging: 60 } as DriverReading;
    const instrument = await Instrument.open({
      ...{ role: 'load', clock, connection: new VirtualLine(clock, toyLoad().react) },
      driver: { ...toyDriver, readings: { voltage } },
      wayBack: {
        connect: () => Promise.reject(new Error('nobody is sought here')),
        isWanted: () => true,
        signal: stop.signal,
        onGap: () => undefined,
        onNotice: () => undefined,
      },
    });
    await instrument.read('voltage');
    await instrument.read('voltage');
    expect(clock.now()).toBeGreaterThan(60);
    stop.abort();
    expect(await instrument.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
    expect(clock.now()).toBeLessThan(62);
  });

  it('says what its driver does not know', async () => {
    const { instrument } = await opened();
    expect([
      instrument.has('set-current'),
      instrument.has('protect-current'),
      instrument.has('toString'),
    ]).toEqual([true, false, false]);
    expect([instrument.reads('current'), instrument.reads('power')]).toEqual([true, false]);
    await expect(instrument.perform('protect-current')).rejects.toMatchObject({
      code: 'NOT_IN_DRIVER',
      message: 'The driver toy-load has no operation "protect-current"',
    });
    await expect(instrument.read('power')).rejects.toMatchObject({ code: 'NOT_IN_DRIVER', exitCode: 65 });
    await expect(instrument.flag('voltage')).rejects.toMatchObject({ code: 'NOT_IN_DRIVER' });
  });

  it('is never told half a message', async () => {
    const { instrument, load } = await opened();
    load.told.length = 0;
    await expect(instrument.perform('set-current', { volts: 4 })).rejects.toThrow(RangeError);
    expect(load.told).toEqual([]);
  });
});
