import { describe, expect, it } from 'vitest';
import { inWords, measured, type Finding } from '../../../src/analysis/finding.js';
import type { ComparedRecords } from '../../../src/report/comparison.js';
import { comparisonPage } from '../../../src/report/comparison-page/comparison-page.js';
import { tracesFigure } from '../../../src/report/comparison-page/traces-figure.js';
import { evenly } from '../../analysis/evidence-of.js';
import { readChart } from '../chart/read-chart.js';
import { warming } from '../../analysis/soak-events.js';
import { limited, soaked } from '../run-charts/made-results.js';
import { compared, header, moduleWith } from './made-comparisons.js';

const date = new Date('2026-12-02T17:00:00Z');

function page(records: ComparedRecords): string {
  return comparisonPage(records, { program: 'railproof test', date }).replaceAll('\u00a0', ' ');
}

function current(value: number, bound?: 'least'): Finding {
  const budget = [{ name: 'all', kind: 'B', uncertainty: 0.01, degreesOfFreedom: Infinity }] as const;
  const finding = measured('usable-current', 'current', value, budget, { step: 1 });
  return bound === undefined ? finding : { ...finding, bound };
}

function holding(before: readonly Finding[], after: readonly Finding[]): ComparedRecords {
  return compared({ ...moduleWith({}), findings: before }, { ...moduleWith({}), findings: after });
}

const K2 = { ...header, modules: header.modules.map((module) => ({ ...module, name: 'K2' })) };
const twoModules = compared(moduleWith({}), moduleWith({ droop: 0.024, limit: 4.5 }, K2));

describe('whether a finding moved', () => {
  it('is not denied of least values, of which nobody can tell', () => {
    const text = page(holding([current(3.99, 'least')], [current(5.08)]));
    expect(text).toContain('Whether it moved can not be told');
    expect(text).not.toContain('Not seen to move');
    expect(text).not.toContain('not seen to move:');
  });

  it('is told with what is allowed drawn round the earlier value, where that is known', () => {
    const text = page(holding([current(4)], [current(3.9, 'least')]));
    expect(text).toContain('Whether it moved can not be told; allowed is 5 %');
    expect(text.slice(text.indexOf('id="change-1-title"'))).toContain('allowed: 5 %');
    const unknown = page(holding([current(3.9, 'least')], [current(4)]));
    expect(unknown.slice(unknown.indexOf('id="change-1-title"'))).not.toContain('allowed: 5 %');
  });

  it('leads what is within what is allowed, and of which no more can be told, with that question', () => {
    const text = page(holding([current(4, 'least')], [current(4.1, 'least')]));
    expect(text).toContain('<strong>Whether it moved can not be told: </strong>usable-current from at least');
    expect(text).not.toContain('<strong>Can not be told');
  });

  it('can not be told of the droop where one record has none', () => {
    const without = moduleWith({});
    const droopless = {
      ...without,
      findings: without.findings.filter(({ name }) => name !== 'droop-resistance'),
    };
    expect(page(compared(moduleWith({}), droopless))).toMatch(
      /Whether the droop moved can not be told: 18\.\d+ mΩ in the earlier record only\./,
    );
  });

  it('is said of what was seen to, with how often chance alone makes it seem so', () => {
    const text = page(holding([current(4)], [current(4.001)]));
    expect(text).toContain('Nothing was seen to move by more than its uncertainty leaves open.');
    expect(text).toContain('Not seen to move: </strong>usable-current');
    expect(text.match(/of twenty findings that did not move one may seem to\./g)).toHaveLength(2);
    expect(page(holding([current(4)], [current(5)]))).not.toContain('Nothing was seen to move');
  });

  it('is said with the change: of what moved by how much, of what did not what was found', () => {
    expect(page(holding([current(4)], [current(5)]))).toMatch(/It moved by \+1\.000 ± 0\.\d+ A \(\+25 %\);/);
    const undecided = page(holding([current(4)], [current(4.2)].map(widened)));
    expect(undecided).toMatch(/It was not seen to move: \+\S+ ± \S+ m?A/);
  });
});

describe('two modules beside each other', () => {
  const text = page(twoModules);

  it('differ, in each sentence and at each arrow, and none of them moved', () => {
    expect(text).not.toMatch(/\bmoved?\b/i);
    expect(text).not.toContain('changed from');
    expect(text).toContain('What differs and what does not');
    expect(text).toMatch(/The droop differs: 18\.\d+ mΩ earlier and 24\.\d+ mΩ later, by \+6/);
    expect(text).toMatch(/<g class="shift"><title>droop-resistance differs: 18/);
    expect(text).toMatch(/It differs by \+6/);
    expect(text).toContain('of twenty findings that do not differ one may seem to.');
  });

  it('differ in the words of their limits', () => {
    const style = (word: string): readonly Finding[] => [inWords('limit-style', word, { step: 3 })];
    const [one, other] = [limited(() => 5), limited((voltage) => 75 / voltage, evenly(14.7, 8, 12))];
    const records = compared(
      { ...one, findings: style('constant-current') },
      { ...other, findings: style('foldback'), header: { ...other.header, modules: K2.modules } },
    );
    expect(page(records)).toContain(
      'The style of the limit differs: constant-current earlier and foldback later.',
    );
  });
});

describe('a chart of what only one record has', () => {
  it('says in its title which', () => {
    const titleOf = (records: ComparedRecords): string => {
      const figure = tracesFigure(records);
      if (figure === undefined) throw new Error('no traces');
      return readChart(figure).title;
    };
    const [without, withTrace] = [moduleWith({}), limited(() => 5)];
    expect(titleOf(compared(without, withTrace))).toBe('Past the limit, the later record only');
    expect(titleOf(compared(withTrace, without))).toBe('Past the limit, the earlier record only');
    expect(titleOf(compared(withTrace, withTrace))).toBe('Past the limit, both records');
  });
});

describe('what only one record has, or nobody knows wholly', () => {
  it('stands once, with the record that has it', () => {
    const text = page(holding([current(4)], []));
    expect(text).toContain('<strong>In the earlier record only: </strong>usable-current 4.000 A.');
    expect(text).not.toContain('In the later record only');
    expect(text).not.toContain('Whether it moved can not be told: </strong>');
  });

  it('is a least value without an uncertainty in the table, and on no scale of what is allowed', () => {
    const text = page(holding([current(3.99, 'least')], [current(5.08)]));
    expect(text).toContain('at least<br>3.990 A');
    expect(text).not.toContain('id="allowance-title"');
    expect(page(holding([current(4)], [current(5.08)]))).toContain('id="allowance-title"');
  });

  it('has its warming drawn only beside that of the other', () => {
    const soak = soaked({ temperature: (t) => warming(t) + 0.05 * Math.sin(7 * t), until: 1080 });
    expect(page(compared(moduleWith({}), soak))).not.toContain('id="soaks-title"');
    expect(page(compared(soak, soak))).toContain('id="soaks-title"');
  });
});

describe('the table of findings', () => {
  it('shouts what changed and must not, and gives a probability where nobody can tell', () => {
    const wrong = page(holding([current(4)], [current(5)]));
    expect(wrong).toContain('<span class="state bad">CHANGED</span>');
    expect(wrong).not.toContain('with a probability of');
    const open = page(holding([current(4)], [current(4.2)].map(widened)));
    expect(open).toMatch(/within that with a probability of \d/);
  });
});

function widened(finding: Finding): Finding {
  const budget = [{ name: 'all', kind: 'B', uncertainty: 0.3, degreesOfFreedom: Infinity }] as const;
  return measured(finding.name, 'current', Number(finding.value), budget, { step: 1 });
}
