import { describe, expect, it } from 'vitest';
import { expression } from '../../src/files/expression.js';
import type { Driver, Readiness } from '../../src/files/driver.js';
import { saysReady } from '../../src/instrument/ready.js';
import { messagesOf, session } from './fixtures/answering.js';

const byAnswer: Readiness = {
  ask: '*OPC?',
  when: { kind: 'answer', like: expression('^\\+?1$') },
  every: 0.1,
  within: 10,
};
const byStatus: Readiness = {
  ask: '*STB?',
  when: { kind: 'bits', bits: 16, are: 'set' },
  every: 0.1,
  within: 10,
};
const waiting = (ready: Readiness): Partial<Driver> => ({
  ready,
  errors: 'none',
  operations: { 'current-mode': [{ text: 'FUNC CURR', untilReady: true }, { text: 'CURR 0' }] },
});

describe('an instrument that is waited for until it is ready', () => {
  it('may answer only when it is done, long after the timeout of its line', async () => {
    const { session: load, heard } = await session(
      (message) => (message === '*OPC?' ? { text: '1', after: 6 } : undefined),
      waiting(byAnswer),
    );
    await load.perform('current-mode');
    expect(messagesOf(heard)).toEqual(['FUNC CURR', '*OPC?', 'CURR 0']);
    expect(heard[2]?.at).toBeCloseTo(6, 1);
  });

  it('may answer at once that it is not, and is asked again after the pause', async () => {
    const { session: load, heard } = await session(
      (message, at) => (message === '*STB?' ? (at < 0.45 ? '+4' : '+20') : undefined),
      waiting(byStatus),
    );
    await load.perform('current-mode');
    expect(messagesOf(heard)).toEqual(['FUNC CURR', ...Array<string>(5).fill('*STB?'), 'CURR 0']);
    expect((heard[3]?.at ?? 0) - (heard[2]?.at ?? 0)).toBeCloseTo(0.11, 6);
  });

  it('is waited for no longer than its driver says, and what it was told and said is named', async () => {
    const {
      session: load,
      heard,
      clock,
    } = await session((message) => (message === '*STB?' ? '4' : undefined), waiting(byStatus));
    await expect(load.perform('current-mode')).rejects.toMatchObject({
      code: 'NOT_READY',
      exitCode: 69,
      told: 'FUNC CURR',
      question: '*STB?',
      answer: '4',
      part: { driver: 'toy-load', section: 'operations', name: 'current-mode', index: 0 },
      message:
        'virtual: was not ready within 10 s of "FUNC CURR": it was asked "*STB?", and answered "4" last',
    });
    expect(messagesOf(heard)).not.toContain('CURR 0');
    expect(clock.now()).toBeLessThan(10.2);
  });

  it('that falls silent is not ready either', async () => {
    const { session: load, clock } = await session(() => undefined, waiting(byAnswer));
    await expect(load.perform('current-mode')).rejects.toMatchObject({
      code: 'NOT_READY',
      answer: undefined,
      cause: { code: 'INSTRUMENT_SILENT', question: '*OPC?' },
    });
    expect(clock.now()).toBeCloseTo(10, 1);
  });

  it('has the time of its line to answer however little is left', async () => {
    const { session: load } = await session(
      (message, at) => (message === '*STB?' ? { text: at < 9.8 ? '0' : '16', after: 0.3 } : undefined),
      waiting(byStatus),
    );
    await expect(load.perform('current-mode')).resolves.toBeUndefined();
  });

  it('must give the number of its status as a number', async () => {
    const { session: load, heard } = await session(
      (message) => (message === '*STB?' ? 'BUSY' : undefined),
      waiting(byStatus),
    );
    await expect(load.perform('current-mode')).rejects.toMatchObject({
      code: 'REPLY_NOT_UNDERSTOOD',
      reply: 'BUSY',
      part: { section: 'ready' },
    });
    heard.length = 0;
    await load.perform('current-mode').catch(() => undefined);
    expect(messagesOf(heard).slice(0, 2)).toEqual(['FUNC CURR', '*IDN?']);
  });

  it('is waited for before a reading is asked for, too', async () => {
    const { session: load, heard } = await session(
      (message, at) =>
        message === '*STB?' ? (at < 0.3 ? '0' : '16') : message === 'FETC?' ? '15.1' : undefined,
      {
        ...waiting(byStatus),
        readings: {
          voltage: {
            kind: 'number',
            ask: [{ text: 'INIT', untilReady: true }, { text: 'FETC?' }],
            dimension: 'voltage',
            factor: 1,
          },
        },
      },
    );
    expect(await load.read('voltage')).toEqual({ kind: 'value', value: 15.1 });
    expect(messagesOf(heard)).toEqual(['INIT', '*STB?', '*STB?', '*STB?', '*STB?', 'FETC?']);
  });
});

it.each([
  ['16', 16, 'set', true],
  ['+048', 48, 'set', true],
  ['16', 48, 'set', false],
  ['1.6E1', 16, 'set', true],
  ['4', 16, 'clear', true],
  ['20', 16, 'clear', false],
  ['0', 65535, 'clear', true],
] as const)('a status of %s with the bits %d to be %s: %s', (answer, bits, are, is) => {
  expect(saysReady(answer, { kind: 'bits', bits, are }, { address: '', question: '*STB?' })).toBe(is);
});

it.each(['', 'ready', '-1', '65536', '1.5', '9.9E37', 'NAN'])('"%s" is no status', (answer) => {
  const when = { kind: 'bits', bits: 16, are: 'set' } as const;
  expect(() => saysReady(answer, when, { address: '', question: '*STB?' })).toThrow(
    expect.objectContaining({ code: 'REPLY_NOT_UNDERSTOOD' }) as Error,
  );
});
