import { describe, expect, it } from 'vitest';
import type { TimedEvent } from '../../../src/record/journal-event.js';
import { junitText } from '../../../src/report/junit/junit-text.js';
import { runSuite } from '../../../src/report/junit/run-suite.js';
import type { Result } from '../../../src/report/result.js';
import { eventsOf } from '../../analysis/evidence-of.js';
import { header, resultOf, steps } from '../fixed-record.js';
import { counted, readJunit, type SuiteRead } from './read-junit.js';

const events = eventsOf(steps);
const whole = resultOf();

async function suiteOf(result: Result): Promise<SuiteRead> {
  const { counts, suites } = readJunit(await junitText([runSuite(result)]));
  const [suite, ...more] = suites;
  if (suite === undefined || more.length > 0) throw new Error(`${suites.length} suites of one record`);
  expect(suite.counts).toEqual(counted(suites));
  expect(counts).toEqual(suite.counts);
  return suite;
}

/** The cases that are no decisions: name, what it came to, its word, and what is said. */
async function troublesOf(result: Result): Promise<readonly string[]> {
  const { cases } = await suiteOf(result);
  return cases
    .filter(({ name }) => name.startsWith('the '))
    .map(({ name, came, type = '', message = '' }) => `${name}: ${came} ${type}: ${message}`);
}

const endedBy = (
  how: 'stopped' | 'failed',
  reason: string,
  ...before: readonly TimedEvent[]
): readonly TimedEvent[] => [
  ...events.slice(0, Math.floor(events.length * 0.4)),
  ...before,
  { t: 20, event: 'ended', how, reason, status: how === 'stopped' ? 3 : 69 },
];

describe('a record for whatever reads test results', () => {
  it('has a case for each decision: what conforms has passed, all else is a failure with its reasons', async () => {
    const { cases, ...suite } = await suiteOf(whole);
    expect(whole.decisions.map(({ outcome }) => outcome)).toEqual([
      'conforms',
      'undecided',
      'does-not-conform',
      'does-not-conform',
      'undecided',
    ]);
    expect(cases.map(({ name, came, type }) => [name, came, type])).toEqual(
      whole.decisions.map(({ finding, requirement, outcome }) => [
        `${finding} ${requirement}`,
        ...(outcome === 'conforms' ? ['passed', undefined] : ['failure', outcome]),
      ]),
    );
    expect(new Set(cases.map(({ group }) => group))).toEqual(new Set(['K1.real-limit']));
    expect(suite).toMatchObject({ name: whole.run, timestamp: header.began, time: '38' });
    expect(whole.evidence.lasted).toBe(38);
    const said = (finding: string): string | undefined => {
      const one = cases.find(({ name }) => name.startsWith(`${finding} `));
      return one?.out ?? one?.message;
    };
    expect(said('usable-current')).toBe(
      '5.075 ± 0.086 A (95 %: 4.989 A to 5.161 A); required: at least 4 A (100 % of rated-current); conformance probability above 99.9 %',
    );
    expect(said('limit-style')).toBe('hiccup; required: is constant-current; it is hiccup');
    expect(said('temperature-rise')).toBe('required: at most 40 K; was not measured');
  });

  it('says what was tested, with what, and whether the record can be believed', async () => {
    const properties = Object.fromEntries((await suiteOf(whole)).properties);
    expect(properties).toMatchObject({
      record: whole.run,
      program: 'railproof 0.1.0',
      module: 'K1',
      procedure: 'real-limit',
      simulated: 'true',
      'instrument.load': 'a load, load-scpi, simulated:',
      ended: 'completed',
      outcome: 'does-not-conform',
      integrity: 'whole',
      readings: String(whole.evidence.readings),
    });
  });

  it('of which nothing was required has neither passed nor failed', async () => {
    const { cases, counts } = await suiteOf(resultOf(events, { ...header, criteria: [] }));
    expect(counts).toEqual({ tests: 1, failures: 0, errors: 0, skipped: 1 });
    expect(cases[0]).toMatchObject({ name: 'nothing is required', came: 'skipped' });
  });

  it('that was stopped is an error beside what is undecided', async () => {
    const stopped = resultOf(endedBy('stopped', 'stopped with Ctrl-C'));
    expect(await troublesOf(stopped)).toEqual([
      'the run: error stopped: the run was stopped: stopped with Ctrl-C',
    ]);
    expect((await suiteOf(stopped)).counts).toMatchObject({ errors: 1 });
  });

  it('that failed with the load on says so, and what switches it off', async () => {
    const on: TimedEvent = { t: 19, event: 'input', state: 'on', confirmed: true };
    expect(await troublesOf(resultOf(endedBy('failed', 'connection lost', on)))).toEqual([
      'the run: error failed: the run failed: connection lost',
      'the load: error not-confirmed-off: THE LOAD MAY BE ON: nobody could read back that it went off. `railproof safe --bench <file>` switches it off.',
    ]);
  });

  it('that is cut off is an error, with what the watchman did', async () => {
    const cut = resultOf(events.slice(0, 40));
    expect(await troublesOf(cut)).toEqual([
      'the run: error cut-off: the record is cut off, and the run has no end',
    ]);
    const watchman = {
      format: 'railproof/watchman 1',
      noticed: '2026-12-01T08:31:00.000Z',
      why: 'runner-vanished',
      address: 'tcp://127.0.0.1:5025',
      attempts: 3,
      outcome: 'unconfirmed',
      reason: 'nothing listens on this port',
      took: 9,
    } as const;
    expect(await troublesOf({ ...cut, watchman })).toEqual([
      'the run: error cut-off: the record is cut off, and the run has no end: the program vanished; the watchman could not confirm that the load is off: nothing listens on this port',
      'the load: error not-confirmed-off: THE LOAD MAY BE ON: `railproof safe --bench <file>` switches it off.',
    ]);
  });

  it('that is damaged is an error, whatever its decisions say', async () => {
    const integrity = {
      kind: 'damaged',
      lines: 3,
      bytes: 0,
      line: 4,
      problem: 'its seal is broken',
    } as const;
    const troubles = await troublesOf({ ...whole, integrity });
    expect(troubles).toContain('the journal: error damaged: line 4 of the journal: its seal is broken');
  });
});
