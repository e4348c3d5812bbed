import { describe, expect, it } from 'vitest';
import { expression } from '../../src/files/expression.js';
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
  const driver = { ...toyDriver, ...options.driver };
  const connection = new VirtualLine(clock, load.react);
  const trial = await tryDriver({ driver, connection, clock });
  const { results } = trial;
  const brief = results.map(
    ({ sent, verdict, received }) => `${sent}: ${verdict}${received ? ` ${received}` : ''}`,
  );
  return { ...trial, load, brief };
}

describe('trying a driver', () => {
  it('goes through it message by message, makes safe first and last, and proves that the input is off', async () => {
    const { brief, load } = await trialOf();
    expect(brief).toEqual([
      '*IDN?: understood NURSERY,LOAD,K1,1.0',
      'INP?: understood 0',
      'SYST:ERR?: understood',
      '*CLS: understood',
      'INP OFF: understood',
      'INP ON: not-sent',
      'INP OFF: understood',
      'FUNC CURR: understood',
      'CURR 0: understood',
      'FUNC VOLT: understood',
      'VOLT 150: understood',
      'POW:PROT 200: refused -113 "Undefined header"',
      'POW:PROT:STAT ON: refused -113 "Undefined header"',
      'MEAS:VOLT?: understood 1.510000E+01',
      'MEAS:CURR?: understood 0.0000',
      'INP?: understood 0',
      'FUNC CURR: understood',
      'CURR 0: understood',
      'INP OFF: understood',
      'INP OFF: understood',
      'INP?: understood 0',
    ]);
    expect(load.state).toMatchObject({ input: '0', FUNC: 'CURR', CURR: '0', VOLT: '150' });
    expect(load.told.slice(0, 3)).toEqual(['', 'INP OFF', '*IDN?']);
    expect(load.told).not.toContain('INP ON');
  });

  it('says what was read, and how long it took', async () => {
    const { results } = await trialOf();
    const voltage = results.find(({ name }) => name === 'voltage');
    expect(voltage).toMatchObject({ part: 'reading', detail: '15.1 V' });
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

  it('blames a message for no error that a question left', async () => {
    const load = toyLoad({ replies: { 'INP?': '0' } });
    const clock = new VirtualClock(new Date(0));
    const queue: string[] = [];
    const line = new VirtualLine(clock, (message, at) => {
      if (message === 'MEAS:VOLT?') queue.push('-113,"Undefined header"');
      const entry = message === 'SYST:ERR?' ? queue.shift() : undefined;
      if (message === 'MEAS:VOLT?') return [];
      return entry === undefined
        ? load.react(message, at)
        : [{ at: at + 0.01, bytes: Buffer.from(`${entry}\n`) }];
    });
    const { results } = await tryDriver({ driver: toyDriver, connection: line, clock });
    const refused = results.filter(({ verdict }) => verdict !== 'understood' && verdict !== 'not-sent');
    expect(refused.map(({ sent, verdict, received }) => [sent, verdict, received])).toEqual([
      // These two the load doesn't know, either.
      ['POW:PROT 200', 'refused', '-113 "Undefined header"'],
      ['POW:PROT:STAT ON', 'refused', '-113 "Undefined header"'],
      ['MEAS:VOLT?', 'refused', '-113 "Undefined header"'],
    ]);
    // Refused is known at once: it is not asked again in vain.
    expect(line.sent.filter((message) => message === 'MEAS:VOLT?')).toHaveLength(1);
  });

  it('tells nothing more to one that does not take the choice of its channel', async () => {
    const channels = { select: [{ text: 'LAMP {channel}' }], first: 1, last: 2 };
    const load = toyLoad();
    const clock = new VirtualClock(new Date(0));
    const connection = new VirtualLine(clock, load.react);
    const { results } = await tryDriver({
      ...{ driver: { ...toyDriver, channels }, channel: 2, connection, clock },
    });
    expect(results.map(({ part, verdict }) => `${part} ${verdict}`)).toEqual([
      ...['identity understood', 'proof refused'],
    ]);
    expect(results[1]?.detail).toMatch(/^its channel was not chosen: -\d+ .*or "channels"$/);
    expect(load.told).not.toContain('CURR 0');
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
      detail: 'sent; no error queue to ask about it',
    });
  });

  it('ends where nobody answers, having said what makes safe before and after', async () => {
    const { brief, load } = await trialOf({ replies: { '*IDN?': undefined } });
    expect(brief).toEqual(['*IDN?: silent']);
    const again = ['', 'INP OFF', '*IDN?'];
    expect(load.told).toEqual([...again, ...again, ...again, '*IDN?', 'INP OFF']);
  });

  it.each([
    ['that says that it is on', '1', 'refused', 'it says that it is on'],
    ['that does not say whether it is on', undefined, 'silent', '"INP?" was not answered in time'],
    ['of which nobody can read whether it is on', 'PERHAPS', 'unclear', /^expected a reply that fits/],
  ] as const)('tries nothing on a load %s', async (_, reply, verdict, why) => {
    const { load, results } = await trialOf({ replies: { 'INP?': reply } });
    expect(results).toHaveLength(2);
    expect(results[1]).toMatchObject({ part: 'proof', verdict });
    expect(results[1]?.detail).toMatch(why);
    expect(results[1]?.detail).toMatch(
      /; nothing more is tried: switch it off by hand, and mend "input-state"$/,
    );
    const asked = load.told.filter((message) => message !== '*IDN?');
    expect(asked).toEqual(['', 'INP OFF', 'INP?', ...(reply === undefined ? ['INP?'] : []), 'INP OFF']);
  });

  it('stops at a message that switches the input on, and makes safe at once', async () => {
    const operations = { ...toyDriver.operations, 'input-off': [{ text: 'INP ON' }] };
    const { load, results, brief } = await trialOf({ driver: { operations } });
    expect(brief.slice(6)).toEqual([
      'INP ON: understood',
      'INP?: refused 1',
      'FUNC CURR: understood',
      'CURR 0: understood',
      'INP OFF: understood',
      'INP OFF: understood',
      'INP?: understood 0',
    ]);
    expect(load.told.slice(load.told.indexOf('INP ON'))).toEqual([
      ...[
        'INP ON',
        'SYST:ERR?',
        'INP?',
        'INP OFF',
        'SYST:ERR?',
        'FUNC CURR',
        'SYST:ERR?',
        'CURR 0',
        'SYST:ERR?',
      ],
      ...['INP OFF', 'SYST:ERR?', 'INP OFF', 'SYST:ERR?', 'INP?'],
    ]);
    expect(results.at(-1)).toMatchObject({ part: 'proof', detail: 'off' });
  });

  it('leaves constant voltage and protections alone where the driver states no rating for them', async () => {
    const { load, results } = await trialOf({ driver: { ratings: {} } });
    const unsent = results.filter(({ verdict }) => verdict === 'not-sent').slice(1);
    expect(unsent.map(({ sent }) => sent)).toEqual([
      'FUNC VOLT',
      'VOLT {volts}',
      'POW:PROT {watts}',
      'POW:PROT:STAT ON',
    ]);
    expect(unsent[1]?.detail).toBe(
      'the driver states no rated voltage, and no other value is sure to do no harm',
    );
    expect(load.told.filter((message) => /VOLT( |$)|POW/.test(message))).toEqual([]);
  });

  it('has nothing to prove of a meter', async () => {
    const { brief } = await trialOf({
      driver: {
        role: 'meter',
        operations: { 'make-safe': [{ text: '*CLS' }] },
        readings: {
          voltage: { kind: 'number', ask: [{ text: 'MEAS:VOLT?' }], dimension: 'voltage', factor: 1 },
        },
      },
    });
    expect(brief).toEqual([
      '*IDN?: understood NURSERY,LOAD,K1,1.0',
      'SYST:ERR?: understood',
      '*CLS: understood',
      '*CLS: understood',
      'MEAS:VOLT?: understood 1.510000E+01',
      '*CLS: understood',
      'INP OFF: understood',
    ]);
  });

  it('says of another instrument that its name does not fit', async () => {
    const { results } = await trialOf({ driver: { identity: expression('METER') } });
    expect(results[0]).toMatchObject({ verdict: 'unclear', received: 'NURSERY,LOAD,K1,1.0' });
  });

  it('leaves the load at 0 A and off also when whoever listens fails', async () => {
    const load = toyLoad();
    const clock = new VirtualClock(new Date(0));
    const connection = new VirtualLine(clock, load.react);
    const onResult = ({ name }: TrialResult): void => {
      if (name === 'set-voltage') throw new Error('the screen is full');
    };
    await expect(tryDriver({ driver: toyDriver, connection, clock, onResult })).rejects.toThrow('screen');
    expect(load.state).toMatchObject({ input: '0', FUNC: 'CURR', CURR: '0' });
    expect(load.told.slice(-2)).toEqual(['SYST:ERR?', 'INP?']);
  });

  it('ends as it should, proof and all, when it is asked to end half-way', async () => {
    const load = toyLoad();
    const clock = new VirtualClock(new Date(0));
    const connection = new VirtualLine(clock, load.react);
    const stop = new AbortController();
    const onResult = ({ name }: TrialResult): void => {
      if (name === 'set-voltage') stop.abort();
    };
    const { signal } = stop;
    const { results } = await tryDriver({ driver: toyDriver, connection, clock, signal, onResult });
    const sent = results.map((result) => result.sent);
    expect(sent.slice(-6)).toEqual(['VOLT 150', 'FUNC CURR', 'CURR 0', 'INP OFF', 'INP OFF', 'INP?']);
    expect(load.state).toMatchObject({ input: '0', FUNC: 'CURR', CURR: '0' });
  });

  it('shows every byte, ends of line included, in the order in which they went', async () => {
    const { results } = await trialOf();
    const bytes = results
      .find(({ name }) => name === 'set-current')
      ?.bytes.map((each) => `${each.kind} ${Buffer.from(each.bytes).toString('latin1')}`);
    expect(bytes).toEqual(['sent CURR 0\n', 'sent SYST:ERR?\n', 'received 0,"No error"\n']);
  });

  it('puts it in remote before anything else, and hands it back after everything else', async () => {
    const driver: Partial<Driver> = {
      errors: 'none',
      remote: [{ text: 'SYST:REM', rest: 0.2 }],
      local: [{ text: 'SYST:LOC' }],
    };
    const { load, results } = await trialOf({ driver });
    expect(load.told.slice(0, 4)).toEqual(['', 'SYST:REM', 'INP OFF', '*IDN?']);
    expect(load.told.slice(-2)).toEqual(['INP?', 'SYST:LOC']);
    expect(results.at(-1)).toMatchObject({ part: 'local', sent: 'SYST:LOC' });
    expect(results.findLast(({ part }) => part === 'proof')).toMatchObject({ detail: 'off' });
  });

  it('collects what was said and answered for the dialogue of a driver file', async () => {
    const { results } = await trialOf({ replies: { 'MEAS:CURR?': '0.0A' } });
    const exchanges = results.flatMap((result) => result.exchanges);
    expect(exchanges).toContainEqual({ kind: 'identity', answer: 'NURSERY,LOAD,K1,1.0', is: 'understood' });
    expect(exchanges).toContainEqual({
      ...{ kind: 'operation', operation: 'set-voltage', value: 150, sends: ['VOLT 150'] },
    });
    expect(exchanges).toContainEqual({
      ...{ kind: 'reading', reading: 'voltage', sends: ['MEAS:VOLT?'] },
      heard: { answer: '1.510000E+01', is: { kind: 'number', value: 15.1, dimension: 'voltage' } },
    });
    expect(exchanges).toContainEqual({
      ...{ kind: 'reading', reading: 'current', sends: ['MEAS:CURR?'] },
      heard: { answer: '0.0A', is: { kind: 'not-understood' } },
    });
    expect(exchanges).toContainEqual({ kind: 'errors', answer: '-113,"Undefined header"', is: 'error' });
  });
});

it('takes an error that the driver calls harmless for none', async () => {
  const queue = { kind: 'queue', ask: 'SYST:ERR?', clear: expression('^0'), afterwards: [] } as const;
  const errors = { ...queue, harmless: expression('^-113') };
  const { results } = await trialOf({ driver: { errors } });
  const told = results.find(({ name }) => name === 'protect-power');
  expect(told).toMatchObject({ verdict: 'understood', detail: 'what its driver calls harmless' });
  expect(told?.exchanges).toContainEqual({
    ...{ kind: 'errors', answer: '-113,"Undefined header"', is: 'harmless' },
  });
});

describe('what switches on', () => {
  const agreed = async (answer: boolean, replies: Record<string, string> = {}) => {
    const load = toyLoad({ replies });
    const clock = new VirtualClock(new Date(0));
    const connection = new VirtualLine(clock, load.react);
    const asked: string[] = [];
    const { results } = await tryDriver({
      ...{ driver: toyDriver, connection, clock },
      agree: ({ question }) => {
        asked.push(question);
        return Promise.resolve(answer);
      },
    });
    return { load, results, asked };
  };

  it('is tried once where somebody agrees, at 0 A, and off again, proved', async () => {
    const { load, results, asked } = await agreed(true);
    expect(asked).toHaveLength(1);
    expect(asked[0]).toMatch(/set to 0 A.*nothing on its terminals/);
    expect(load.told.filter((message) => message === 'INP ON')).toHaveLength(1);
    const told = load.told.slice(load.told.indexOf('INP ON') - 4).filter((each) => each !== 'SYST:ERR?');
    expect(told).toEqual([
      ...['FUNC CURR', 'CURR 0', 'INP ON', 'INP?', 'INP OFF', 'INP OFF'],
      ...['FUNC CURR', 'CURR 0', 'INP OFF', 'INP OFF', 'INP?'],
    ]);
    const on = results.findLast(({ name }) => name === 'input-state');
    expect(on).toMatchObject({ verdict: 'understood', detail: 'yes' });
    expect(results.at(-1)).toMatchObject({ part: 'proof', detail: 'off' });
    expect(load.state.input).toBe('0');
  });

  it('is not sent where somebody says no', async () => {
    const { load, asked } = await agreed(false);
    expect(asked).toHaveLength(1);
    expect(load.told).not.toContain('INP ON');
  });

  it('is told of when the load then says that it is off', async () => {
    const { results } = await agreed(true, { 'INP?': '0' });
    const on = results.findLast(({ name }) => name === 'input-state');
    expect(on).toMatchObject({ verdict: 'refused', detail: 'it says that it is off' });
  });
});
