import { describe, expect, it, onTestFinished } from 'vitest';
import { realClock } from '../../../src/clock/real-clock.js';
import type { Driver, Wire } from '../../../src/files/driver.js';
import type { Connection } from '../../../src/instrument/connection.js';
import { openSerial } from '../../../src/instrument/serial-connection.js';
import { Session } from '../../../src/instrument/session.js';
import { openTcp } from '../../../src/instrument/tcp-connection.js';
import { withoutSocat } from '../fixtures/serve-pty.js';
import { toyDriver } from '../fixtures/toy-load.js';
import { type QuirkyInstrument, quirkyInstrument, type Quirks } from './quirky-instrument.js';
import { quirkyLoad } from './quirky-load.js';
import { serveQuirkyPty, serveQuirkyTcp } from './serve-quirky.js';

/** A busy machine must answer within it, and hand bytes on within the difference between a need and a pause. */
const timeout = 5;

interface Row {
  readonly quirk: string;
  readonly speaks: Quirks;
  /** What the driver says of it. */
  readonly wire: Partial<Wire>;
  readonly driver?: Partial<Driver>;
}

const bothWays: readonly Row[] = [
  { quirk: 'has none', speaks: {}, wire: {} },
  { quirk: 'repeats each message', speaks: { echo: '\r\n' }, wire: { echo: true } },
  {
    quirk: 'repeats it with a return',
    speaks: { echo: '\r', replyEnd: '\r' },
    wire: { echo: true, replyEnd: '\r' },
  },
  { quirk: 'sends a prompt', speaks: { prompt: '> ', thinks: 0.01 }, wire: { prompt: '> ' } },
  { quirk: 'greets with its prompt', speaks: { prompt: '=>', greets: true }, wire: { prompt: '=>' } },
  {
    quirk: 'repeats each message and sends a prompt',
    speaks: { echo: '\r\n', prompt: '\r\n> ', replyEnd: '\r\n', greets: true },
    wire: { echo: true, prompt: '\r\n> ', replyEnd: '\r\n' },
  },
  { quirk: 'drops what comes too soon', speaks: { gap: 0.005 }, wire: { gap: 0.15 } },
  {
    quirk: 'is silent for 300 ms after a change of mode',
    speaks: { deaf: { after: /^FUNC/, lasting: 0.3 } },
    wire: {},
    driver: { operations: { ...toyDriver.operations, 'current-mode': [{ text: 'FUNC CURR', rest: 0.6 }] } },
  },
  { quirk: 'ends a reply with CR LF', speaks: { replyEnd: '\r\n' }, wire: { replyEnd: '\r\n' } },
  { quirk: 'ends a reply with CR', speaks: { replyEnd: '\r' }, wire: { replyEnd: '\r' } },
  { quirk: 'ends a reply with LF', speaks: { replyEnd: '\n' }, wire: { replyEnd: '\n' } },
  {
    quirk: 'trickles at 9600 baud, with an echo and a prompt',
    speaks: { perByte: 0.00104, echo: '\r\n', prompt: '> ', replyEnd: '\r\n', thinks: 0.02 },
    wire: { echo: true, prompt: '> ' },
  },
];

/** The driver that the row describes, or the same without a word of it. */
function driverFor({ wire, driver }: Row, isTold: boolean, patience = timeout): Driver {
  const plain = { sendEnd: '\n', replyEnd: '\n', gap: 0, timeout: patience };
  return isTold ? { ...toyDriver, ...driver, wire: { ...plain, ...wire } } : { ...toyDriver, wire: plain };
}

const lines: [string, (instrument: QuirkyInstrument) => Promise<Connection>][] = [
  ['TCP', async (instrument) => openTcp(await serveQuirkyTcp(instrument))],
  ['a pseudo-terminal', async (instrument) => openSerial(await serveQuirkyPty(instrument), { baud: 115200 })],
];

describe.each(lines)('over %s an instrument that', (line, connect) => {
  const on = it.skipIf(line !== 'TCP' && withoutSocat);

  async function opened(speaks: Quirks, driver: Driver, first: 'identity' | 'make-safe' = 'identity') {
    const { knows, state } = quirkyLoad();
    const quirky = quirkyInstrument(speaks, knows, realClock);
    const notices: string[] = [];
    const connection = await connect(quirky);
    onTestFinished(() => connection.close());
    const opening = Session.open({
      ...{ role: 'load', driver, connection, clock: realClock, first },
      onNotice: (text) => notices.push(text),
    });
    return { opening, quirky, state, notices };
  }

  on.each(bothWays)('$quirk does what it is told, and is read right', async (row) => {
    const { opening, quirky, state, notices } = await opened(row.speaks, driverFor(row, true));
    const session = await opening;
    await session.perform('current-mode');
    await session.perform('set-current', { amps: 2 });
    await session.perform('input-on');
    expect(await session.flag('input-state')).toBe(true);
    expect(await session.read('voltage')).toMatchObject({ value: 15.1 });
    expect(await session.read('current')).toMatchObject({ value: 2 });
    await session.perform('make-safe');
    expect(await session.flag('input-state')).toBe(false);
    expect([state.input, quirky.missed, notices]).toEqual(['0', [], []]);
  });

  on.each(bothWays)('$quirk is made safe before anything is asked of it', async (row) => {
    const { opening, quirky, state, notices } = await opened(row.speaks, driverFor(row, true), 'make-safe');
    state.input = '1';
    const session = await opening;
    expect(state.input).toBe('0');
    expect(await session.flag('input-state')).toBe(false);
    expect(quirky.heard.slice(0, 3)).toEqual(['', 'INP OFF', '*IDN?']);
    expect([quirky.missed, notices]).toEqual([[], []]);
  });

  // What the driver says matters: without it the same instrument is not understood.
  const mattering = bothWays.filter(({ speaks }) => speaks.echo ?? speaks.prompt ?? speaks.replyEnd === '\r');
  on.each(mattering)('$quirk is not understood where its driver does not say so', async (row) => {
    const { opening } = await opened(row.speaks, driverFor(row, false, 0.3));
    await expect(opening.then((session) => session.flag('input-state'))).rejects.toMatchObject({
      exitCode: 69,
    });
  });

  on('drops what comes too soon is told in vain where its driver does not say so', async () => {
    const driver = driverFor({ quirk: '', speaks: {}, wire: {} }, false);
    const { opening, quirky } = await opened(
      { gap: 2 },
      { ...driver, wire: { ...driver.wire, timeout: 0.5 } },
    );
    await expect(opening).rejects.toMatchObject({ exitCode: 69 });
    expect(quirky.missed).not.toEqual([]);
  });

  on('is silent after a change of mode misses what its driver sends too soon', async () => {
    const row: Row = { quirk: '', speaks: { deaf: { after: /^FUNC/, lasting: 20 } }, wire: {} };
    const { opening, quirky } = await opened(row.speaks, driverFor(row, true, 2));
    const session = await opening;
    await expect(session.perform('current-mode')).rejects.toMatchObject({ code: 'INSTRUMENT_SILENT' });
    expect(quirky.missed).toEqual(['SYST:ERR?']);
  });

  on('repeats nothing, though its driver says so, is told with what it sent', async () => {
    const driver = { ...toyDriver, wire: { ...toyDriver.wire, echo: true, timeout: 2 } };
    const { opening } = await opened({}, driver);
    await expect(opening).rejects.toMatchObject({
      code: 'INSTRUMENT_SILENT',
      message: expect.stringContaining('did not repeat "*IDN?" within 2000 ms: "NURSERY,LOAD') as string,
    });
  });
});

describe('an instrument that serves one program at a time', () => {
  it('and hangs up on the next one: that is told, and what may be the reason', async () => {
    const { knows } = quirkyLoad();
    const address = await serveQuirkyTcp(quirkyInstrument({}, knows, realClock), { clients: 1 });
    const parts = {
      role: 'load',
      driver: driverFor({ quirk: '', speaks: {}, wire: {} }, false),
      clock: realClock,
    } as const;
    const first = await Session.open({ ...parts, connection: await openTcp(address) });
    onTestFinished(() => first.close());
    const second = openTcp(address).then((connection) => Session.open({ ...parts, connection }));
    await expect(second).rejects.toMatchObject({
      code: 'CONNECTION_LOST',
      advice: expect.stringContaining('some instruments serve only one program at a time') as string,
    });
    expect(await first.flag('input-state')).toBe(false);
    await first.close();
    const free = async (): Promise<boolean> => {
      const connection = await openTcp(address);
      const session = await Session.open({ ...parts, connection }).catch(() => undefined);
      await session?.close();
      return session !== undefined;
    };
    await expect.poll(free, { timeout: 10_000 }).toBe(true);
  });

  it('and listens to nobody else meanwhile: that is told, and what may be the reason', async () => {
    const { knows } = quirkyLoad();
    const address = await serveQuirkyTcp(quirkyInstrument({}, knows, realClock), { deafToOthers: true });
    const first = await openTcp(address);
    onTestFinished(() => first.close());
    await expect
      .poll(
        () =>
          openTcp(address)
            .then((other) => other.close())
            .catch((error: unknown) => error),
        { timeout: 10_000 },
      )
      .toMatchObject({
        code: 'INSTRUMENT_UNREACHABLE',
        reason: 'the connection is refused: nothing listens on this port',
        advice: expect.stringContaining('some instruments serve only one program at a time') as string,
      });
  });

  it.skipIf(withoutSocat)('over a serial port: the port is busy, and so it is told', async () => {
    const { knows } = quirkyLoad();
    const address = await serveQuirkyPty(quirkyInstrument({}, knows, realClock));
    const first = await openSerial(address);
    onTestFinished(() => first.close());
    await expect(openSerial(address)).rejects.toMatchObject({ code: 'PORT_BUSY' });
  });
});
