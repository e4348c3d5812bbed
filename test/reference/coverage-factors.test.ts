import { describe, expect, it } from 'vitest';

import table from '../../fixtures/reference/student-t.json' with { type: 'json' };
import { normalDistribution } from '../../src/statistics/normal.js';
import { coverageFactor } from '../../src/statistics/student-t.js';
import { relativeError } from '../statistics/relative-error.js';

const freedomOf = (dof: number | string) => (dof === 'inf' ? Infinity : Number(dof));
/** Three columns are the fractions within 1, 2 and 3 standard deviations, not the percentages in their heading. */
const deviations: Readonly<Record<string, number>> = { '68.27': 1, '95.45': 2, '99.73': 3 };

// Source: JCGM 100:2008, Table G.2, which is Table B.1 of NIST Technical Note 1297 (1994).
describe('coverage factors against JCGM 100:2008, Table G.2', () => {
  const entries = table.rows.flatMap(({ dof, published }) =>
    Object.entries(published).map(([percent, factor]) => ({ dof: freedomOf(dof), percent, factor })),
  );
  /** The one printed entry that is not the exact value rounded; the exact one is 1.690. */
  const misprint = { dof: 35, percent: '90', factor: 1.7 };
  const isMisprint = ({ dof, percent }: { dof: number; percent: string }) =>
    dof === misprint.dof && percent === misprint.percent;

  it('rounds to every printed entry but the one known to be off', () => {
    const sound = entries.filter((entry) => !isMisprint(entry));
    expect(sound).toHaveLength(28 * 6 - 1);
    for (const { dof, percent, factor } of sound) {
      const sigmas = deviations[percent];
      const fraction = sigmas === undefined ? Number(percent) / 100 : 1 - 2 * normalDistribution(-sigmas);
      // Most entries are printed with two decimals, 1.645 and its like with three.
      const unit = Number.isInteger(Math.round(factor * 1e6) / 1e4) ? 0.01 : 0.001;
      expect(Math.abs(coverageFactor(dof, fraction) - factor), `${dof} at ${percent} %`).toBeLessThanOrEqual(
        unit / 2 + 1e-12,
      );
    }
  });

  it('differs from the printed 1.70 at 35 degrees of freedom and 90 %, where the exact value is 1.690', () => {
    expect(entries.find(isMisprint)?.factor).toBe(misprint.factor);
    expect(coverageFactor(35, 0.9).toFixed(3)).toBe('1.690');
    expect(
      table.published_entries_that_do_not_equal_the_rounded_exact_value.map(({ dof, p }) => [dof, p]),
    ).toEqual([['35', '90']]);
  });

  // Source: qt() of R, as the fixture says; printed there with fifteen digits.
  it('agrees with R to 1e-10', () => {
    for (const { dof, computed_nominal_p } of table.rows) {
      for (const [percent, factor] of Object.entries(computed_nominal_p)) {
        const found = coverageFactor(freedomOf(dof), Number(percent) / 100);
        expect(relativeError(found, factor), `${dof} at ${percent} %`).toBeLessThan(1e-10);
      }
    }
  });
});
