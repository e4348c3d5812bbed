import { describe, expect, it } from 'vitest';
import { comparisonAsText } from '../../src/report/comparison-text.js';
import { outcomeOf } from '../../src/report/comparison.js';
import { plainStyle } from '../../src/report/style.js';
import { relationOf } from '../judgement/a-baseline.js';
import { header } from './fixed-record.js';
import { bonded, damaged, isolated, recordOf, recordsOf } from './compared-records.js';

const before = recordOf('20261101T080000Z-K1-acceptance', bonded);
const text = (...records: Parameters<typeof recordsOf>) =>
  comparisonAsText(recordsOf(...records), plainStyle);

describe('the report of a comparison', () => {
  it('begins with the answer and shows every finding side by side', () => {
    expect(text(before, recordOf('20261201T080000Z-K1-acceptance', damaged))).toBe(
      `K1: what changed
before  20261101T080000Z-K1-acceptance  real-limit  2026-12-01 08:30 UTC
after   20261201T080000Z-K1-acceptance  real-limit  2026-12-01 08:30 UTC
tolerance earth-link-removed: After removing the earth link

NOT AS IT SHOULD BE.
droop-resistance moved from 18.00 mΩ to 36.00 mΩ, by +18.00 ± 0.28 mΩ (+100 %); allowed is 20 %.
earth-relation became isolated, as it must.

Findings   U = √(U₁² + U₂²), 95 %; E_n = Δ/U
  finding             before     after  difference ± U               E_n  allowed           verdict
  earth-relation      bonded  isolated                                    becomes isolated  changed
  droop-resistance  18.00 mΩ  36.00 mΩ  +18.00 ± 0.28 mΩ (+100 %)  64.94  20 %              CHANGED

In neither record: limit-style.
`,
    );
  });

  it.each([80, 40])('names each number below its finding where %s columns do not hold a row', (columns) => {
    const records = recordsOf(before, recordOf('20261201T080000Z-K1-acceptance', damaged));
    const lines = comparisonAsText(records, plainStyle, columns).split('\n');
    const at = lines.indexOf('  droop-resistance  CHANGED');
    expect(lines[at + 1]).toBe(
      '    before 18.00 mΩ; after 36.00 mΩ; difference +18.00 ± 0.28 mΩ (+100 %); E_n 64.94; allowed 20 %',
    );
    expect(lines[at - 2]).toBe('  earth-relation    changed');
    expect(comparisonAsText(records, plainStyle, 200)).toBe(comparisonAsText(records, plainStyle));
  });

  it('says in words when all is as it should be, and when not all can be told', () => {
    expect(text(before, recordOf('after', isolated))).toContain('\nAs it should be.\n');
    expect(text(before, recordOf('after', []))).toContain('\nNot all can be told.\n');
    expect(text(recordOf('one', []), recordOf('other', []))).toContain('the records hold too little');
  });

  it('warns where the modules are not the same', () => {
    const [first] = header.modules;
    if (first === undefined) throw new Error('the record has a module');
    const other = recordOf('after', isolated, { header: { ...header, modules: [{ ...first, name: 'K2' }] } });
    expect(text(before, other)).toContain(
      'DIFFERENT MODULES: the earlier record is of K1, the later one of K2.',
    );
    expect(text(before, other)).toMatch(/^K1 and K2: what differs\n/);
    expect(text(before, other)).toContain('Nothing else differs beyond its tolerance (1 compared).');
    const worse = { ...other, findings: damaged };
    expect(text(before, worse)).toContain(
      'droop-resistance differs, 18.00 mΩ in the earlier record and 36.00 mΩ in the later one, by',
    );
    expect(text(before, worse)).not.toContain(' moved ');
  });

  it('says which record is damaged, cut off or stopped, and never that all is well by one that is not whole', () => {
    const whole = recordOf('after', isolated);
    const { evidence } = whole;
    const damage = recordOf('after', isolated, {
      integrity: { kind: 'damaged', lines: 3, bytes: 9, line: 4, problem: 'a seal does not hold' },
    });
    const cut = recordOf('earlier', bonded, {
      evidence: { ...evidence, ended: undefined },
      integrity: { kind: 'cut-off', lines: 3, bytes: 9, tornBytes: 0 },
    });
    expect(text(before, damage)).toContain(
      'DAMAGED RECORD: after, line 4 of its journal: a seal does not hold.',
    );
    expect(text(cut, whole)).toContain('CUT OFF: earlier ends without an end');
    expect(text(cut, whole)).toContain('Not all can be told.');
    expect(outcomeOf(recordsOf(before, whole))).toBe('conforms');
    expect(outcomeOf(recordsOf(before, damage))).toBe('undecided');
    expect(outcomeOf(recordsOf(cut, whole))).toBe('undecided');
    expect(outcomeOf(recordsOf(cut, recordOf('after', damaged)))).toBe('does-not-conform');
    const { ended } = evidence;
    if (ended === undefined) throw new Error('the record has an end');
    const stopped = recordOf('after', isolated, {
      evidence: { ...evidence, ended: { ...ended, how: 'stopped', reason: 'the operator' } },
    });
    expect(text(before, stopped)).toContain('STOPPED: after: the operator');
    expect(outcomeOf(recordsOf(before, stopped))).toBe('undecided');
    expect(text(before, stopped)).toContain('Not all can be told.');
    expect(text(before, stopped)).toContain('What the later record does not show, not being whole');
    expect(text(stopped, stopped)).toContain('What both records do not show, not being whole');
    expect(text(before, whole)).not.toContain('does not show');
  });

  it('lets nothing in a record steer the terminal', () => {
    const nasty = recordOf('after\u001b[2J', [relationOf('iso\u001b[2Jlated')]);
    // eslint-disable-next-line no-control-regex
    expect(text(before, nasty)).not.toMatch(/\u001b/);
  });
});
