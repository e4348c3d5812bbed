import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { VirtualClock } from '../../src/clock/virtual-clock.js';
import { parseDriver } from '../../src/files/read-driver.js';
import { matchDrivers } from '../../src/instrument/match.js';
import { harmlessQuestions } from '../../src/instrument/match-questions.js';
import { VirtualLine } from './fixtures/virtual-line.js';

const folder = new URL('../../drivers/', import.meta.url);
const drivers = readdirSync(folder)
  .filter((file) => file.endsWith('.yaml'))
  .map((file) => parseDriver(readFileSync(new URL(file, folder), 'utf8'), file));

/** Answers what is in the table and keeps an error of all else. */
async function matched(answers: Readonly<Record<string, string>>) {
  const clock = new VirtualClock(new Date(0));
  const queue: string[] = [];
  const line = new VirtualLine(clock, (message, at) => {
    const known = message === 'SYST:ERR?' ? (queue.shift() ?? '0,"No error"') : answers[message];
    if (message !== '' && known === undefined) queue.push('-113,"Undefined header"');
    return known === undefined ? [] : [{ at: at + 0.01, bytes: Buffer.from(`${known}\n`) }];
  });
  const match = await matchDrivers({ drivers, connection: line, clock });
  return { match, sent: line.sent, queue, took: clock.now() };
}

const load = {
  ...{ '*IDN?': 'NURSERY,LOAD,K1,1.0', 'INP?': '0', 'FUNC?': 'CURR', 'CURR?': '0', 'VOLT?': '0' },
  ...{ 'MEAS:VOLT?': '15.2', 'MEAS:CURR?': '0.0', 'CURR:PROT?': '40' },
};
const meter = { '*IDN?': 'NURSERY,METER,M1,1.0', 'READ?': '15.2' };

describe('finding the family of an instrument', () => {
  it('names the one that it understands most of, and leaves no error of ours behind', async () => {
    const { match, queue, took } = await matched(load);
    expect(match).toMatchObject({ kind: 'answered', identity: 'NURSERY,LOAD,K1,1.0' });
    const names = match.kind === 'answered' ? match.families.map(({ driver }) => driver) : [];
    expect(names[0]).toBe('load-input-scpi');
    expect(queue).toEqual([]);
    expect(took).toBeLessThan(60);
  });

  it('sends nothing but questions', async () => {
    for (const answers of [load, meter, { '*IDN?': 'NURSERY' }]) {
      const { sent } = await matched(answers);
      expect(sent.filter((message) => message !== '' && !/^[*A-Z:]+\?$/.test(message))).toEqual([]);
      expect(sent.filter((message) => /RES|\b(ON|OFF)\b/.test(message))).toEqual([]);
    }
  });

  it('asks a meter that is set to something else for no measurement, and says so', async () => {
    const { match, sent } = await matched({ ...meter, 'CONF?': '"RES +1.0E+03,+1.0E-03"' });
    expect(sent.filter((message) => /^(READ|MEAS)/.test(message))).toEqual([]);
    expect(match).toMatchObject({ left: [expect.stringContaining('measures something else')] });
  });

  it('finds a meter that is set to dc voltage by what it reads', async () => {
    const { match } = await matched({ ...meter, 'CONF?': '"VOLT +1.0E+01,+1.0E-05"' });
    expect(match).toMatchObject({ families: [{ driver: 'meter-read-scpi' }, {}] });
  });

  it('does not ask with READ? what does not say what it would measure', async () => {
    const { sent } = await matched({ ...meter, 'MEAS:VOLT:DC?': '15.2' });
    expect(sent).toContain('MEAS:VOLT:DC?');
    expect(sent).not.toContain('READ?');
  });

  it('says that nothing answers, after each end of line', async () => {
    const { match, sent } = await matched({});
    expect(match).toEqual({ kind: 'silent', repeats: false });
    expect(sent.filter((message) => message === '*IDN?')).toHaveLength(3);
  });
});

it('no question of any family sets anything, or measures a resistance', () => {
  const questions = drivers.flatMap((driver) => harmlessQuestions(driver).map(({ text }) => text));
  expect(questions.length).toBeGreaterThan(20);
  for (const question of questions) expect(question).toMatch(/^[*A-Z:]+\?$/);
  expect(questions.filter((question) => /RES|TRIG|INIT|RST/.test(question))).toEqual([]);
});
