import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import type { Driver } from '../../src/files/driver.js';
import { type TrialResult, tryDriver } from '../../src/instrument/trial.js';
import { toyDriver, toyLoad } from './fixtures/toy-load.js';
import { VirtualLine } from './fixtures/virtual-line.js';

async function trialOf(
  options: { driver?: Partial<Driver>; replies?: Record<string, string | undefined> } = {},
) {
  const load = toyLoad({ ...(options.replies && { replies: options.replies }) });
  load.state.input = '1';
  const clock = new VirtualClock(new Date(0));
  const results: TrialResult[] = [];
  const driver = { ...toyDriver, ...options.driver };
  const connection = new VirtualLine(clock, load.react);
  for await (const result of tryDriver({ driver, connection, clock })) results.push(result);
  const brief = results.map(
    ({ sent, verdict, received }) => `${sent}: ${verdict}${received ? ` ${received}` : ''}`,
  );
  return { load, results, brief };
}

describe('trying a driver', () => {
  it('goes through it message by message, makes safe first and last, and proves that the input is off', async () => {
    const { brief, load } = await trialOf();
    expect(brief).toEqual([
      '*IDN?: understood NURSERY,LOAD,K1,1.0',
      'SYST:ERR?: understood',
      '*CLS: understood',
      'INP OFF: understood',
      'INP ON: not-sent',
      'INP OFF: understood',
      'FUNC CURR: understood',
      'CURR 0: understood',
      'VOLT 0: understood',
      'POW:PROT 200: refused -113 "Undefined header"',
      'POW:PROT:STAT ON: refused -113 "Undefined header"',
      'MEAS:VOLT?: understood 1.510000E+01',
      'MEAS:CURR?: understood 0.0000',
      'INP?: understood 0',
      'INP OFF: understood',
      'INP?: understood 0',
    ]);
    expect(load.told[0]).toBe('INP OFF');
    expect(load.told).not.toContain('INP ON');
  });

  it('says what was read, and how long it took', async () => {
    const { results } = await trialOf();
    const voltage = results.find(({ name }) => name === 'voltage');
    expect(voltage).toMatchObject({ part: 'reading', detail: '15.1' });
    expect(voltage?.seconds).toBeCloseTo(0.01, 9);
    expect(results.at(-1)).toMatchObject({ part: 'proof', detail: 'off' });
    expect(results.find(({ verdict }) => verdict === 'not-sent')?.detail).toBe('would switch on');
  });

  it('goes on after a question that is not answered', async () => {
    const { results } = await trialOf({ replies: { 'MEAS:VOLT?': undefined } });
    expect(results.find(({ name }) => name === 'voltage')).toMatchObject({
      verdict: 'silent',
      received: undefined,
    });
    expect(results.find(({ name }) => name === 'current')).toMatchObject({ verdict: 'understood' });
  });

  it('shows a reply that the driver cannot read', async () => {
    const { results } = await trialOf({ replies: { 'MEAS:VOLT?': '15.1V' } });
    expect(results.find(({ name }) => name === 'voltage')).toMatchObject({
      verdict: 'unclear',
      received: '15.1V',
      detail: 'expected a bare number',
    });
  });

  it('says that it cannot tell of an operation where there is no error queue', async () => {
    const { results } = await trialOf({ driver: { errors: 'none' } });
    expect(results.find(({ name }) => name === 'set-current')).toMatchObject({
      verdict: 'unclear',
      detail: 'sent; there is no error queue to ask about it',
    });
  });

  it('says when the input is still on at the end', async () => {
    const { results } = await trialOf({ replies: { 'INP?': '1' } });
    expect(results.at(-1)).toMatchObject({
      part: 'proof',
      verdict: 'refused',
      detail: expect.stringContaining('by hand') as string,
    });
  });

  it('ends where nobody answers, having said what makes safe before and after', async () => {
    const { brief, load } = await trialOf({ replies: { '*IDN?': undefined } });
    expect(brief).toEqual(['*IDN?: silent']);
    expect(load.told).toEqual(['INP OFF', '*IDN?', 'INP OFF']);
  });

  it('says of another instrument that its name does not fit', async () => {
    const { results } = await trialOf({ driver: { identity: /METER/ } });
    expect(results[0]).toMatchObject({ verdict: 'unclear', received: 'NURSERY,LOAD,K1,1.0' });
  });

  it('makes safe also when it is broken off half-way', async () => {
    const load = toyLoad();
    const clock = new VirtualClock(new Date(0));
    const connection = new VirtualLine(clock, load.react);
    for await (const result of tryDriver({ driver: toyDriver, connection, clock })) {
      if (result.name === 'set-current') break;
    }
    expect(load.told.at(-1)).toBe('INP OFF');
  });
});
