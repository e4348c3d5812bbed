import { describe, expect, it } from 'vitest';
import { expression } from '../../src/files/expression.js';
import type { ErrorReport } from '../../src/files/driver.js';
import { messagesOf, opened, session } from './fixtures/answering.js';

const queue = {
  kind: 'queue',
  ask: 'SYST:ERR?',
  clear: expression('^[+-]?0\\b'),
  harmless: expression('^-221'),
  again: expression('^-363'),
  afterwards: [{ text: '*CLS' }],
} as const satisfies ErrorReport;
const register = {
  kind: 'register',
  ask: '*ESR?',
  bits: 60,
  afterwards: [],
} as const satisfies ErrorReport;

/** Its answers about errors, one after the other; clear once they are used up. */
function reporting(question: string, ...answers: readonly string[]): (message: string) => string | undefined {
  const left = [...answers];
  return (message) => (message === question ? left.shift() : undefined);
}

describe('what an instrument complains of', () => {
  it('is passed over with a notice where its driver calls it harmless', async () => {
    let answer: (message: string) => string | undefined = () => undefined;
    const { session: load, heard, notices } = await session((message) => answer(message), { errors: queue });
    answer = reporting('SYST:ERR?', '-221,"Settings conflict"');
    await load.perform('set-current', { amps: 4 });
    expect(messagesOf(heard)).toEqual(['CURR 4', 'SYST:ERR?', 'SYST:ERR?']);
    expect(notices).toEqual([
      { kind: 'harmless-error', entry: expect.objectContaining({ number: -221 }) as unknown },
    ]);
  });

  it('has all its messages told once more where they came too soon, after a pause', async () => {
    let answer: (message: string) => string | undefined = () => undefined;
    const { session: load, heard, notices } = await session((message) => answer(message), { errors: queue });
    answer = reporting('SYST:ERR?', '-363,"Input buffer overrun"', '0,"No error"');
    await load.perform('protect-power', { watts: 60 });
    const twice = ['POW:PROT 60', 'POW:PROT:STAT ON'];
    expect(messagesOf(heard).filter((message) => !message.endsWith('?'))).toEqual([...twice, ...twice]);
    expect((heard[4]?.at ?? 0) - (heard[3]?.at ?? 0)).toBeGreaterThan(0.2);
    expect(notices.map(({ kind }) => kind)).toEqual(['told-again']);
  });

  it('stands when it has been told three times in vain', async () => {
    const overrun = '-363,"Input buffer overrun"';
    let answer: (message: string) => string | undefined = () => undefined;
    const { session: load, heard } = await session((message) => answer(message), { errors: queue });
    answer = reporting('SYST:ERR?', overrun, '0', overrun, '0', overrun, '0');
    await expect(load.perform('input-on')).rejects.toMatchObject({
      code: 'INSTRUMENT_COMPLAINED',
      entries: [{ number: -363, text: 'Input buffer overrun' }],
      after: ['INP ON'],
    });
    expect(messagesOf(heard).filter((message) => message === 'INP ON')).toHaveLength(3);
  });

  it('is told with the part of its driver, and with what clears it sent first', async () => {
    let answer: (message: string) => string | undefined = () => undefined;
    const { session: load, heard } = await session((message) => answer(message), { errors: queue });
    answer = reporting('SYST:ERR?', '-221,"Settings conflict"', '-222,"Data out of range"');
    await expect(load.perform('set-current', { amps: 400 })).rejects.toMatchObject({
      entries: [{ number: -222, text: 'Data out of range' }],
      part: { driver: 'toy-load', section: 'operations', name: 'set-current', index: 0 },
    });
    expect(messagesOf(heard).at(-1)).toBe('*CLS');
  });

  it('is not told again where one of several errors is no matter of time', async () => {
    let answer: (message: string) => string | undefined = () => undefined;
    const { session: load, heard } = await session((message) => answer(message), { errors: queue });
    answer = reporting('SYST:ERR?', '-363,"Input buffer overrun"', '-113,"Undefined header"');
    await expect(load.perform('protect-power', { watts: 60 })).rejects.toMatchObject({
      entries: [{ number: -363 }, { number: -113 }],
      part: { section: 'operations', name: 'protect-power' },
    });
    expect(messagesOf(heard).filter((message) => message === 'POW:PROT 60')).toHaveLength(1);
  });
});

describe('an instrument without a queue', () => {
  it('is asked for its register after each operation, and its bits are put in words', async () => {
    let answer: (message: string) => string | undefined = (message) =>
      message === '*ESR?' ? '1' : undefined;
    const { session: load, heard } = await session((message) => answer(message), { errors: register });
    await load.perform('input-off');
    expect(messagesOf(heard)).toEqual(['INP OFF', '*ESR?']);
    answer = reporting('*ESR?', '+49');
    await expect(load.perform('set-current', { amps: 4 })).rejects.toMatchObject({
      entries: [
        { number: -200, text: 'Execution error' },
        { number: -100, text: 'Command error' },
      ],
      message: 'virtual: reports -200 "Execution error", -100 "Command error" after "CURR 4"',
    });
  });

  it('has what is in its register from before told, and not held against it', async () => {
    const answers = ['160', '0'];
    const { opening, notices } = opened((message) => (message === '*ESR?' ? answers.shift() : undefined), {
      errors: register,
    });
    await opening;
    expect(notices).toEqual([
      { kind: 'stale-error', entry: { number: -100, text: 'Command error', said: '32' } },
    ]);
  });

  it('may have harmless errors by the number of its register', async () => {
    const answers = ['0', '0', '16', '20'];
    const { session: load, notices } = await session(
      (message) => (message === '*ESR?' ? answers.shift() : undefined),
      { errors: { ...register, harmless: expression('^16$') } },
    );
    await load.perform('input-off');
    expect(notices).toEqual([
      { kind: 'harmless-error', entry: { number: -200, text: 'Execution error', said: '16' } },
    ]);
    await expect(load.perform('input-off')).rejects.toMatchObject({
      entries: [{ number: -400 }, { number: -200 }],
    });
  });

  it('whose register is no number is not understood', async () => {
    const { opening } = opened((message) => (message === '*ESR?' ? 'OK' : undefined), { errors: register });
    await expect(opening).rejects.toMatchObject({
      code: 'REPLY_NOT_UNDERSTOOD',
      part: { driver: 'toy-load', section: 'errors' },
    });
  });
});
