import { describe, expect, it } from 'vitest';
import type { Driver, DriverReading } from '../../src/files/driver.js';
import { messagesOf, session } from './fixtures/answering.js';

type NumberReading = Extract<DriverReading, { kind: 'number' }>;

const volts: NumberReading = { kind: 'number', ask: [{ text: 'READ?' }], dimension: 'voltage', factor: 1 };
const reading = (voltage: Partial<NumberReading>, driver: Partial<Driver> = {}): Partial<Driver> => ({
  ...driver,
  readings: {
    voltage: { ...volts, ...voltage },
    current: { ...volts, ask: [{ text: 'CURR?' }], dimension: 'current' },
  },
});

describe('a reading that is a mean over some time', () => {
  it('is not asked for sooner than that after the one before, so that none is in part another', async () => {
    const { session: meter, heard } = await session(
      (message) => (message === 'READ?' ? { text: '15.1', after: 0.03 } : undefined),
      reading({ averaging: 0.2 }),
    );
    for (let count = 0; count < 3; count++) await meter.read('voltage');
    const [first, second, third] = heard.map(({ at }) => at);
    expect(messagesOf(heard)).toEqual(['READ?', 'READ?', 'READ?']);
    expect((second ?? 0) - (first ?? 0)).toBeCloseTo(0.23, 9);
    expect((third ?? 0) - (second ?? 0)).toBeCloseTo(0.23, 9);
  });

  it('is not waited for where that time has passed already, nor is another reading', async () => {
    const {
      session: meter,
      heard,
      clock,
    } = await session(
      (message) => (/^(READ|CURR)\?$/.test(message) ? '1' : undefined),
      reading({ averaging: 0.2 }),
    );
    await meter.read('voltage');
    await meter.read('current');
    expect((heard[1]?.at ?? 0) - (heard[0]?.at ?? 0)).toBeLessThan(0.02);
    await clock.sleep(0.5);
    const before = clock.now();
    await meter.read('voltage');
    expect(heard[2]?.at).toBe(before);
  });

  it('is asked for at once when the run must stop', async () => {
    const stop = new AbortController();
    const { session: meter, heard } = await session(
      (message) => (/^(READ|CURR)\?$/.test(message) ? '1' : undefined),
      reading({ averaging: 60 }),
      { signal: stop.signal },
    );
    await meter.read('voltage');
    stop.abort();
    expect(await meter.read('voltage')).toEqual({ kind: 'value', value: 1 });
    expect((heard[1]?.at ?? 0) - (heard[0]?.at ?? 0)).toBeLessThan(1);
  });
});

describe('a meter whose ranges the tool chooses', () => {
  const ranges = [2, 20, 200].map((upTo) => ({ upTo, select: [{ text: `RANG ${upTo}` }] }));
  /** It overloads on a range that does not hold what is at its probes. */
  function meter(atProbes: (asked: number) => number) {
    const state = { range: NaN, asked: 0 };
    return (message: string): string | undefined => {
      const range = /^RANG (\d+)$/.exec(message)?.[1];
      if (range !== undefined) state.range = Number(range);
      if (message !== 'READ?') return message === 'CURR?' ? '1' : undefined;
      const now = atProbes(state.asked++);
      return Math.abs(now) > state.range ? '9.9E37' : String(now);
    };
  }

  it('is set to the widest, then to the smallest that holds what was read, and told only of changes', async () => {
    const { session: it, heard } = await session(
      meter(() => 1.2),
      reading({ ranges }, { errors: 'none' }),
    );
    for (let count = 0; count < 3; count++) {
      expect(await it.read('voltage')).toEqual({ kind: 'value', value: 1.2 });
      await it.read('current');
    }
    expect(messagesOf(heard).filter((message) => message !== 'CURR?')).toEqual([
      ...['RANG 200', 'READ?', 'RANG 2', 'READ?', 'READ?'],
    ]);
  });

  it('is read again at once on wider ranges when there is more at its probes than its range holds', async () => {
    const { session: it, heard } = await session(
      meter((asked) => (asked < 2 ? 1 : 120)),
      reading({ ranges }, { errors: 'none' }),
    );
    await it.read('voltage');
    await it.read('voltage');
    heard.length = 0;
    expect(await it.read('voltage')).toEqual({ kind: 'value', value: 120 });
    expect(messagesOf(heard)).toEqual(['READ?', 'RANG 20', 'READ?', 'RANG 200', 'READ?']);
  });

  it('that overloads on its widest range says so', async () => {
    const { session: it, heard } = await session(
      meter(() => 900),
      reading({ ranges }, { errors: 'none' }),
    );
    expect(await it.read('voltage')).toEqual({ kind: 'overload' });
    expect(messagesOf(heard)).toEqual(['RANG 200', 'READ?']);
  });

  it('is asked for a reading only once it has settled on its new range, and a mean has no part of before', async () => {
    const { session: it, heard } = await session(
      meter(() => 1.2),
      reading({ ranges, averaging: 0.5 }, { errors: 'none', settling: 0.3 }),
    );
    await it.read('voltage');
    expect((heard[1]?.at ?? 0) - (heard[0]?.at ?? 0)).toBeCloseTo(0.8, 9);
  });

  it('is asked whether it has taken its range, and a range that it refuses is named', async () => {
    let refuses = false;
    const { session: it } = await session(
      (message) =>
        message === 'SYST:ERR?' && refuses
          ? ((refuses = false), '-222,"Data out of range"')
          : meter(() => 1.2)(message),
      reading({ ranges }),
    );
    refuses = true;
    await expect(it.read('voltage')).rejects.toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
      after: ['RANG 200'],
      part: { driver: 'toy-load', section: 'readings', name: 'voltage', range: 2, index: 0 },
    });
  });

  it.each(['make-safe', 'current-mode'])(
    'begins anew after %s, which may have left it on any range',
    async (operation) => {
      const { session: it, heard } = await session(
        meter(() => 1.2),
        reading({ ranges }, { errors: 'none' }),
      );
      await it.read('voltage');
      await it.read('voltage');
      await it.perform(operation);
      heard.length = 0;
      await it.read('voltage');
      expect(messagesOf(heard)).toEqual(['RANG 200', 'READ?']);
    },
  );

  it('stays on its range when a set-point changes', async () => {
    const { session: it, heard } = await session(
      meter(() => 1.2),
      reading({ ranges }, { errors: 'none' }),
    );
    await it.read('voltage');
    await it.read('voltage');
    await it.perform('set-current', { amps: 4 });
    heard.length = 0;
    await it.read('voltage');
    expect(messagesOf(heard)).toEqual(['READ?']);
  });
});
