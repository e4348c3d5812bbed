import { describe, expect, it } from 'vitest';
import { comparisonSuite } from '../../../src/report/junit/comparison-suite.js';
import { junitText } from '../../../src/report/junit/junit-text.js';
import { eventsOf } from '../../analysis/evidence-of.js';
import { bonded, damaged, isolated, recordOf, recordsOf } from '../compared-records.js';
import { resultOf, steps } from '../fixed-record.js';
import { counted, readJunit, type SuiteRead } from './read-junit.js';

const before = recordOf('20261101T080000Z-K1-acceptance', bonded);
const after = recordOf('20261201T080000Z-K1-acceptance', isolated);

async function suiteOf(...records: Parameters<typeof recordsOf>): Promise<SuiteRead> {
  const { counts, suites } = readJunit(await junitText([comparisonSuite(recordsOf(...records))]));
  const [suite] = suites;
  if (suite === undefined) throw new Error('no suite');
  expect(counts).toEqual(counted(suites));
  return suite;
}

const shortly = ({ cases }: SuiteRead): readonly string[] =>
  cases.map(({ name, came, type = '' }) => `${name}: ${came} ${type}`.trim());

describe('a comparison for whatever reads test results', () => {
  it('has passed where all is as it should be; what neither record holds is skipped', async () => {
    const suite = await suiteOf(before, after);
    expect(shortly(suite)).toEqual([
      'earth-relation becomes isolated (bonded in the baseline): passed',
      'droop-resistance unchanged within 20 % of the baseline (18.00 mΩ): passed',
      'limit-style: skipped',
    ]);
    expect(suite.name).toBe(`${before.run} and ${after.run}`);
    expect(Object.fromEntries(suite.properties)).toMatchObject({
      tolerance: 'earth-link-removed',
      'same-modules': 'true',
      outcome: 'conforms',
      'before.record': before.run,
      'after.record': after.run,
      'after.ended': 'completed',
    });
  });

  it('fails where something changed that must not, and says from what to what', async () => {
    const { cases } = await suiteOf(before, recordOf('after', damaged));
    expect(cases.find(({ came }) => came === 'failure')).toMatchObject({
      name: 'droop-resistance unchanged within 20 % of the baseline (18.00 mΩ)',
      type: 'does-not-conform',
      message:
        'before 18.00 mΩ, after 36.00 mΩ; change +18.00 ± 0.28 mΩ (+100 %); normalized error 64.94; allowed: 20 %; conformance probability below 0.1 %',
    });
  });

  it('fails as undecided where a record lacks what was to be compared', async () => {
    expect(shortly(await suiteOf(before, recordOf('after', [])))).toContain(
      'earth-relation becomes isolated (bonded in the baseline): failure undecided',
    );
    expect(shortly(await suiteOf(recordOf('one', []), recordOf('other', [])))).toContain(
      'earth-relation becomes isolated: failure undecided',
    );
  });

  it('fails as undecided where nothing is asked: a comparison of nothing has not passed', async () => {
    expect(shortly(await suiteOf(before, after, []))).toEqual(['nothing is asked: failure undecided']);
  });

  it('holds an error for each record that is not whole', async () => {
    const events = eventsOf(steps);
    const cut = { ...resultOf(events.slice(0, 40)), findings: bonded };
    expect(shortly(await suiteOf(cut, after))).toContain('earlier record: the run: error cut-off');
    expect(shortly(await suiteOf(before, { ...cut, findings: isolated }))).toContain(
      'later record: the run: error cut-off',
    );
  });
});
