import { describe, expect, it } from 'vitest';
import type { WatchmanReport } from '../../src/record/watchman-report.js';
import { resultAsJson } from '../../src/report/json.js';
import { plainStyle } from '../../src/report/style.js';
import { resultAsText } from '../../src/report/text.js';
import { watchmanText } from '../../src/report/watchman-text.js';
import { eventsOf } from '../analysis/evidence-of.js';
import { resultOf, steps } from './fixed-record.js';

const off: WatchmanReport = {
  format: 'railproof/watchman 1',
  noticed: '2026-11-30T09:15:07.300Z',
  why: 'runner-vanished',
  address: 'tcp://127.0.0.1:5025',
  attempts: 1,
  outcome: 'off',
  reason: null,
  took: 0.314,
};
const unconfirmed: WatchmanReport = {
  ...off,
  outcome: 'unconfirmed',
  reason: 'nobody answers \u001b[2J',
  took: 60,
};

describe('what the watchman did', () => {
  it.each([
    [off, 'the program vanished; the watchman switched the load off 0.3 s later and read it back'],
    [
      { ...off, took: 0.012 },
      'the program vanished; the watchman switched the load off less than 0.1 s later and read it back',
    ],
    [
      { ...off, why: 'runner-stopped-beating' },
      'the program hung with the load on and was ended; the watchman switched the load off 0.3 s later and read it back',
    ],
    [
      { ...unconfirmed, reason: 'nobody answers' },
      'the program vanished; the watchman could not confirm that the load is off: nobody answers',
    ],
  ] as const)('is a sentence', (report, text) => {
    expect(watchmanText(report)).toBe(text);
  });

  const events = eventsOf(steps);
  const on = { t: 99, event: 'input', state: 'on', confirmed: true } as const;
  const cutWhileOn = resultOf([...events.slice(0, 50), on]);

  it('stands in the report of a record that was cut off, in place of a load that is on', () => {
    expect(resultAsText(cutWhileOn, plainStyle)).toContain('THE LOAD WAS ON');
    const text = resultAsText({ ...cutWhileOn, watchman: off }, plainStyle);
    expect(text).toContain(`WATCHMAN: ${watchmanText(off)}.`);
    expect(text).not.toContain('THE LOAD');
  });

  it('says what to do where the load may be on, and steers no terminal', () => {
    const text = resultAsText({ ...cutWhileOn, watchman: unconfirmed }, plainStyle);
    expect(text).toContain('THE LOAD MAY BE ON');
    expect(text).toContain('nobody answers \\u001b[2J');
    expect(text).not.toContain('\u001b');
  });

  it('is part of the JSON, there only', () => {
    expect(resultAsJson({ ...cutWhileOn, watchman: off })).toMatchObject({
      ended: 'cut-off',
      watchman: { noticed: off.noticed, why: 'runner-vanished', outcome: 'off', reason: null, took: 0.314 },
    });
    expect(resultAsJson(cutWhileOn)).not.toHaveProperty('watchman');
  });
});
