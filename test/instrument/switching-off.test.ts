import { describe, expect, it } from 'vitest';
import type { Driver, Message, Readiness } from '../../src/files/driver.js';
import { driverOfChannel } from '../../src/files/driver-channel.js';
import { expression } from '../../src/files/expression.js';
import { messagesOf, session } from './fixtures/answering.js';
import { toyDriver } from './fixtures/toy-load.js';

const ready: Readiness = {
  ask: '*OPC?',
  when: { kind: 'answer', like: expression('^1$') },
  every: 0.1,
  within: 10,
};
const first: Message = { text: 'FUNC CURR', untilReady: true };
const operations = (off: readonly Message[]): Driver['operations'] => ({
  ...toyDriver.operations,
  'make-safe': off,
  'input-off': off,
});
const waiting: Partial<Driver> = { ready, operations: operations([first, { text: 'INP OFF' }]) };

describe.each(['make-safe', 'input-off'])('%s', (operation) => {
  it.each([
    ['says that it is not ready', '0'],
    ['does not answer', undefined],
  ])('is told at once, and whole, to a load that %s', async (_, answer) => {
    const { session: load, heard } = await session(
      (message) => (message === '*OPC?' ? answer : undefined),
      waiting,
    );
    await expect(load.perform(operation)).rejects.toMatchObject({ code: 'NOT_READY' });
    expect(messagesOf(heard)).toContain('INP OFF');
    expect(heard.find(({ message }) => message === 'INP OFF')?.at).toBeLessThan(0.1);
  });

  it('is told as the driver says too, each message when the one before it is done', async () => {
    const { session: load, heard } = await session(
      (message) => (message === '*OPC?' ? { text: '1', after: 3 } : undefined),
      waiting,
    );
    await load.perform(operation);
    expect(messagesOf(heard)).toEqual([
      ...['FUNC CURR', 'INP OFF'],
      ...['FUNC CURR', '*OPC?', 'INP OFF', 'SYST:ERR?'],
    ]);
  });

  it('is not held against a load that would not take it before it was ready', async () => {
    const queue: string[] = [];
    let isReady = true;
    const { session: load, notices } = await session((message) => {
      if (message === 'FUNC CURR') isReady = false;
      if (message === 'INP OFF' && !isReady) queue.push('-213,"Init ignored"');
      if (message === 'SYST:ERR?') return queue.shift();
      if (message !== '*OPC?') return undefined;
      isReady = true;
      return { text: '1', after: 3 };
    }, waiting);
    await load.perform(operation);
    expect(notices).toEqual([
      { kind: 'stale-error', entry: expect.objectContaining({ number: -213 }) as unknown },
    ]);
  });

  it('is told once where nothing is waited for before its last message', async () => {
    const { session: load, heard } = await session((message) => (message === '*OPC?' ? '1' : undefined), {
      ready,
      operations: operations([{ text: 'CURR 0' }, { text: 'INP OFF', untilReady: true }]),
    });
    await load.perform(operation);
    expect(messagesOf(heard)).toEqual(['CURR 0', 'INP OFF', '*OPC?', 'SYST:ERR?']);
  });

  it('does not wait for a channel that is slow to be chosen', async () => {
    const driver = driverOfChannel(
      {
        ...toyDriver,
        ready,
        channels: { select: [{ text: 'INST:NSEL {channel}', untilReady: true }], first: 1, last: 2 },
        prepare: [],
      },
      2,
    );
    const { session: load, heard } = await session(() => undefined, driver);
    await expect(load.perform(operation)).rejects.toMatchObject({ code: 'NOT_READY' });
    expect(messagesOf(heard).slice(0, 2)).toEqual(['INST:NSEL 2', 'INP OFF']);
    expect(heard[1]?.at).toBeLessThan(0.1);
  });
});

describe('a wish to stop', () => {
  it('ends the wait for a load that is not ready, between two questions', async () => {
    const stop = new AbortController();
    const {
      session: load,
      heard,
      clock,
    } = await session(
      (message, at) => {
        if (message !== '*OPC?') return undefined;
        if (at > 1) stop.abort(new Error('enough'));
        return '0';
      },
      {
        ready,
        operations: { ...toyDriver.operations, 'set-current': [{ text: 'CURR 4', untilReady: true }] },
      },
      { signal: stop.signal },
    );
    await expect(load.perform('set-current')).rejects.toThrow('enough');
    expect(clock.now()).toBeLessThan(1.5);
    expect(messagesOf(heard).at(-1)).toBe('*OPC?');
  });

  it('leaves a load the time that it needs to be made safe, and to say that it is', async () => {
    const answers = ['0', '0', '1', '0', '0', '1'];
    const { session: load, heard } = await session(
      (message) => (message === '*OPC?' ? answers.shift() : message === 'INP?' ? '0' : undefined),
      {
        ready,
        operations: operations([{ text: 'INP OFF', untilReady: true }]),
        readings: {
          'input-state': {
            kind: 'flag',
            ask: [{ text: 'LATCH', untilReady: true }, { text: 'INP?' }],
            trueWhen: expression('^1$'),
          },
        },
      },
      { signal: AbortSignal.abort(new Error('enough')) },
    );
    await load.perform('make-safe');
    expect(await load.flag('input-state')).toBe(false);
    expect(messagesOf(heard).filter((message) => message === '*OPC?')).toHaveLength(6);
  });
});

describe('a load of several channels', () => {
  const channels = { select: [{ text: 'INST:NSEL {channel}' }], first: 1, last: 2 };
  const second = driverOfChannel({ ...toyDriver, channels, prepare: [] }, 2);

  it('is not believed to be off where it would not be asked on its channel', async () => {
    const queue: string[] = [];
    // Its first channel is off and stays chosen; its second is on.
    let refuses = false;
    const { session: load } = await session((message) => {
      if (message === 'INST:NSEL 2' && refuses) queue.push('-221,"Settings conflict"');
      if (message === 'SYST:ERR?') return queue.shift();
      return message === 'INP?' ? (refuses ? '0' : '1') : undefined;
    }, second);
    expect(await load.flag('input-state')).toBe(true);
    refuses = true;
    await expect(load.flag('input-state')).rejects.toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
      entries: [{ number: -221 }],
      after: ['INST:NSEL 2', 'INP?'],
    });
  });

  it('is asked nothing more where it has no channels', async () => {
    const { session: load, heard } = await session((message) => (message === 'INP?' ? '0' : undefined));
    expect(await load.flag('input-state')).toBe(false);
    expect(messagesOf(heard)).toEqual(['INP?']);
  });
});
